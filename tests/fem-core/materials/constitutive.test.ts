import type { Material } from '@gapwright/fem-core';
import { buildBHCurve, buildDemagnetisationCurve, MU0 } from '@gapwright/fem-core';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { evaluateMaterial, newLaw, remanenceAt } from '../../../packages/fem-core/src/materials/constitutive.js';
import { SHEET_470, TEAM_13 } from '../../reference/bh-tables.js';

type Vector = readonly [x: number, y: number];

/** A straight recoil line of slope 1.05 mu0 down to a knee at -0.3 T, and a steep fall below it. */
const KNEE = [
  [0, 1.2],
  [-1.5 / (1.05 * MU0), -0.3],
  [-1.5 / (1.05 * MU0) - 20_000, -0.6],
  [-1.5 / (1.05 * MU0) - 30_000, -1],
] as const;
const kneeMagnet: Material = {
  kind: 'directed-magnet',
  direction: { angle: 0.4 },
  recoil: 1.05,
  along: buildDemagnetisationCurve(KNEE),
};

const kinds: readonly (readonly [string, Material])[] = [
  ['air', { kind: 'linear', muR: 1 }],
  ['linear steel', { kind: 'linear', muR: 2000 }],
  ['magnet', { kind: 'magnet', recoil: 1.05, remanence: [0.9, -0.7] }],
  ['TEAM 13 steel', { kind: 'curve', curve: buildBHCurve(TEAM_13) }],
  ['sheet of 4.7 W/kg', { kind: 'curve', curve: buildBHCurve(SHEET_470) }],
  ['radial magnet', { kind: 'directed-magnet', direction: { angle: 0, turns: 1 }, recoil: 1.05, along: 1.2 }],
  ['magnet with a knee', kneeMagnet],
];

const lawAt = (material: Material, [bx, by]: Vector) => evaluateMaterial(material, bx, by, ...PLACE, newLaw());

/** Any place but the origin: directions may turn from place to place. */
const PLACE = [0.03, -0.02] as const;

function fieldStrength(material: Material, b: Vector): Vector {
  const { hx, hy } = lawAt(material, b);
  return [hx, hy];
}

/** Flux densities of any direction, from a thousandth of a tesla to far beyond saturation. */
const densities: fc.Arbitrary<Vector> = fc
  .tuple(fc.double({ min: -3, max: 0.7, noNaN: true }), fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }))
  .map(([log, angle]) => [10 ** log * Math.cos(angle), 10 ** log * Math.sin(angle)]);

/** Twice the largest of the terms a difference quotient subtracts: what rounding and curvature are measured by. */
const STEP = 1e-7;

describe.each(kinds)('%s', (_, material) => {
  /** A kink of dH/dB lies within reach of the differences, as at the rows of a curve. */
  const nearRow = ([x, y]: Vector): boolean => {
    const near = (rows: Float64Array, b: number): boolean => rows.some((row) => Math.abs(b - row) < 4 * STEP);
    if (material.kind === 'curve') return near(material.curve.b, Math.hypot(x, y));
    if (material.kind !== 'directed-magnet' || typeof material.along === 'number') return false;
    const { angle } = material.direction;
    return near(material.along.b, Math.cos(angle) * x + Math.sin(angle) * y);
  };

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

  test('the tangent is dH/dB', () => {
    fc.assert(
      fc.property(densities, ([x, y]) => {
        fc.pre(!nearRow([x, y]));
        const { xx, xy, yy } = lawAt(material, [x, y]);
        const step = STEP * Math.max(0.1, Math.hypot(x, y));
        const tangent = [
          [xx, xy],
          [xy, yy],
        ];
        for (const j of [0, 1]) {
          const shift = (s: number): Vector => [x + (j === 0 ? s : 0), y + (j === 1 ? s : 0)];
          const [low, high] = [fieldStrength(material, shift(-step)), fieldStrength(material, shift(step))];
          for (const i of [0, 1]) {
            expect(Math.abs((high[i] - low[i]) / (2 * step) - tangent[i][j])).toBeLessThan(2e-5 * (xx + yy));
          }
        }
      }),
    );
  });

  test('the tangent is positive definite, and no steeper than vacuum', () => {
    fc.assert(
      fc.property(densities, (b) => {
        const { xx, xy, yy } = lawAt(material, b);
        const middle = 0.5 * (xx + yy);
        const reach = Math.hypot(0.5 * (xx - yy), xy);
        expect(middle - reach).toBeGreaterThan(0);
        expect(middle + reach).toBeLessThan(1.000001 / MU0);
      }),
    );
  });

  test('a field turned by any angle, and the magnet with it, turns H by the same', () => {
    fc.assert(
      fc.property(densities, fc.double({ min: 0, max: 6.3, noNaN: true }), ([x, y], angle) => {
        const [c, s] = [Math.cos(angle), Math.sin(angle)];
        const [before, after] = [lawAt(material, [x, y]), lawAt(turned(material, angle), turn([x, y], c, s))];
        const [hx, hy] = turn([before.hx, before.hy], c, s);
        expect(Math.hypot(after.hx - hx, after.hy - hy)).toBeLessThan(1e-9 * (Math.hypot(hx, hy) + 1e6));
        expect(Math.abs(after.energy - before.energy)).toBeLessThan(1e-9 * Math.abs(before.energy) + 1e-6);
      }),
    );
  });
});

function turned(material: Material, angle: number): Material {
  if (material.kind === 'magnet') {
    return { ...material, remanence: turn(material.remanence, Math.cos(angle), Math.sin(angle)) };
  }
  if (material.kind !== 'directed-magnet') return material;
  return { ...material, direction: { ...material.direction, angle: material.direction.angle + angle } };
}

const turn = ([x, y]: Vector, c: number, s: number): Vector => [c * x - s * y, s * x + c * y];

test('linear: H = B/(mu0 muR)', () => {
  const { nu, hx, hy, energy } = lawAt({ kind: 'linear', muR: 500 }, [0.3, 0.4]);
  expect([nu, hx, hy]).toEqual(
    [1 / (MU0 * 500), 0.3 / (MU0 * 500), 0.4 / (MU0 * 500)].map((x) => expect.closeTo(x, 9)),
  );
  expect(energy).toBeCloseTo(0.25 / (2 * 500 * MU0), 9);
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
  const [slope] = curve.slope;
  expect(lawAt(material, [0, 0])).toMatchObject({ hx: 0, hy: 0, xx: slope, xy: 0, yy: slope, nu: slope, energy: 0 });
  for (const b of [1e-12, 0.99e-9, 1.01e-9, 1e-7]) {
    const { nu, yy } = lawAt(material, [0, b]);
    expect(Math.abs(nu / curve.slope[0] - 1)).toBeLessThan(1e-3);
    expect(Math.abs(yy / curve.slope[0] - 1)).toBeLessThan(1e-3);
  }
});

test('remanence is the flux density without H, and a matter of magnets alone', () => {
  for (const [, material] of kinds) {
    const remanence = remanenceAt(material, ...PLACE);
    expect(Math.hypot(...fieldStrength(material, remanence))).toBeLessThan(1e-6);
    const isMagnet = material.kind === 'magnet' || material.kind === 'directed-magnet';
    expect(Math.hypot(...remanence) > 0).toBe(isMagnet);
  }
});
