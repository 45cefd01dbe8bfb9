import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  FULL_RULE,
  gradients,
  STRAIGHT_RULE,
  shapeSlopes,
  shapeValues,
} from '../../../packages/fem-core/src/elements/six-node.js';

/** Reference coordinates of the six nodes: corners, then the middles opposite them. */
const NODES: readonly (readonly [number, number])[] = [
  [0, 0],
  [1, 0],
  [0, 1],
  [0.5, 0.5],
  [0, 0.5],
  [0.5, 0],
];

const values = (xi: number, eta: number): Float64Array => shapeValues(xi, eta, new Float64Array(6));
const slopes = (xi: number, eta: number): Float64Array => shapeSlopes(xi, eta, new Float64Array(12));

/** Points of the reference triangle. */
const spots = fc
  .tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.double({ min: 0, max: 1, noNaN: true }))
  .map(([a, b]): [number, number] => (a + b <= 1 ? [a, b] : [1 - a, 1 - b]));

describe('shape functions', () => {
  test('each is 1 at its own node and 0 at the others', () => {
    NODES.forEach(([xi, eta], i) => {
      values(xi, eta).forEach((value, j) => {
        expect(value).toBeCloseTo(i === j ? 1 : 0, 15);
      });
    });
  });

  test('they sum to 1 everywhere, and their slopes to 0', () => {
    fc.assert(
      fc.property(spots, ([xi, eta]) => {
        expect(values(xi, eta).reduce((a, b) => a + b)).toBeCloseTo(1, 14);
        expect(
          slopes(xi, eta)
            .subarray(0, 6)
            .reduce((a, b) => a + b),
        ).toBeCloseTo(0, 13);
        expect(
          slopes(xi, eta)
            .subarray(6)
            .reduce((a, b) => a + b),
        ).toBeCloseTo(0, 13);
      }),
    );
  });

  test('their slopes are their derivatives: central differences of a quadratic are exact', () => {
    fc.assert(
      fc.property(spots, ([xi, eta]) => {
        const step = 1 / 64;
        const got = slopes(xi, eta);
        const [left, right] = [values(xi - step, eta), values(xi + step, eta)];
        const [down, up] = [values(xi, eta - step), values(xi, eta + step)];
        for (let i = 0; i < 6; i++) {
          expect(got[i]).toBeCloseTo((right[i] - left[i]) / (2 * step), 12);
          expect(got[6 + i]).toBeCloseTo((up[i] - down[i]) / (2 * step), 12);
        }
      }),
    );
  });

  test('they reproduce every quadratic from its values at the nodes', () => {
    const coefficients = fc.array(fc.double({ min: -9, max: 9, noNaN: true }), { minLength: 6, maxLength: 6 });
    fc.assert(
      fc.property(spots, coefficients, ([xi, eta], c) => {
        const f = (x: number, y: number): number =>
          c[0] + c[1] * x + c[2] * y + c[3] * x * x + c[4] * x * y + c[5] * y * y;
        const interpolated = values(xi, eta).reduce((sum, n, i) => sum + n * f(...NODES[i]), 0);
        expect(interpolated).toBeCloseTo(f(xi, eta), 12);
      }),
    );
  });

  test('on a side only its own three are not 0, so that neighbours agree there', () => {
    for (const s of [0.1, 0.35, 0.8]) {
      for (const [at, absent] of [
        [values(s, 0), [2, 3, 4]],
        [values(0, s), [1, 3, 5]],
        [values(s, 1 - s), [0, 4, 5]],
      ] as const) {
        for (const i of absent) expect(at[i]).toBeCloseTo(0, 15);
      }
    }
  });
});

/** A triangle in the plane with its middles moved off the chords by up to the given share of its size. */
const triangles = (bend: number): fc.Arbitrary<Float64Array> => {
  const shift = fc.double({ min: -bend, max: bend, noNaN: true });
  return fc
    .tuple(
      fc.double({ min: 0.2, max: 3, noNaN: true }), // height over base
      fc.double({ min: -0.5, max: 1.5, noNaN: true }), // where the apex stands
      fc.double({ min: -5, max: 5, noNaN: true }), // log10 of the size
      fc.double({ min: 0, max: 6.3, noNaN: true }), // turn
      fc.array(shift, { minLength: 6, maxLength: 6 }),
    )
    .map(([height, lean, log, angle, moves]) => {
      const corners = [0, 0, 1, 0, lean, height];
      const middle = (a: number, b: number, m: number): number[] =>
        [0, 1].map((k) => (corners[2 * a + k] + corners[2 * b + k]) / 2 + moves[2 * m + k]);
      const all = [...corners, ...middle(1, 2, 0), ...middle(2, 0, 1), ...middle(0, 1, 2)];
      const [c, s] = [10 ** log * Math.cos(angle), 10 ** log * Math.sin(angle)];
      const turned = all.map((_, i) => (i % 2 === 0 ? c * all[i] - s * all[i + 1] : s * all[i - 1] + c * all[i]));
      return Float64Array.from(turned);
    });
};

