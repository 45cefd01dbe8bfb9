import type { Section } from '@gapwright/fem-core';
import { MU0, solveSection } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import { expect, test } from 'vitest';
import { measureOrders, waveField } from '../../packages/fem-core/src/verify/orders.js';
import { check } from './table.js';

const SOURCE =
  'interpolation theory of linear and quadratic elements (Ciarlet, The Finite Element Method for Elliptic Problems, 1978, from memory)';

test.each([
  ['no current', 0],
  ['uniform current', 4 / MU0],
])('orders of convergence with elements of order p: p + 1 in A, p in B; %s', (name, density) => {
  const orders = measureOrders(waveField(density));
  expect(orders.map(({ elements }) => elements)).toEqual(['linear', 'quadratic', 'curved quadratic']);
  // Curved elements gain from the arcs' own error, which falls with the fourth power.
  for (const { elements, potential, field, expected, holds } of orders) {
    const given = { case: `${elements} elements, ${name}`, source: SOURCE };
    check({ ...given, quantity: 'order of A in L2', expected: expected.potential, got: potential, scale: 1 }, 0.4);
    check({ ...given, quantity: 'order of B in L2', expected: expected.field, got: field, scale: 1 }, 0.25);
    expect(holds).toBe(true);
  }
});

test('a quadratic potential is reproduced to rounding on straight elements', () => {
  const exact = (x: number, y: number): number => 0.3 * x * x - 0.7 * y * y + 0.2 * x * y + x - 2 * y;
  const square: Section = {
    outline: { kind: 'rectangle', from: [-0.5, -0.5], to: [0.5, 0.5] },
    background: 'air',
    maxEdge: 0.2,
    regions: [],
  };
  const side = { kind: 'potential', value: exact } as const;
  const field = solveSection(square, {
    materials: { air: { kind: 'linear', muR: 1 } },
    currentDensity: { air: 0.8 / MU0 }, // -div grad A = 0.8
    edges: { left: side, right: side, top: side, bottom: side },
  });
  let worst = 0;
  forEachSample(field, 'all', (s) => {
    worst = Math.max(worst, Math.abs(s.a - exact(s.x, s.y)));
  });
  const given = { case: 'quadratic potential', quantity: 'largest error of A', source: 'the elements contain it' };
  check({ ...given, expected: 0, got: worst, scale: 1 }, 1e-12);
});
