import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  EDGE,
  facePotential,
  placeEdges,
  placeRectangle,
  polygonMoments,
} from '../../../packages/machine-models/src/end-effect/charged-face.js';

/** Integral of dS/R over a polygon in the plane y = 0, seen from u, v at height h. */
function potential(corners: Float64Array, u: number, v: number, h: number): number {
  const edges = new Float64Array(EDGE * (corners.length / 2));
  placeEdges(corners, u, v, edges);
  return facePotential(edges, corners.length / 2, h);
}

const rectangle = (a: number, b: number): Float64Array => Float64Array.of(-a, -b, a, -b, a, b, -a, b);

/** mu0 times the scalar potential of a block 2a x 2b x 2c magnetised along y by Br = 1 T, centred. */
function blockPotential(a: number, b: number, c: number, x: number, y: number, z: number): number {
  const face = rectangle(a, b);
  return (potential(face, x, z, y - c) - potential(face, x, z, y + c)) / (4 * Math.PI);
}

/**
 * Field outside a block magnetised along its third axis, Br = 1 T: arctangent along it, logarithms across; from memory,
 * G. Akoun and J.-P. Yonnet 1984, E. P. Furlani 2001.
 */
function blockField(
  a: number,
  b: number,
  c: number,
  x: number,
  y: number,
  z: number,
): readonly [number, number, number] {
  let [bx, by, bz] = [0, 0, 0];
  for (const i of [-1, 1]) {
    for (const j of [-1, 1]) {
      for (const k of [-1, 1]) {
        const [u, v, w] = [x - i * a, z - j * b, y - k * c];
        const r = Math.hypot(u, v, w);
        const sign = (i * j * k) / (4 * Math.PI);
        bx += sign * Math.log(r - v) * 1;
        bz += sign * Math.log(r - u) * 1;
        by += sign * Math.atan((u * v) / (w * r));
      }
    }
  }
  return [bx, by, bz];
}

const [A, B, C] = [0.014, 0.0275, 0.006];
const outside = fc
  .record({
    x: fc.double({ min: -0.05, max: 0.05, noNaN: true }),
    y: fc.double({ min: 0.0085, max: 0.03, noNaN: true }),
    z: fc.double({ min: -0.06, max: 0.06, noNaN: true }),
  })
  .map(({ x, y, z }) => [x, y, z] as const);

describe('a block magnet', () => {
  test('far away it is a dipole of moment Br volume/mu0', () => {
    const volume = 8 * A * B * C;
    for (const distance of [1, 2]) {
      for (const [x, y, z] of [
        [0.6, 0.64, 0.48],
        [0, 1, 0],
        [-0.8, 0.6, 0],
      ]) {
        const exact = (volume * y) / (4 * Math.PI * distance ** 2);
        const got = blockPotential(A, B, C, x * distance, y * distance, z * distance);
        // The next term falls by (size/distance)^2; B/1 m is 0.03.
        expect(Math.abs(got / exact - 1)).toBeLessThan(2e-3 / distance ** 2);
      }
    }
  });

  test('on its axis By = (Br/pi) [atan(a b/(s r(s))) - atan(a b/(t r(t)))], s and t from near and far face', () => {
    const term = (s: number): number => Math.atan((A * B) / (s * Math.hypot(A, B, s))) / Math.PI;
    for (const s of [0.001, 0.005, 0.02, 0.1]) {
      const step = 1e-6;
      const y = C + s;
      const by = -(blockPotential(A, B, C, 0, y + step, 0) - blockPotential(A, B, C, 0, y - step, 0)) / (2 * step);
      expect(Math.abs(by / (term(s) - term(s + 2 * C)) - 1)).toBeLessThan(1e-6);
    }
  });

  test('minus the gradient is the field in its arctangent and logarithm form: free of curl', () => {
    fc.assert(
      fc.property(outside, ([x, y, z]) => {
        const step = 1e-5;
        const slope = (dx: number, dy: number, dz: number): number =>
          -(blockPotential(A, B, C, x + dx, y + dy, z + dz) - blockPotential(A, B, C, x - dx, y - dy, z - dz)) /
          (2 * step);
        const field = blockField(A, B, C, x, y, z);
        const got = [slope(step, 0, 0), slope(0, step, 0), slope(0, 0, step)];
        for (let i = 0; i < 3; i++) expect(Math.abs(got[i] - field[i])).toBeLessThan(2e-5);
      }),
      { numRuns: 200, seed: 7 },
    );
  });

  test('the second differences cancel: free of divergence', () => {
    fc.assert(
      fc.property(outside, ([x, y, z]) => {
        const step = 2e-4;
        const at = (dx: number, dy: number, dz: number): number =>
          blockPotential(A, B, C, x + dx, y + dy, z + dz) + blockPotential(A, B, C, x - dx, y - dy, z - dz);
        const centre = 2 * blockPotential(A, B, C, x, y, z);
        const parts = [at(step, 0, 0), at(0, step, 0), at(0, 0, step)].map((sum) => (sum - centre) / step ** 2);
        const size = Math.max(1, ...parts.map(Math.abs));
        expect(Math.abs(parts[0] + parts[1] + parts[2])).toBeLessThan(1e-2 * size);
      }),
      { numRuns: 200, seed: 8 },
    );
  });
});

