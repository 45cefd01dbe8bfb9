import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  chainPieces,
  choosePatches,
  outlineAbove,
  type Trace,
  traceLevel,
} from '../../../packages/fem-core/src/io/contours.js';
import { buildDrawingMesh, type DrawingMesh, valuesAtPoints } from '../../../packages/fem-core/src/io/drawing-mesh.js';
import { atNodes, gridMesh } from './grid-mesh.js';

const mesh = gridMesh({
  from: [-0.02, -0.01],
  to: [0.03, 0.02],
  columns: 10,
  rows: 6,
  regionNames: ['left', 'right'],
  regionAt: (x) => (x < 0.005 ? 0 : 1),
});
const drawing = buildDrawingMesh(mesh, 3);
const whole = choosePatches(drawing);
const atPoints = (f: (x: number, y: number) => number) => valuesAtPoints(drawing, atNodes(mesh, f));

function lengthOf({ xy: line, closed }: Trace): number {
  let length = 0;
  const last = closed ? line.length : line.length - 2;
  for (let k = 0; k < last; k += 2) {
    const next = (k + 2) % line.length;
    length += Math.hypot(line[next] - line[k], line[next + 1] - line[k + 1]);
  }
  return length;
}

function signedArea(traces: readonly Trace[]): number {
  let area = 0;
  for (const { xy: ring } of traces) {
    for (let k = 0; k < ring.length; k += 2) {
      const next = (k + 2) % ring.length;
      area += 0.5 * (ring[k] * ring[next + 1] - ring[next] * ring[k + 1]);
    }
  }
  return area;
}

describe('lines of equal value', () => {
  test.each([
    ['along y', [1, 0], 0.03],
    ['along x', [0, 1], 0.05],
  ])('of a linear function are one straight line across the section, %s', (_, [gx, gy], length) => {
    const values = atPoints((x, y) => gx * x + gy * y);
    const traces = traceLevel(whole, values, 0.0031);
    expect(traces).toHaveLength(1);
    expect(traces[0].closed).toBe(false);
    expect(lengthOf(traces[0])).toBeCloseTo(length, 12);
    for (let k = 0; k < traces[0].xy.length; k += 2) {
      expect(gx * traces[0].xy[k] + gy * traces[0].xy[k + 1]).toBeCloseTo(0.0031, 14);
    }
  });

  test('have the exact length where they run at an angle through the mesh', () => {
    // 3 x + 4 y = 0.02 enters the rectangle at x = -0.02, y = 0.02 and leaves it at x = 0.02, y = -0.01.
    const values = atPoints((x, y) => 3 * x + 4 * y);
    const traces = traceLevel(whole, values, 0.02);
    expect(traces.reduce((sum, line) => sum + lengthOf(line), 0)).toBeCloseTo(Math.hypot(0.04, 0.03), 12);
  });

  test('round a summit inside the section are closed rings with the higher values on the left', () => {
    const values = atPoints((x, y) => -((x - 0.005) ** 2) - (y - 0.004) ** 2);
    const traces = traceLevel(whole, values, -(0.008 ** 2));
    expect(traces).toHaveLength(1);
    expect(traces[0].closed).toBe(true);
    // Counter-clockwise; a polygon of chords in the circle of 8 mm, whose area it nearly has.
    const share = signedArea(traces) / (Math.PI * 0.008 ** 2);
    expect(share).toBeGreaterThan(0.98);
    expect(share).toBeLessThan(1);
  });

  test('that pass exactly through points are traced once, without gaps', () => {
    const values = atPoints((x) => Math.round(x * 1e6)).map(Math.round);
    const traces = traceLevel(whole, values, 5000);
    expect(traces).toHaveLength(1);
    expect(lengthOf(traces[0])).toBeCloseTo(0.03, 12);
  });

  test('do not exist beyond the values', () => {
    expect(
      traceLevel(
        whole,
        atPoints((x) => x),
        0.04,
      ),
    ).toEqual([]);
  });
});

describe('filled areas', () => {
  const levels = [-Infinity, -0.013, -0.004, 0.0021, 0.011, 0.027];

  test('between levels add up to the area of the region, each band to its own', () => {
    const values = atPoints((x) => x);
    const areas = levels.map((level) => signedArea(outlineAbove(whole, values, level)));
    expect(areas[0]).toBeCloseTo(0.05 * 0.03, 15);
    for (let k = 1; k < levels.length; k++) expect(areas[k]).toBeCloseTo((0.03 - levels[k]) * 0.03, 15);
  });

  test('of the regions add up to those of the whole, whatever the function', () => {
    const values = atPoints((x, y) => Math.sin(300 * x) * Math.cos(400 * y));
    const parts = [0, 1].map((region) => choosePatches(drawing, (t) => mesh.triangleToRegion[t] === region));
    for (const level of [-Infinity, -0.5, 0, 0.3, 0.8]) {
      const sum = parts.reduce((area, part) => area + signedArea(outlineAbove(part, values, level)), 0);
      expect(sum).toBeCloseTo(signedArea(outlineAbove(whole, values, level)), 15);
    }
  });

  test('are bounded by closed rings only, holes clockwise', () => {
    const values = atPoints((x, y) => Math.hypot(x - 0.005, y - 0.004));
    const rings = outlineAbove(whole, values, 0.008);
    expect(rings.every((ring) => ring.closed)).toBe(true);
    expect(rings.map((ring) => Math.sign(signedArea([ring]))).sort()).toEqual([-1, 1]);
  });
});

test('areas above and below a level add up to the region, in closed rings, for any values at the nodes', () => {
  const nodes = mesh.xy.length / 2 + mesh.edges.length / 2;
  // Whole numbers, so that many values equal the level exactly.
  const values = fc.array(fc.integer({ min: -3, max: 3 }), { minLength: nodes, maxLength: nodes });
  const coarse = buildDrawingMesh(mesh, 2);
  fc.assert(
    fc.property(values, fc.constantFrom(-2, 0, 0.5, 1), (nodal, level) => {
      const above = valuesAtPoints(coarse, Float64Array.from(nodal));
      const below = above.map((value) => -value);
      const rings = [
        outlineAbove(choosePatches(coarse), above, level),
        outlineAbove(choosePatches(coarse), below, -level),
      ];
      expect(rings.flat().every((ring) => ring.closed)).toBe(true);
      // Triangles with all three values at the level belong to both.
      const flat = flatArea(coarse, above, level);
      expect(signedArea(rings[0]) + signedArea(rings[1]) - flat).toBeCloseTo(0.05 * 0.03, 14);
    }),
    { numRuns: 50 },
  );
});

function flatArea({ corners, xy }: DrawingMesh, values: Float64Array, level: number): number {
  let area = 0;
  for (let q = 0; q < corners.length; q += 3) {
    const three = [corners[q], corners[q + 1], corners[q + 2]];
    if (!three.every((point) => values[point] === level)) continue;
    area += signedArea([{ xy: three.flatMap((point) => [xy[2 * point], xy[2 * point + 1]]), closed: true }]);
  }
  return area;
}

test('pieces chain into one ring whatever their order, and two loops through one point lose nothing', () => {
  expect(chainPieces([3, 1, 2], [1, 2, 3])).toEqual([{ keys: [3, 1, 2], closed: true }]);
  const loops = chainPieces([0, 1, 2, 0, 5, 6], [1, 2, 0, 5, 6, 0]);
  expect(loops.every((loop) => loop.closed)).toBe(true);
  expect(loops.reduce((sum, loop) => sum + loop.keys.length, 0)).toBe(6);
});
