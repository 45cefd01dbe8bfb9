import type { Field, Section, Setup } from '@gapwright/fem-core';
import { meanOver, solveSection } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { AIR, box, relativeError } from './sections.js';

const [HALF_PITCH, GAP, HEIGHT, DISC] = [0.025, 0.008, 0.01, 0.015];

/** Quarter of a pole with a disc of the given permeability, or with the natural condition in its place. */
function solvePole(muR: number | 'natural'): Field {
  const top = GAP + HEIGHT;
  const disc = muR === 'natural' ? [] : [box('disc', 0, top, HALF_PITCH, DISC, 0.0018)];
  const section: Section = {
    outline: { kind: 'rectangle', from: [0, 0], to: [HALF_PITCH, muR === 'natural' ? top : top + DISC] },
    background: 'air',
    maxEdge: 0.0018,
    regions: [box('winding', 0, 0, 0.01, 0.006), box('magnet', 0, GAP, 0.018, HEIGHT), ...disc],
  };
  const setup: Setup = {
    materials: {
      air: AIR,
      winding: AIR,
      magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.25] },
      disc: { kind: 'linear', muR: muR === 'natural' ? 1 : muR },
    },
    edges: {
      bottom: { kind: 'crossing' },
      right: { kind: 'crossing' },
      ...(muR === 'natural' ? { top: { kind: 'crossing' } as const } : {}),
    },
  };
  const field = solveSection(section, setup);
  expect(field.report.converged).toBe(true);
  return field;
}

test('with growing permeability the discs tend to the natural condition on their faces, the gap closing like 1/mu_r', () => {
  const limit = meanOver(solvePole('natural'), ['winding']).by;
  const short = [100, 1000, 1e4, 1e5, 1e6].map((muR) => limit - meanOver(solvePole(muR), ['winding']).by);
  for (const gap of short.slice(0, 3)) expect(gap).toBeGreaterThan(0); // a better disc, a stronger field
  // ten times the permeability, a tenth of what is missing
  expect(short[0] / short[1]).toBeGreaterThan(8);
  expect(short[0] / short[1]).toBeLessThan(12);
  expect(short[1] / short[2]).toBeGreaterThan(8);
  expect(short[1] / short[2]).toBeLessThan(12);
  expect(Math.abs(short[4]) / limit).toBeLessThan(2e-5);
});

test('a disc of mu_r 1 is no disc', () => {
  const far = 0.1;
  const draw = (regions: Section['regions']): Section => ({
    outline: { kind: 'rectangle', from: [0, 0], to: [HALF_PITCH, far] },
    background: 'air',
    maxEdge: 0.0025,
    regions: [box('magnet', 0, GAP, 0.018, HEIGHT), ...regions],
  });
  const setup: Setup = {
    materials: { air: AIR, magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.25] }, disc: AIR },
    edges: { bottom: { kind: 'crossing' }, right: { kind: 'crossing' } },
  };
  const without = meanOver(solveSection(draw([]), setup), ['magnet']).by;
  const disc = box('disc', 0, GAP + HEIGHT, HALF_PITCH, DISC);
  expect(relativeError(meanOver(solveSection(draw([disc]), setup), ['magnet']).by, without)).toBeLessThan(2e-3);
});
