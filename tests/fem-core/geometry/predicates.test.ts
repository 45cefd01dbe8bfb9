import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { inCircle, orientation } from '../../../packages/fem-core/src/geometry/predicates.js';

/** Coordinates are whole multiples of 2^-50 near 1/2 ... 2, so that whole-number arithmetic tells the sign exactly. */
const UNIT = 2 ** -50;
const near = fc.integer({ min: 0, max: 40 }).map((i) => 2 ** 49 + i);
const anywhere = fc.integer({ min: -(2 ** 50), max: 2 ** 50 });
const coordinate = fc.oneof(near, anywhere);
const pairs = (count: number) => fc.array(fc.tuple(coordinate, coordinate), { minLength: count, maxLength: count });

const signOf = (value: bigint): number => (value > 0n ? 1 : value < 0n ? -1 : 0);
const whole = (points: readonly (readonly [number, number])[]) =>
  points.map(([x, y]) => [BigInt(x), BigInt(y)] as const);

function exactOrientation(points: readonly (readonly [number, number])[]): number {
  const [[ax, ay], [bx, by], [cx, cy]] = whole(points);
  return signOf((bx - ax) * (cy - ay) - (by - ay) * (cx - ax));
}

function exactInCircle(points: readonly (readonly [number, number])[]): number {
  const [a, b, c, d] = whole(points);
  const rows = [a, b, c].map(([x, y]) => {
    const [u, v] = [x - d[0], y - d[1]];
    return [u, v, u * u + v * v] as const;
  });
  const [[ax, ay, aw], [bx, by, bw], [cx, cy, cw]] = rows;
  return signOf(aw * (bx * cy - by * cx) - bw * (ax * cy - ay * cx) + cw * (ax * by - ay * bx));
}

const at = (points: readonly (readonly [number, number])[]): number[] => points.flat().map((value) => value * UNIT);

describe('orientation', () => {
  test('counter-clockwise is positive, clockwise negative, a line zero', () => {
    expect(orientation(0, 0, 1, 0, 0, 1)).toBeGreaterThan(0);
    expect(orientation(0, 0, 0, 1, 1, 0)).toBeLessThan(0);
    expect(orientation(0, 0, 1, 2, 3, 6)).toBe(0);
    expect(orientation(1, 1, 1, 1, 5, 7)).toBe(0);
  });

  test('its sign is the exact one, on lines that rounding bends too', () => {
    fc.assert(
      fc.property(pairs(3), (points) => {
        const [ax, ay, bx, by, cx, cy] = at(points);
        expect(Math.sign(orientation(ax, ay, bx, by, cx, cy))).toBe(exactOrientation(points));
      }),
      { seed: 11, numRuns: 2000 },
    );
  });

  test('points a single bit off the diagonal are told from those on it, where plain arithmetic gives rounding', () => {
    // Kettner, Mehlhorn, Pion, Schirra, Yap, Classroom examples of robustness problems in geometric computations, 2008.
    for (let i = 0; i < 16; i++) {
      for (let j = 0; j < 16; j++) {
        const sign = Math.sign(orientation(0.5 + i * 2 ** -53, 0.5 + j * 2 ** -53, 12, 12, 24, 24));
        expect(sign).toBeCloseTo(Math.sign(j - i));
      }
    }
  });
});

describe('inCircle', () => {
  test('inside is positive, outside negative, on the circle zero', () => {
    expect(inCircle(0, 0, 1, 0, 0, 1, 0.5, 0.5)).toBeGreaterThan(0);
    expect(inCircle(0, 0, 1, 0, 0, 1, 2, 2)).toBeLessThan(0);
    expect(inCircle(0, 0, 1, 0, 0, 1, 1, 1)).toBe(0);
  });

  test('lattice points of a circle lie on it, and a bit more or less radius is told', () => {
    // 65^2 is a sum of two squares in several ways.
    const lattice = [
      [65, 0],
      [16, 63],
      [-33, 56],
      [-52, -39],
      [25, -60],
      [60, -25],
    ] as const;
    const [a, b, c] = lattice;
    for (const [x, y] of lattice.slice(3)) {
      const sign = (dx: number): number => Math.sign(inCircle(...a, ...b, ...c, x + dx, y));
      expect(sign(0)).toBe(0);
      expect(sign(Math.sign(x) * 2 ** -46)).toBe(-1);
      expect(sign(-Math.sign(x) * 2 ** -46)).toBe(1);
    }
  });

  test('its sign is the exact one', () => {
    fc.assert(
      fc.property(pairs(4), (points) => {
        const [ax, ay, bx, by, cx, cy, dx, dy] = at(points);
        expect(Math.sign(inCircle(ax, ay, bx, by, cx, cy, dx, dy))).toBe(exactInCircle(points));
      }),
      { seed: 12, numRuns: 2000 },
    );
  });
});
