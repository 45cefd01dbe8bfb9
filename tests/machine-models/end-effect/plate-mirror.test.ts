import { describe, expect, test } from 'vitest';
import { computeEndFactor } from '../../../packages/machine-models/src/end-effect/end-factor.js';
import { plateMirrors } from '../../../packages/machine-models/src/end-effect/plate-mirror.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { hutHydro } from '../../helpers/machines.js';
import { ironless, keeperHydro } from '../slices/variants.js';

const withSteel = (muR: number, thickness = 0.01, machine: Machine = hutHydro()): Machine => {
  const disc = machine.rotor.disc && { ...machine.rotor.disc, thickness };
  const plate = { kind: 'steel', muR, source: 'invented' } as const;
  return { ...machine, materials: { ...machine.materials, plate }, rotor: { ...machine.rotor, disc } };
};

describe('a plate mirrors the field', () => {
  test('wholly where it is permeable, not at all where it is air', () => {
    expect(plateMirrors(withSteel(1e7), undefined).disc).toBeCloseTo(1, 5);
    expect(plateMirrors(withSteel(1), undefined).disc).toBe(0);
    expect(plateMirrors(ironless(), undefined).disc).toBe(0);
  });

  test('as a half-space does where it is thick: (m - 1)/(m + 1)', () => {
    expect(plateMirrors(withSteel(5, 1), undefined).disc).toBeCloseTo(4 / 6, 6);
  });

  test('as a sheet does where it is thin: m k t / (2 + m k t)', () => {
    const k = 16 / (2 * 0.128);
    const x = 2000 * k * 1e-5;
    expect(plateMirrors(withSteel(2000, 1e-5), undefined).disc).toBeCloseTo(x / (2 + x), 3);
  });

  test('less the more it is saturated', () => {
    const bh: readonly (readonly [number, number])[] = [
      [0, 0],
      [150, 0.6],
      [400, 1.2],
      [1000, 1.5],
      [3000, 1.65],
      [10000, 1.8],
      [30000, 2],
      [100000, 2.2],
    ];
    const steel = { kind: 'steel-curve', bh, source: 'invented' } as const;
    const thin = withSteel(1, 0.002);
    const machine = { ...thin, materials: { ...thin.materials, plate: steel } };
    const shares = [undefined, 1.5, 1.8, 2, 2.2, 2.6].map((b) => plateMirrors(machine, b).disc);
    for (const [i, share] of shares.slice(1).entries()) expect(share).toBeLessThan(shares[i]);
    expect(shares[0]).toBeGreaterThan(0.95);
    expect(shares[5]).toBeLessThan(0.4);
  });
});

describe('the end factor', () => {
  test('of discs of permeability 1 is that without discs', () => {
    const [bare, air] = [ironless(), withSteel(1)].map((machine) => computeEndFactor(machine));
    expect(Math.abs(air.endFactor / bare.endFactor - 1)).toBeLessThan(5e-4);
    expect(Math.abs(air.endFactorLegs / bare.endFactorLegs - 1)).toBeLessThan(5e-4);
  });

  test('of discs that fail goes from the one to the other, with a wider band on the way', () => {
    const factors = [1e6, 100, 10, 3, 1].map((muR) => computeEndFactor(withSteel(muR)));
    for (const [i, { endFactor }] of factors.slice(1).entries())
      expect(endFactor).toBeGreaterThan(factors[i].endFactor);
    expect(factors[2].band).toBeGreaterThan(factors[0].band + 0.005);
  });

  test('a keeper that does not mirror leaves the field of one array', () => {
    const keeper = keeperHydro();
    const weak = {
      ...keeper,
      materials: { ...keeper.materials, weak: { kind: 'steel', muR: 1, source: '' } as const },
    };
    const plate = { material: 'weak', thickness: 0.008 };
    const got = computeEndFactor({ ...weak, rotor: { ...weak.rotor, keeper: plate } });
    expect(got.endFactor).toBeGreaterThan(computeEndFactor(keeper).endFactor);
  });
});