describe('any polygon', () => {
  const corners = Float64Array.of(-0.02, -0.01, 0.015, -0.02, 0.03, 0.01, 0.005, 0.025, -0.018, 0.012);

  test('is the sum of its parts', () => {
    const parts = [corners.slice(0, 6), Float64Array.of(...corners.slice(0, 2), ...corners.slice(4, 10))];
    for (const h of [1e-4, 0.003, -0.02]) {
      const whole = potential(corners, 0.004, 0.001, h);
      const sum = parts.reduce((total, part) => total + potential(part, 0.004, 0.001, h), 0);
      expect(Math.abs(sum / whole - 1)).toBeLessThan(1e-12);
    }
  });

  test('from near it fills half of all directions, from afar its area over the square', () => {
    const omega = (h: number): number =>
      -(potential(corners, 0, 0, h + 1e-7) - potential(corners, 0, 0, h - 1e-7)) / 2e-7;
    expect(Math.abs(omega(1e-5) - 2 * Math.PI)).toBeLessThan(5e-3);
    expect(Math.abs((omega(5) * 25) / polygonMoments(corners).area - 1)).toBeLessThan(1e-4);
  });

  test('moves and turns with the point', () => {
    const [c, s] = [Math.cos(0.7), Math.sin(0.7)];
    const turn = (x: number, z: number): [number, number] => [x * c - z * s + 0.11, x * s + z * c - 0.03];
    const moved = Float64Array.from(
      { length: corners.length },
      (_, i) => turn(corners[i - (i % 2)], corners[i - (i % 2) + 1])[i % 2],
    );
    const [u, v] = turn(0.01, 0.002);
    expect(Math.abs(potential(moved, u, v, 0.004) / potential(corners, 0.01, 0.002, 0.004) - 1)).toBeLessThan(1e-12);
  });

  test('moments are those of its triangles, summed point by point', () => {
    const { area, u, v, uu, uv, vv } = polygonMoments(corners);
    const sums = new Float64Array(6);
    const n = 60;
    for (let t = 1; t + 1 < corners.length / 2; t++) {
      const [ax, ay, bx, by, cx, cy] = [0, 1, 2 * t, 2 * t + 1, 2 * t + 2, 2 * t + 3].map((i) => corners[i]);
      const cell = Math.abs((bx - ax) * (cy - ay) - (cx - ax) * (by - ay)) / 2 / n ** 2;
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < 2 * (n - i) - 1; j++) {
          // Centroids of the small triangles, upright and upside down.
          const [p, q] = [
            (i + (j % 2 === 0 ? 1 / 3 : 2 / 3)) / n,
            (Math.floor(j / 2) + (j % 2 === 0 ? 1 / 3 : 2 / 3)) / n,
          ];
          const x = ax + p * (bx - ax) + q * (cx - ax) - u;
          const y = ay + p * (by - ay) + q * (cy - ay) - v;
          for (const [k, value] of [1, x, y, x * x, x * y, y * y].entries()) sums[k] += cell * value;
        }
      }
    }
    expect(Math.abs(sums[0] / area - 1)).toBeLessThan(1e-12);
    expect(Math.abs(sums[1]) + Math.abs(sums[2])).toBeLessThan(1e-12 * area);
    for (const [k, moment] of [uu, uv, vv].entries()) expect(Math.abs(sums[3 + k] - moment)).toBeLessThan(1e-3 * uu);
  });

  test('a rectangle placed by its sides is the polygon of its corners', () => {
    const edges = new Float64Array(4 * EDGE);
    placeRectangle(-0.01 - 0.004, 0.01 - 0.004, -0.02 + 0.003, 0.02 + 0.003, edges);
    expect(
      Math.abs(facePotential(edges, 4, 0.006) / potential(rectangle(0.01, 0.02), 0.004, -0.003, 0.006) - 1),
    ).toBeLessThan(1e-13);
  });
});