const place = (at: Float64Array, n: Float64Array): [number, number] => [
  n.reduce((sum, value, i) => sum + value * at[2 * i], 0),
  n.reduce((sum, value, i) => sum + value * at[2 * i + 1], 0),
];

describe('gradients', () => {
  const grad = (at: Float64Array, xi: number, eta: number) => {
    const out = new Float64Array(12);
    return { det: gradients(at, slopes(xi, eta), 0, out), out };
  };

  test('a linear function has its own gradient everywhere, on curved triangles too', () => {
    fc.assert(
      fc.property(triangles(0.03), spots, ([...list], [xi, eta]) => {
        const at = Float64Array.from(list);
        const { out } = grad(at, xi, eta);
        let [gx, gy] = [0, 0];
        for (let i = 0; i < 6; i++) {
          const value = 3 * at[2 * i] - 7 * at[2 * i + 1];
          gx += value * out[i];
          gy += value * out[6 + i];
        }
        expect(gx).toBeCloseTo(3, 8);
        expect(gy).toBeCloseTo(-7, 8);
      }),
    );
  });

  test('on a straight triangle every quadratic has its own gradient, and det J is twice the area', () => {
    fc.assert(
      fc.property(triangles(0), spots, (at, [xi, eta]) => {
        const size = Math.hypot(at[2] - at[0], at[3] - at[1]);
        const { det, out } = grad(at, xi, eta);
        const area = 0.5 * ((at[2] - at[0]) * (at[5] - at[1]) - (at[3] - at[1]) * (at[4] - at[0]));
        expect(Math.abs(det / (2 * area) - 1)).toBeLessThan(1e-11);
        const [x, y] = place(at, values(xi, eta));
        const f = (px: number, py: number): number => (px * px - 3 * px * py + 2 * py * py) / size;
        let [gx, gy] = [0, 0];
        for (let i = 0; i < 6; i++) {
          gx += f(at[2 * i], at[2 * i + 1]) * out[i];
          gy += f(at[2 * i], at[2 * i + 1]) * out[6 + i];
        }
        expect(gx).toBeCloseTo((2 * x - 3 * y) / size, 8);
        expect(gy).toBeCloseTo((4 * y - 3 * x) / size, 8);
      }),
    );
  });

  test('det J is the derivative of the map: the ratio of areas of small triangles', () => {
    fc.assert(
      fc.property(triangles(0.03), spots, (at, [xi, eta]) => {
        const step = 1e-4;
        const [p, q] = [place(at, values(xi - step, eta)), place(at, values(xi + step, eta))];
        const [r, s] = [place(at, values(xi, eta - step)), place(at, values(xi, eta + step))];
        const cross = (q[0] - p[0]) * (s[1] - r[1]) - (q[1] - p[1]) * (s[0] - r[0]);
        const { det } = grad(at, xi, eta);
        expect(Math.abs(cross / (4 * step * step) / det - 1)).toBeLessThan(1e-6);
      }),
    );
  });

  test('the offset picks the point of a table', () => {
    const at = Float64Array.of(0, 0, 2, 0, 0.5, 1, 1.2, 0.6, 0.2, 0.5, 1, -0.1);
    for (let q = 0; q < FULL_RULE.count; q++) {
      const [alone, within] = [new Float64Array(12), new Float64Array(12)];
      const det = gradients(at, FULL_RULE.slopes.slice(12 * q, 12 * q + 12), 0, alone);
      expect(gradients(at, FULL_RULE.slopes, 12 * q, within)).toBe(det);
      expect(within).toEqual(alone);
    }
  });

  test('curved area by quadrature: a triangle with one side bulging by d has 2/3 of d x side more', () => {
    const bulge = 0.07; // area between a parabola and its chord (Archimedes)
    const at = Float64Array.of(0, 0, 1, 0, 0.4, 0.8, 0.7, 0.4, 0.2, 0.4, 0.5, -bulge);
    const area = FULL_RULE.weights.reduce(
      (sum, w, q) => sum + w * gradients(at, FULL_RULE.slopes, 12 * q, new Float64Array(12)),
      0,
    );
    expect(area).toBeCloseTo(0.4 + (2 / 3) * bulge, 14);
  });
});

test('the tables hold the shape functions at the points of their rules', () => {
  for (const rule of [STRAIGHT_RULE, FULL_RULE]) {
    expect(rule.weights).toHaveLength(rule.count);
    for (let q = 0; q < rule.count; q++) {
      const n = rule.values.subarray(6 * q, 6 * q + 6);
      const [xi, eta] = [0, 1].map((k) => n.reduce((sum, value, i) => sum + value * NODES[i][k], 0));
      expect(Array.from(n)).toEqual(Array.from(values(xi, eta), (value) => expect.closeTo(value, 14)));
      const table = rule.slopes.subarray(12 * q, 12 * q + 12);
      expect(Array.from(table)).toEqual(Array.from(slopes(xi, eta), (value) => expect.closeTo(value, 14)));
    }
  }
});
