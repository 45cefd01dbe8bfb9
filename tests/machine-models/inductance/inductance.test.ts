import { describe, expect, test } from 'vitest';
import { computeInductance } from '../../../packages/machine-models/src/inductance/inductance.js';
import { wholeCoils } from '../../../packages/machine-models/src/inductance/whole-coils.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { simpsonRadii } from '../../../packages/machine-models/src/rotor/slice-radii.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { hutHydro, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';
import { ironless } from '../slices/variants.js';

const solved = (machine: Machine, slices = machine.model.slices) => slices.map((slice) => solveSlice(machine, slice));
const inductanceOf = (machine: Machine) => computeInductance(machine, solved(machine));

describe('parts', () => {
  const { self, mutual, phase, warnings } = inductanceOf(hutHydro());

  test('add up', () => {
    for (const part of [self, mutual, phase]) expect(part.total).toBe(part.slices + part.endTurns);
    for (const key of ['total', 'slices', 'endTurns'] as const) {
      expect(phase[key]).toBeCloseTo(self[key] - mutual[key], 12);
    }
    expect(warnings).toEqual([]);
  });

  test('coils side by side drive flux backwards through their neighbours', () => {
    expect(mutual.total).toBeLessThan(0);
    expect(-mutual.total).toBeLessThan(self.total / 2);
  });
});

describe('steel of endless permeability, magnets like air: slices by fields and by closed form', () => {
  const ideal = <M extends Machine>(machine: M): M => {
    const magnet = machine.materials.magnet_42;
    if (magnet?.kind !== 'magnet') throw new Error('not a magnet');
    const plate = { kind: 'steel', muR: 1e7, source: 'invented' } as const;
    return { ...machine, materials: { plate, magnet_42: { ...magnet, recoil: 1 } } };
  };
  test.each([
    ['side by side', ideal(hutHydro())],
    ['overlapped', ideal(overlappedHydro())],
    ['no steel', ideal(ironless())],
  ])('%s', (_, machine) => {
    const { self, mutual } = inductanceOf(machine);
    const { slices } = wholeCoils(machine, { reach: 24, step: 3, station: 0.1 });
    const turns = machine.winding.turns ** 2;
    expect(relativeError(self.slices, turns * slices.self)).toBeLessThan(1e-3);
    expect(relativeError(mutual.slices, turns * slices.mutual)).toBeLessThan(1e-3);
  });
});

test('three slices do, also where the legs are shorter or longer than the magnets', () => {
  const machine = hutHydro();
  const more = solved(machine, simpsonRadii(0.1005, 0.1555, 5));
  const few = more.filter((_, i) => i % 2 === 0);
  for (const [innerRadius, outerRadius] of [
    [0.1045, 0.1515] as const,
    [0.112, 0.14] as const,
    [0.098, 0.158] as const,
  ]) {
    const other = withWinding(machine, { opening: { ...machine.winding.opening, innerRadius, outerRadius } });
    const [a, b] = [computeInductance(other, few).phase, computeInductance(other, more).phase];
    expect(relativeError(a.slices, b.slices)).toBeLessThan(1e-3);
  }
});

test('legs far beyond the magnets are told', () => {
  const machine = overlappedHydro();
  const longer = withWinding(machine, { legs: { innerRadius: 0.085, outerRadius: 0.17 } });
  const { warnings } = computeInductance(longer, solved(machine));
  expect(warnings.map(({ text }) => text).join()).toContain('beyond the magnets');
});

describe('six phases: two stars', () => {
  test('each star has the phase inductance of its own', () => {
    const machine = withWinding(overlappedHydro(), { phases: 6, coils: 48, legWidth: 0.0064 });
    const { self, mutual, phase } = inductanceOf(machine);
    expect(mutual.slices).toBeLessThan(0);
    expect(phase.total).toBeCloseTo(self.total - mutual.total, 12);
  });
});

describe('held against the outside', () => {
  test('measured pulse generator: right order of magnitude', () => {
    // A 40-pole wave-wound machine, one phase a stator, measured 90.02, 84.56 and 91.02 microhenry (see
    // `built-machines.test.ts`). Ten conductors a leg, 7.6 mm wide in ten layers of 0.9 mm, 140 to 180 mm. Missing: gap (12 mm
    // taken), steel behind the magnets, which differs between outer and inner rotors; and its ends run one way round in waves
    // where coils go to and fro.
    const base = overlappedHydro();
    const magnets = { ...base.rotor.magnets, width: 0.01, length: 0.04, thickness: 0.005, meanRadius: 0.16 } as const;
    const of = (disc: Machine['rotor']['disc']) => {
      const machine: Machine = {
        ...base,
        rotor: { ...base.rotor, poles: 40, gap: 0.012, magnets: magnets as Machine['rotor']['magnets'], disc },
        winding: {
          ...base.winding,
          coils: 60,
          turns: 10,
          legWidth: 0.0076,
          thickness: 0.009,
          legs: { innerRadius: 0.14, outerRadius: 0.18 },
        },
        model: { ...base.model, slices: simpsonRadii(0.14, 0.18, 3) },
      };
      return inductanceOf(machine).self;
    };
    for (const self of [of(base.rotor.disc), of(undefined)]) {
      expect(self.total / 88.5e-6).toBeGreaterThan(0.6);
      expect(self.total / 88.5e-6).toBeLessThan(1.6);
    }
  });

  test('hut hydro: the rough air-coil formula knows no steel', () => {
    // 0.78 mH by L = 31.6e-6 N^2 a^2/(6 a + 9 l + 10 c) a coil (Wheeler, Simple inductance formulas for radio coils, 1928), four in
    // series, no coupling: that of the machine without steel, a quarter less than with it.
    const without = inductanceOf(ironless()).phase.total;
    expect(relativeError(without, 0.78e-3)).toBeLessThan(0.05);
    const { phase } = inductanceOf(hutHydro());
    expect(phase.total / without).toBeGreaterThan(1.2);
    expect(phase.total / without).toBeLessThan(1.5);
  });
});
