import type { Material } from '@gapwright/fem-core';
import { buildBHCurve, MU0 } from '@gapwright/fem-core';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { evaluateMaterial, remanenceOf } from '../../../packages/fem-core/src/materials/constitutive.js';
import { SHEET_470, TEAM_13 } from '../../reference/bh-tables.js';

type Vector = readonly [x: number, y: number];

const kinds: readonly (readonly [string, Material])[] = [
  ['air', { kind: 'linear', muR: 1 }],
  ['linear steel', { kind: 'linear', muR: 2000 }],
  ['magnet', { kind: 'magnet', recoil: 1.05, remanence: [0.9, -0.7] }],
  ['TEAM 13 steel', { kind: 'curve', curve: buildBHCurve(TEAM_13) }],
  ['sheet of 4.7 W/kg', { kind: 'curve', curve: buildBHCurve(SHEET_470) }],
];

const lawAt = (material: Material, [bx, by]: Vector) =>
  evaluateMaterial(material, bx, by, { nu: Number.NaN, spread: Number.NaN, energy: Number.NaN });

/** H = nu (B - Br). */
function fieldStrength(material: Material, b: Vector): Vector {
  const { nu } = lawAt(material, b);
  const [rx, ry] = remanenceOf(material);
  return [nu * (b[0] - rx), nu * (b[1] - ry)];
}

/** Flux densities of any direction, from a thousandth of a tesla to far beyond saturation. */
const densities: fc.Arbitrary<Vector> = fc
  .tuple(fc.double({ min: -3, max: 0.7, noNaN: true }), fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }))
  .map(([log, angle]) => [10 ** log * Math.cos(angle), 10 ** log * Math.sin(angle)]);

/** Twice the largest of the terms a difference quotient subtracts: what rounding and curvature are measured by. */
const STEP = 1e-7;

describe.each(kinds)('%s', (_, material) => {
  const isCurve = material.kind === 'curve';
  /** A kink of dH/dB lies within reach of the differences, as at the rows of a curve. */
  const nearRow = (b: Vector): boolean =>
    isCurve && material.curve.b.some((row) => Math.abs(Math.hypot(...b) - row) < 4 * STEP);

  test('H is the gradient of the energy density', () => {
    fc.assert(
      fc.property(densities, ([x, y]) => {
        fc.pre(!nearRow([x, y]));
        const w = (bx: number, by: number): number => lawAt(material, [bx, by]).energy;
        const [hx, hy] = fieldStrength(material, [x, y]);
        const scale = lawAt(material, [x, y]).nu * STEP + Math.hypot(hx, hy) + w(x, y) / STEP / 1e9;
        expect(Math.abs((w(x + STEP, y) - w(x - STEP, y)) / (2 * STEP) - hx)).toBeLessThan(1e-4 * scale + 1e-6);
        expect(Math.abs((w(x, y + STEP) - w(x, y - STEP)) / (2 * STEP) - hy)).toBeLessThan(1e-4 * scale + 1e-6);
      }),
    );
  });

  test('dH/dB = nu I + spread B B^T', () => {
    fc.assert(
      fc.property(densities, ([x, y]) => {
        fc.pre(!nearRow([x, y]));
        const { nu, spread } = lawAt(material, [x, y]);
        const step = STEP * Math.hypot(x, y);
        const b = [x, y];
        for (const j of [0, 1]) {
          const shift = (s: number): Vector => [x + (j === 0 ? s : 0), y + (j === 1 ? s : 0)];
          const [low, high] = [fieldStrength(material, shift(-step)), fieldStrength(material, shift(step))];
          for (const i of [0, 1]) {
            const expected = (i === j ? nu : 0) + spread * b[i] * b[j];
            const scale = nu + Math.abs(spread) * (x * x + y * y);
            expect(Math.abs((high[i] - low[i]) / (2 * step) - expected)).toBeLessThan(1e-5 * scale);
          }
        }
      }),
    );
  });

  test('the tangent is positive definite: nu and nu + spread B^2 are above 0, and no steeper than vacuum', () => {
    fc.assert(
      fc.property(densities, ([x, y]) => {
        const { nu, spread } = lawAt(material, [x, y]);
        expect(nu).toBeGreaterThan(0);
        expect(nu + spread * (x * x + y * y)).toBeGreaterThan(0);
        expect(nu).toBeLessThan(1.000001 / MU0);
      }),
    );
  });

  test('a field turned by any angle turns H by the same (but for the remanence)', () => {
    fc.assert(
      fc.property(densities, fc.double({ min: 0, max: 6.3, noNaN: true }), ([x, y], angle) => {
        const [c, s] = [Math.cos(angle), Math.sin(angle)];
        const turned: Material =
          material.kind === 'magnet' ? { ...material, remanence: turn(material.remanence, c, s) } : material;
        const [before, after] = [lawAt(material, [x, y]), lawAt(turned, turn([x, y], c, s))];
        expect(Math.abs(after.nu / before.nu - 1)).toBeLessThan(1e-9);
        expect(Math.abs(after.energy - before.energy)).toBeLessThan(1e-9 * before.energy + 1e-9);
      }),
    );
  });
});

const turn = ([x, y]: Vector, c: number, s: number): Vector => [c * x - s * y, s * x + c * y];

test('linear: H = B/(mu0 muR)', () => {
  expect(lawAt({ kind: 'linear', muR: 500 }, [0.3, 0.4])).toEqual({
    nu: 1 / (MU0 * 500),
    spread: 0,
    energy: expect.closeTo(0.25 / (2 * 500 * MU0), 9),
  });
});

test('magnet: no H and no energy at its remanence, -Br/(mu0 recoil) at B = 0', () => {
  const magnet: Material = { kind: 'magnet', recoil: 1.05, remanence: [0, 1.3] };
  expect(fieldStrength(magnet, [0, 1.3])).toEqual([0, 0]);
  expect(lawAt(magnet, [0, 1.3]).energy).toBe(0);
  expect(fieldStrength(magnet, [0, 0])[1]).toBeCloseTo(-1.3 / (1.05 * MU0), 6);
  expect(lawAt(magnet, [0, 0]).energy).toBeCloseTo(1.3 ** 2 / (2 * 1.05 * MU0), 6);
});

test('curve: the reluctivity goes over into its initial value at B = 0 without a jump', () => {
  const curve = buildBHCurve(TEAM_13);
  const material: Material = { kind: 'curve', curve };
  expect(lawAt(material, [0, 0])).toEqual({ nu: curve.slope[0], spread: 0, energy: 0 });
  for (const b of [1e-12, 0.99e-9, 1.01e-9, 1e-7]) {
    expect(Math.abs(lawAt(material, [0, b]).nu / curve.slope[0] - 1)).toBeLessThan(1e-3);
    const { nu, spread } = lawAt(material, [0, b]);
    expect(Math.abs((nu + spread * b * b) / curve.slope[0] - 1)).toBeLessThan(1e-3);
  }
});

test('remanence is a matter of magnets alone', () => {
  expect(kinds.map(([, material]) => remanenceOf(material))).toEqual([
    [0, 0],
    [0, 0],
    [0.9, -0.7],
    [0, 0],
    [0, 0],
  ]);
});
