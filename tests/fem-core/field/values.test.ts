import { buildBHCurve, buildLocator, fluxBetween, MU0, valueAt, valuesAlong } from '@gapwright/fem-core';
import { triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { interpolantIn, interpolate, MESHES, mapPoint, roundMesh, straightMesh } from './made-fields.js';

const wavy = (x: number, y: number): number => Math.sin(90 * x) * Math.cosh(70 * y) + 0.3 * x;

describe.each(MESHES)('a field on the %s mesh', (_, mesh) => {
  const field = interpolate(mesh, wavy);
  const locator = buildLocator(mesh);
  const at = (x: number, y: number) => {
    const value = valueAt(field, locator, x, y);
    if (value === undefined) throw new Error(`(${x}, ${y}) lies outside`);
    return value;
  };

  test('A is what the six nodal values make of it', () => {
    for (let t = 0; t < triangleCount(mesh); t++) {
      for (const [xi, eta] of [
        [0.2, 0.3],
        [0.7, 0.1],
        [0.05, 0.9],
      ]) {
        expect(at(...mapPoint(mesh, t, xi, eta)).a).toBeCloseTo(interpolantIn(field, t, xi, eta), 12);
      }
    }
  });

  test('B is the slope of that A: (dA/dy, -dA/dx), by central differences within the triangle', () => {
    const d = 1e-7;
    for (let t = 0; t < triangleCount(mesh); t += 3) {
      const [x, y] = mapPoint(mesh, t, 0.3, 0.36);
      const { bx, by } = at(x, y);
      expect(Math.abs(bx - (at(x, y + d).a - at(x, y - d).a) / (2 * d))).toBeLessThan(1e-5);
      expect(Math.abs(by + (at(x + d, y).a - at(x - d, y).a) / (2 * d))).toBeLessThan(1e-5);
    }
  });

  test('a uniform field is the same everywhere, curved elements included', () => {
    const uniform = interpolate(mesh, (x, y) => 0.7 * y + 0.4 * x + 3);
    fc.assert(
      fc.property(fc.nat({ max: triangleCount(mesh) - 1 }), fc.double({ min: 0, max: 0.5, noNaN: true }), (t, s) => {
        const [x, y] = mapPoint(mesh, t, s, 0.5 - s / 2);
        const value = valueAt(uniform, locator, x, y);
        expect(value?.a).toBeCloseTo(0.7 * y + 0.4 * x + 3, 12);
        expect(value?.bx).toBeCloseTo(0.7, 10);
        expect(value?.by).toBeCloseTo(-0.4, 10);
      }),
    );
  });

  test('outside there is no value and no flux', () => {
    expect(valueAt(field, locator, 0.1, 0)).toBeUndefined();
    expect(fluxBetween(field, locator, [0, 0], [0.1, 0])).toBeUndefined();
    expect(fluxBetween(field, locator, [0.1, 0], [0, 0])).toBeUndefined();
  });

  test('flux is the difference of A, turns round with the way, and round any loop sums to nothing', () => {
    const inside = fc.tuple(
      fc.double({ min: -0.017, max: 0.017, noNaN: true }),
      fc.double({ min: -0.017, max: 0.017, noNaN: true }),
    );
    const flux = (p: readonly [number, number], q: readonly [number, number]): number =>
      fluxBetween(field, locator, p, q) ?? Number.NaN;
    fc.assert(
      fc.property(fc.array(inside, { minLength: 2, maxLength: 7 }), (loop) => {
        expect(flux(loop[0], loop[1])).toBe(at(...loop[0]).a - at(...loop[1]).a);
        expect(flux(loop[0], loop[1]) + flux(loop[1], loop[0])).toBe(0);
        const round = loop.reduce((sum, p, i) => sum + flux(p, loop[(i + 1) % loop.length]), 0);
        expect(Math.abs(round)).toBeLessThan(1e-13);
      }),
    );
  });
});

test('flux along +y through a way to the right is positive, By times the length; along +x it counts on the way down', () => {
  const locator = buildLocator(straightMesh);
  const up = interpolate(straightMesh, (x) => -0.5 * x); // B = (0, 0.5 T)
  expect(fluxBetween(up, locator, [-0.01, 0.003], [0.015, 0.003])).toBeCloseTo(0.5 * 0.025, 14);
  expect(fluxBetween(up, locator, [-0.01, 0.003], [-0.01, 0.013])).toBeCloseTo(0, 14);
  const right = interpolate(straightMesh, (_, y) => 0.5 * y); // B = (0.5 T, 0)
  expect(fluxBetween(right, locator, [0.002, 0.012], [0.002, -0.008])).toBeCloseTo(0.5 * 0.02, 14);
});

test('a quadratic potential is met at every point of straight elements, with its linear B', () => {
  const field = interpolate(straightMesh, (x, y) => 4 * x * x - 7 * x * y + 2 * y * y - x);
  const locator = buildLocator(straightMesh);
  const place = fc.tuple(
    fc.double({ min: -0.03, max: 0.03, noNaN: true }),
    fc.double({ min: -0.02, max: 0.02, noNaN: true }),
  );
  fc.assert(
    fc.property(place, ([x, y]) => {
      const value = valueAt(field, locator, x, y);
      expect(value?.a).toBeCloseTo(4 * x * x - 7 * x * y + 2 * y * y - x, 14);
      expect(value?.bx).toBeCloseTo(-7 * x + 4 * y, 11);
      expect(value?.by).toBeCloseTo(-8 * x + 7 * y + 1, 11);
    }),
  );
});

test('H follows the law of what fills the region: air, magnet with recoil, steel by its curve', () => {
  const curve = buildBHCurve([
    [100, 0.5],
    [400, 1.3],
    [5000, 1.8],
  ]);
  const field = interpolate(straightMesh, (x, y) => 1.04 * y + 0.78 * x, {
    block: { kind: 'magnet', recoil: 1.1, remanence: [0.2, 1.2] },
    bar: { kind: 'curve', curve },
  }); // B = (1.04, -0.78) T, |B| = 1.3 T
  const locator = buildLocator(straightMesh);
  const inAir = valueAt(field, locator, 0, 0.015);
  expect(inAir?.hx).toBeCloseTo(1.04 / MU0, 4);
  expect(inAir?.hy).toBeCloseTo(-0.78 / MU0, 4);
  const inMagnet = valueAt(field, locator, -0.012, 0.002);
  expect(inMagnet?.hx).toBeCloseTo((1.04 - 0.2) / (1.1 * MU0), 4);
  expect(inMagnet?.hy).toBeCloseTo((-0.78 - 1.2) / (1.1 * MU0), 4);
  const inSteel = valueAt(field, locator, 0.0115, -0.002);
  expect(inSteel?.hx).toBeCloseTo(400 * 0.8, 6); // along B, of the table's 400 A/m at 1.3 T
  expect(inSteel?.hy).toBeCloseTo(-400 * 0.6, 6);
});

describe('values along a line', () => {
  const field = interpolate(roundMesh, wavy);
  const locator = buildLocator(roundMesh);
  const [from, to] = [
    [-0.015, 0.01],
    [0.02, -0.005],
  ] as const;

  test('equal steps, both ends included', () => {
    const values = valuesAlong(field, locator, from, to, 8);
    expect(values).toHaveLength(8);
    values.forEach((value, i) => {
      const [x, y] = [-0.015 + i * 0.005, 0.01 - (i * 0.015) / 7];
      expect(value?.a).toBeCloseTo(valueAt(field, locator, x, y)?.a ?? Number.NaN, 12);
    });
    expect(values[0]).toEqual(valueAt(field, locator, ...from));
    expect(values[7]?.by).toBeCloseTo(valueAt(field, locator, ...to)?.by ?? Number.NaN, 9);
  });

  test('two points are the ends, one point is the middle, none is none', () => {
    const [first, last] = valuesAlong(field, locator, from, to, 2);
    expect(first).toEqual(valueAt(field, locator, ...from));
    expect(last?.a).toBeCloseTo(valueAt(field, locator, ...to)?.a ?? Number.NaN, 12);
    const middle = valuesAlong(field, locator, from, to, 1);
    expect(middle).toHaveLength(1);
    expect(middle[0]?.a).toBeCloseTo(valueAt(field, locator, 0.0025, 0.0025)?.a ?? Number.NaN, 12);
    expect(valuesAlong(field, locator, from, to, 0)).toEqual([]);
  });

  test('places outside are undefined, those inside are told all the same', () => {
    const values = valuesAlong(field, locator, [-0.04, 0], [0.04, 0], 9);
    expect(values.map((value) => value !== undefined)).toEqual([
      false,
      false,
      true,
      true,
      true,
      true,
      true,
      true,
      false,
    ]);
  });
});
