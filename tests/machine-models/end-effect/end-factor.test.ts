import { describe, expect, test } from 'vitest';
import { computeEndFactor } from '../../../packages/machine-models/src/end-effect/end-factor.js';
import { gapField } from '../../../packages/machine-models/src/end-effect/gap-field.js';
import { gapModel } from '../../../packages/machine-models/src/end-effect/gap-model.js';
import { FINE, measureLinkage } from '../../../packages/machine-models/src/end-effect/linkage.js';
import { poleFaces } from '../../../packages/machine-models/src/end-effect/pole-faces.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import { hutHydro, MU0, type Overlapped, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';
import { interpoleMachine, KINDS, keeperMachine, readAt, withRotor } from './made-machines.js';
import { rowField, type StraightRow } from './straight-row.js';

describe.each([...KINDS, ['overlapped coils', overlappedHydro] as const])('%s', (_, make) => {
  const machine: Machine = make();
  const answer = computeEndFactor(machine);

  test('the end factor is a correction: legs alone lose more than the whole coil, no warning', () => {
    expect(answer.endFactor).toBeGreaterThan(0.85);
    expect(answer.endFactor).toBeLessThan(1);
    expect(answer.endFactorLegs).toBeLessThan(answer.endFactor);
    expect(answer.band).toBeGreaterThan(0.005);
    expect(answer.band).toBeLessThan(0.03);
    expect(answer.warnings).toEqual([]);
  });

  test('the stated numerical error holds against points twice as dense', () => {
    const finer = { stations: 2, least: 7, step: 0.25, chord: FINE.chord / 3 };
    const { whole, plane } = measureLinkage(machine, gapModel(machine), finer);
    expect(relativeError(answer.endFactor, whole / plane)).toBeLessThan(answer.relErr);
    expect(answer.relErr).toBeLessThan(1e-3);
  });

  test('it knows shape alone: neither size nor strength of the magnets matters', () => {
    const stronger = Object.fromEntries(
      Object.entries(machine.materials).map(([name, material]) => [
        name,
        material.kind === 'magnet' ? { ...material, remanence: 0.4 } : material,
      ]),
    );
    const other = computeEndFactor(enlarged({ ...machine, materials: stronger }, 3));
    expect(relativeError(other.endFactor, answer.endFactor)).toBeLessThan(1e-9);
    expect(relativeError(other.endFactorLegs, answer.endFactorLegs)).toBeLessThan(1e-9);
    expect(relativeError(other.band, answer.band)).toBeLessThan(1e-9);
  });
});

/** All lengths of rotor and winding times a factor. */
function enlarged(machine: Machine, factor: number): Machine {
  const lengths =
    /^(gap|thickness|innerRadius|outerRadius|width|length|meanRadius|diameter|depth|legWidth|innerWidth|outerWidth)$/;
  const scale = (value: unknown, key = ''): unknown => {
    if (typeof value === 'number') return lengths.test(key) ? value * factor : value;
    if (typeof value !== 'object' || value === null) return value;
    return Object.fromEntries(Object.entries(value).map(([name, part]) => [name, scale(part, name)]));
  };
  return {
    ...machine,
    rotor: scale(machine.rotor) as Machine['rotor'],
    winding: scale(machine.winding) as Machine['winding'],
  };
}

test('hut hydro loses about a twentieth, a tenth in the legs alone', () => {
  const { endFactor, endFactorLegs } = computeEndFactor(hutHydro());
  // Charge sheets between endless planes gave 0.961 against slices that turn back where the turns do.
  expect(Math.abs(endFactor - 0.9475)).toBeLessThan(1e-3);
  expect(Math.abs(endFactorLegs - 0.8935)).toBeLessThan(1e-3);
});

/** A ring so wide that it looks straight, legs that end `beyond` the magnets. */
function wideRing(
  length: number,
  beyond: number,
  parts: Partial<Machine['rotor']> = {},
): Machine & { readonly winding: Overlapped } {
  const machine = overlappedHydro();
  const poles = 240;
  const meanRadius = (0.128 * poles) / 16;
  const reach = length / 2 + beyond;
  const rotor = {
    poles,
    magnets: { ...machine.rotor.magnets, shape: 'block' as const, width: 0.028, length, meanRadius },
    disc: {
      material: 'plate',
      thickness: 0.01,
      innerRadius: meanRadius - reach - 0.1,
      outerRadius: meanRadius + reach + 0.1,
    },
    ...parts,
  };
  const legs = { innerRadius: meanRadius - reach, outerRadius: meanRadius + reach };
  return withWinding(withRotor(machine, rotor), { legs, coils: 1.5 * poles });
}

test('long magnets and end turns far beyond them: nothing is lost', () => {
  expect(Math.abs(computeEndFactor(wideRing(0.3, 0.06)).endFactor - 1)).toBeLessThan(1e-3);
  expect(Math.abs(computeEndFactor(wideRing(0.06, 0.06)).endFactor - 1)).toBeLessThan(2e-3);
});

