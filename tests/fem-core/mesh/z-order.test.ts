import type { Section } from '@gapwright/fem-core';
import { meshSection } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { zOrder } from '../../../packages/fem-core/src/mesh/z-order.js';

type Place = readonly [x: number, y: number];

/** Morton's number by its definition: the eleven binary digits of y and x in turn. */
function interleaved([x, y]: Place): number {
  const [across, up] = [x, y].map((value) => value.toString(2).padStart(11, '0'));
  return Number.parseInt(Array.from(across, (digit, i) => up[i] + digit).join(''), 2);
}

describe("order along Morton's curve", () => {
  // From 1024 places on the grid has 2048 cells a side; opposite corners of it make cells and whole numbers the same.
  const step = fc.constantFrom(1, 16, 128); // 128: many places share a cell
  const places = step.chain((by) => {
    const coordinate = fc.integer({ min: 0, max: Math.floor(2047 / by) }).map((i) => i * by);
    return fc
      .array(fc.tuple(coordinate, coordinate), { minLength: 1022, maxLength: 1100 })
      .map((inner): Place[] => [[0, 0], ...inner, [2047, 2047]]);
  });

  test('sorts by the digits of both coordinates in turn, and keeps the order within a cell', () => {
    fc.assert(
      fc.property(places, (given) => {
        const keys = given.map(interleaved);
        const wanted = keys.map((_, i) => i).sort((i, j) => keys[i] - keys[j] || i - j);
        expect(Array.from(zOrder(Float64Array.from(given.flat())))).toEqual(wanted);
      }),
      { numRuns: 15, seed: 1 },
    );
  });

  test.each([0, 1, 2, 3, 1000, 5000])('names each of %i places on a line once, in turn', (n) => {
    const xy = Float64Array.from({ length: 2 * n }, (_, i) => (i % 2 === 0 ? 1e-9 * i - 3 : 5));
    expect(Array.from(zOrder(xy))).toEqual(Array.from({ length: n }, (_, i) => i));
  });

  test('keeps the order of places that are all one', () => {
    expect(Array.from(zOrder(new Float64Array(8).fill(0.1)))).toEqual([0, 1, 2, 3]);
  });
});

test('triangles that are neighbours, and the ends of an edge, have near numbers in a mesh', () => {
  const section: Section = {
    outline: { kind: 'rectangle', from: [0, 0], to: [1, 1] },
    background: 'air',
    maxEdge: 0.03,
    regions: [{ name: 'disc', shape: { kind: 'circle', centre: [0.4, 0.5], radius: 0.2 }, maxEdge: 0.01 }],
  };
  const { neighbours, edges, triangleToEdge } = meshSection(section);
  const median = (values: readonly number[]) => [...values].sort((a, b) => a - b)[values.length >> 1];
  const jumps = Array.from(neighbours, (u, i) => Math.abs(u - Math.floor(i / 3))).filter((_, i) => neighbours[i] >= 0);
  const spans = Array.from({ length: edges.length / 2 }, (_, e) => Math.abs(edges[2 * e] - edges[2 * e + 1]));
  const spread = Array.from(triangleToEdge, (e, i) => Math.abs(e - triangleToEdge[3 * Math.floor(i / 3)]));
  for (const steps of [jumps, spans, spread]) expect(median(steps)).toBeLessThan(10);
});
