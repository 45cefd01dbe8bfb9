import type { Setup } from '@gapwright/fem-core';
import { buildBHCurve, MU0 } from '@gapwright/fem-core';
import type { System } from '@gapwright/fem-core/equations';
import { assemble } from '@gapwright/fem-core/equations';
import { meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { addSteel, laySteel } from '../../../packages/fem-core/src/assembly/steel.js';
import { assembleFrozen } from '../../../packages/fem-core/src/assembly/system.js';
import { STEEL } from '../../laws/sections.js';
import { largest, potentialAt, sources, systemOf, tangentAt, tile, unevenField } from './tile.js';

/** Rows at uneven distances, over nine decades of field strength. */
const UNEVEN = {
  kind: 'curve',
  curve: buildBHCurve(
    [1e-4, 0.01, 0.011, 0.3, 0.9, 0.9001, 1.4, 1.7, 1.71, 2.2].map((b) => [120 * b + 40 * b ** 9, b] as const),
  ),
} as const;

/** Two curves, on straight and on curved triangles. */
const setup: Setup = { ...sources, materials: { ...sources.materials, steel: STEEL, bar: UNEVEN, air: UNEVEN } };
const mesh = meshSection({ ...tile, maxEdge: 0.004 });
const system = systemOf(mesh, setup);
const { steel } = system.workspace;
if (steel === undefined) throw new Error('no steel to test');

const lay = (plain: boolean, triangles = system.nonlinear) =>
  laySteel(mesh, system.materials, triangles, system.scatter, system.pattern.row.length, plain);

function results(
  plain: boolean,
  potential: Float64Array,
  triangles = system.nonlinear,
): { residual: Float64Array; tangent: Float64Array } {
  const one = lay(plain, triangles);
  one.potential.set(potential);
  addSteel(one, true);
  return { residual: one.residual, tangent: one.tangent };
}

test('the tile has triangles of two curves, straight ones of both and curved ones of one', () => {
  expect(steel.runs.length).toBe(3);
  expect(system.workspace.others).toHaveLength(0);
  expect(system.nonlinear.length).toBeLessThan(triangleCount(mesh));
});

test('kernel and twin give the same bits, from no field to one far beyond saturation', () => {
  for (const density of [0, 1e-12, 1e-9, 1e-6, 1e-3, 0.05, 0.5, 1.5, 2.5, 40, 1e6]) {
    const potential = potentialAt(system, unevenField(system, density));
    // One or the other is an odd number of its curve.
    for (const triangles of [system.nonlinear, system.nonlinear.subarray(1)]) {
      expect(results(false, potential, triangles)).toEqual(results(true, potential, triangles));
    }
  }
});

test('numbers that are none come out as such, and so do fields beyond all numbers', () => {
  for (const bad of [Number.NaN, Infinity, 1e200]) {
    const potential = potentialAt(system, unevenField(system, 1)).map((a, i) => (i % 7 === 0 ? bad : a));
    for (const plain of [false, true]) expect(results(plain, potential).residual.every(Number.isFinite)).toBe(false);
  }
});

describe('what the kernel adds is what quadrature with the shape functions and the material law gives', () => {
  const slow = (u: Float64Array): Float64Array =>
    assembleFrozen(system, potentialAt(system, u), 'tangent', new Float64Array(system.pattern.row.length));

  test('the tangent, at any size of field', () => {
    fc.assert(
      fc.property(fc.double({ min: -10, max: 2, noNaN: true }), (decade) => {
        const u = unevenField(system, 10 ** decade);
        const tangent = new Float64Array(system.pattern.row.length);
        assemble(system, potentialAt(system, u), new Float64Array(u.length), tangent);
        const expected = slow(u);
        expect(largest(tangent.map((value, p) => value - expected[p]))).toBeLessThan(1e-12 * largest(expected));
      }),
      { numRuns: 30, seed: 5 },
    );
  });

  test('the residual: that of the chord reluctivity, H = nu B', () => {
    for (const density of [1e-8, 0.02, 1.1, 3]) {
      const u = unevenField(system, density);
      const chord = assembleFrozen(
        system,
        potentialAt(system, u),
        'chord',
        new Float64Array(system.pattern.row.length),
      );
      const scale = largest(chord) * largest(u) + largest(system.offset);
      expect(largest(difference(system, u, chord))).toBeLessThan(1e-12 * scale);
    }
  });
});

/** residual(u) - K u - offset */
function difference(
  { pattern: { n, start, row }, offset, ...rest }: System,
  u: Float64Array,
  k: Float64Array,
): Float64Array {
  const out = new Float64Array(n);
  assemble({ pattern: { n, start, row }, offset, ...rest }, potentialAt(system, u), out);
  for (let j = 0; j < n; j++) {
    out[j] -= offset[j];
    for (let p = start[j]; p < start[j + 1]; p++) {
      out[row[p]] -= k[p] * u[j];
      if (row[p] !== j) out[j] -= k[p] * u[row[p]];
    }
  }
  return out;
}

test('frozen matrices of what does not saturate are the one of all fields', () => {
  const linear = systemOf(mesh, {
    ...sources,
    materials: { ...sources.materials, steel: { kind: 'linear', muR: 300 } },
  });
  const potential = potentialAt(linear, unevenField(linear, 1));
  for (const which of ['chord', 'tangent'] as const) {
    expect(assembleFrozen(linear, potential, which, new Float64Array(linear.linearValues.length))).toEqual(
      linear.linearValues,
    );
  }
});

test('two systems may take turns: neither disturbs the other', () => {
  const other = systemOf(meshSection({ ...tile, maxEdge: 0.005 }), setup);
  const [u, v] = [unevenField(system, 1), unevenField(other, 0.3)];
  const turns = [system, other, system, other].map((one) => {
    const residual = new Float64Array(one.unknowns.count);
    assemble(one, potentialAt(one, one === system ? u : v), residual);
    return residual;
  });
  expect(turns[2]).toEqual(turns[0]);
  expect(turns[3]).toEqual(turns[1]);
});

test('sides that tie leave the triangles along them to quadrature, and the tangent is symmetric about them all the same', () => {
  const edges = { left: { kind: 'reversing' }, right: { kind: 'reversing' } } as const;
  const tied = systemOf(meshSection(tile), { ...setup, edges });
  expect(tied.workspace.others.length).toBeGreaterThan(0);
  const square = tangentAt(tied, unevenField(tied, 1));
  expect(largest(square)).toBeLessThan(1 / MU0 / 1e-3);
});