test('the longer the magnets with their coils, the less is lost', () => {
  const factors = [0.02, 0.03, 0.045, 0.07, 0.1, 0.2].map((length) => computeEndFactor(wideRing(length, -0.004)));
  for (let i = 1; i < factors.length; i++) {
    expect(factors[i].endFactor).toBeGreaterThan(factors[i - 1].endFactor);
    expect(factors[i].endFactorLegs).toBeGreaterThan(factors[i - 1].endFactorLegs);
  }
});

test('the longer the opening, the less is lost; the wider the gap, the more', () => {
  const opened = [0.039, 0.047, 0.055, 0.059].map((length) => {
    const { winding } = hutHydro();
    const opening = { ...winding.opening, innerRadius: 0.128 - length / 2, outerRadius: 0.128 + length / 2 };
    return computeEndFactor(withWinding(hutHydro(), { opening })).endFactor;
  });
  expect(opened).toEqual([...opened].sort((a, b) => a - b));
  const gaps = [0.012, 0.016, 0.019, 0.024, 0.03].map((gap) => {
    return computeEndFactor(withWinding(withRotor(hutHydro(), { gap }), { thickness: gap - 0.004 })).endFactor;
  });
  expect(gaps).toEqual([...gaps].sort((a, b) => b - a));
});

describe('a straight row by finite differences', () => {
  const row: StraightRow = {
    k: 62.5,
    gap: 0.02,
    thickness: 0.012,
    length: 0.054,
    recoil: 1,
    overhang: 0.05,
    disc: 0.01,
    winding: 0.016,
    cell: 0.001,
  };
  const [beyond, legWidth] = [-0.004, 0.014];
  const machineOf = ({ gap, length, overhang }: StraightRow, recoil: number): Machine => {
    const mean = (0.128 * 240) / 16;
    const reach = length / 2 + overhang;
    const disc = { material: 'plate', thickness: 0.01, innerRadius: mean - reach, outerRadius: mean + reach };
    const ring = wideRing(length, beyond, { gap, disc });
    const magnet = ring.materials.magnet_42;
    const materials = { ...ring.materials, magnet_42: { ...magnet, recoil } as typeof magnet };
    return withWinding({ ...ring, materials }, { thickness: 0.016, legWidth });
  };
  /** Linked flux over that of the field of endless magnets along the magnets' length. */
  const factorOf = (of: StraightRow): number => {
    const field = rowField(of);
    const [k, a, h, e] = [of.k, of.gap / 2, of.thickness, (of.k * of.winding) / 2];
    const plane = Math.sinh(e) / e / (Math.cosh(k * a) + (of.recoil * Math.sinh(k * a)) / Math.tanh(k * h));
    const leg = of.length / 2 + beyond;
    let sum = 0;
    field.forEach((value, i) => {
      const window = Math.min(1, Math.max(0, 1 - (i * of.cell - leg) / legWidth));
      sum += (i === 0 ? 0.5 : 1) * value * window * of.cell;
    });
    return sum / (plane * (of.length / 2));
  };
  const endless = factorOf(row);

  test('agrees between endless discs', () => {
    expect(Math.abs(computeEndFactor(machineOf(row, 1)).endFactor - endless)).toBeLessThan(2e-3);
  });

  const coilAlone = computeEndFactor(machineOf(row, 1)).band;
  test.each([
    ['discs that end with the magnets', { ...row, overhang: 0 }],
    ['discs that end 5 mm beyond', { ...row, overhang: 0.005 }],
    ['discs that end 10 mm beyond', { ...row, overhang: 0.01 }],
    ['recoil 1.05', { ...row, recoil: 1.05 }],
    ['recoil 1.2', { ...row, recoil: 1.2 }],
    ['both, short magnets', { ...row, length: 0.03, recoil: 1.1, overhang: 0.002 }],
  ])('the band holds what comes of %s, without its share for the coil', (_, other) => {
    const reference = other.length === row.length ? endless : factorOf({ ...other, recoil: 1, overhang: 0.05 });
    const change = factorOf(other) / reference - 1;
    expect(change).toBeGreaterThan(0);
    expect(change).toBeLessThan(computeEndFactor(machineOf(other, other.recoil)).band - coilAlone);
  });
});

describe('reciprocity', () => {
  /** Magnets on one side, no steel. */
  const machine = withRotor(keeperMachine(), { disc: undefined, keeper: undefined });
  const model = gapModel(machine);
  const corners = [
    [-0.013, 0.098],
    [0.013, 0.098],
    [0.022, 0.157],
    [-0.022, 0.157],
  ] as const;

  /** By of a loop in the plane y = 0 with the current of 1 A whose By is positive inside it, by Biot and Savart, T. */
  function loopField(x: number, y: number, z: number): number {
    let by = 0;
    for (let i = 0; i < 4; i++) {
      const [ax, az] = corners[i];
      const [bx, bz] = corners[(i + 1) % 4];
      const length = Math.hypot(bx - ax, bz - az);
      const [ex, ez] = [(bx - ax) / length, (bz - az) / length];
      const l1 = (ax - x) * ex + (az - z) * ez;
      const l2 = (bx - x) * ex + (bz - z) * ez;
      const off = (ax - x) * ez - (az - z) * ex;
      const square = off * off + y * y;
      by +=
        ((MU0 / (4 * Math.PI)) *
          off *
          (l2 / Math.hypot(l2, Math.sqrt(square)) - l1 / Math.hypot(l1, Math.sqrt(square)))) /
        square;
    }
    return by;
  }

  test('flux of the magnets through a loop is that of the loop through the magnets as current sheets', () => {
    const field = gapField(poleFaces(machine, model), readAt(model, 0), 0.2);
    const { at, weight } = gaussPoints(10);
    const { magnets, poles, gap } = machine.rotor;
    if (magnets.shape !== 'block') throw new Error('not blocks');
    // Turned a little from the magnets' axis, so that no symmetry helps.
    const turn = 0.05;
    let through = 0;
    for (let i = 0; i < 10; i++) {
      for (let j = 0; j < 10; j++) {
        const share = (1 + at[j]) / 2;
        const z = 0.098 + share * 0.059;
        const half = 0.013 + share * 0.009;
        const x = half * at[i];
        const angle = (poles / 2) * (Math.atan2(x, z) + turn);
        through += weight[i] * weight[j] * half * (0.059 / 2) * field(Math.hypot(x, z), angle);
      }
    }
    let back = 0;
    for (let pole = 0; pole < poles; pole++) {
      const off = (2 * Math.PI * pole) / poles - turn;
      for (let i = 0; i < 10; i++) {
        for (let j = 0; j < 10; j++) {
          const [x, z] = [(magnets.width / 2) * at[i], magnets.meanRadius + (magnets.length / 2) * at[j]];
          for (let l = 0; l < 10; l++) {
            const y = gap / 2 + (magnets.thickness / 2) * (1 + at[l]);
            const cell = (weight[i] * weight[j] * weight[l] * magnets.width * magnets.length * magnets.thickness) / 8;
            const sign = pole % 2 === 0 ? 1 : -1;
            back +=
              ((sign * model.remanence) / MU0) *
              cell *
              loopField(x * Math.cos(off) + z * Math.sin(off), y, z * Math.cos(off) - x * Math.sin(off));
          }
        }
      }
    }
    expect(through).toBeGreaterThan(1e-4);
    expect(relativeError(through, back)).toBeLessThan(2e-4);
  });
});

describe('outside its range', () => {
  test('discs that end with the magnets are told and widen the band', () => {
    const disc = { material: 'plate', thickness: 0.01, innerRadius: 0.09, outerRadius: 0.1555 };
    const { warnings, band } = computeEndFactor(withRotor(hutHydro(), { disc }));
    expect(warnings.map(({ key }) => key)).toEqual(['rotor.disc.outer_radius']);
    expect(band).toBeGreaterThan(computeEndFactor(hutHydro()).band + 0.005);
    const short = { ...disc, innerRadius: 0.1005, outerRadius: 0.165 };
    expect(computeEndFactor(withRotor(hutHydro(), { disc: short })).warnings[0].key).toBe('rotor.disc.inner_radius');
  });

  test('interpoles into and through the disc are told and widen the band', () => {
    const [beside, into, through] = [interpoleMachine(), interpoleMachine(0.016), interpoleMachine(0.022, true)].map(
      computeEndFactor,
    );
    expect(beside.warnings).toEqual([]);
    expect(into.warnings.map(({ key }) => key)).toEqual(['rotor.interpoles']);
    expect(through.warnings.map(({ key }) => key)).toEqual(['rotor.interpoles']);
    expect(into.endFactor).toBe(beside.endFactor); // as deep as the magnets in the model
    expect(into.band).toBeGreaterThan(beside.band);
    expect(through.band).toBeGreaterThan(into.band);
  });

  test('a gap wider than the pole pitch is told', () => {
    const machine = withWinding(withRotor(hutHydro(), { gap: 0.045 }), { thickness: 0.04 });
    expect(computeEndFactor(machine).warnings.map(({ key }) => key)).toContain('rotor.poles');
  });

  test('a factor too far from 1 is told', () => {
    const { winding } = hutHydro();
    const opening = { ...winding.opening, innerRadius: 0.124, outerRadius: 0.132 };
    const machine = withWinding(hutHydro(), { opening, legWidth: 0.004 });
    const { warnings, endFactor } = computeEndFactor(machine);
    expect(endFactor).toBeLessThan(0.75);
    expect(warnings.map(({ key }) => key)).toContain('emf.end_factor');
  });
});
