import { describe, expect, test } from 'vitest';
import { computeDemagnetisation } from '../../../packages/machine-models/src/demagnetisation/demagnetisation.js';
import { solveFineSlice } from '../../../packages/machine-models/src/demagnetisation/fine-slice.js';
import { fieldStrength, magnetSamples } from '../../../packages/machine-models/src/demagnetisation/magnet-samples.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { coercivityAt, remanenceAt } from '../../../packages/machine-models/src/materials/at-temperature.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';
import { halbachHydro, interpoled, keeperHydro, roundHydro, withRotor } from '../slices/variants.js';

const solve = (machine: Machine) => machine.model.slices.map((slice) => solveSlice(machine, slice));
const judge = (machine: Machine, path?: Parameters<typeof computeDemagnetisation>[2]) =>
  computeDemagnetisation(machine, solve(machine), path);

function withMagnet(machine: Machine, parts: Record<string, unknown>): Machine {
  const magnet = machine.materials.magnet_42;
  if (magnet?.kind !== 'magnet') throw new Error('a magnet');
  return { ...machine, materials: { ...machine.materials, magnet_42: { ...magnet, ...parts } } };
}

const atCelsius = (celsius: number): Machine => {
  const machine = hutHydro();
  return withRotor({ magnets: { ...machine.rotor.magnets, temperature: celsius } });
};

describe('blocks with the circuit open', () => {
  const cold = judge(hutHydro());
  const [magnet] = cold.magnets;

  test('the worst place is a corner or a side of the magnet; B and H lie on the recoil line', () => {
    expect(cold.magnets.map(({ region }) => region)).toEqual(['upper magnet']);
    const { atRest } = cold;
    if (atRest === undefined || magnet === undefined) throw new Error('a state');
    expect(magnet.worst).toBe(magnet.states[0]);
    expect(atRest).toEqual(magnet.worst);
    expect(relativeError(atRest.h, (atRest.b - 1.3) / (4e-7 * Math.PI * 1.05))).toBeLessThan(1e-9);
    expect(atRest.margin).toBeCloseTo(1 + atRest.h / 955e3, 12);
    expect(atRest.margin).toBeGreaterThan(0.45);
    expect(atRest.margin).toBeLessThan(0.6);
    expect(atRest.y).toBeGreaterThan(0.0095);
    expect(atRest.x).toBeLessThan(0.014);
    expect(cold.warnings).toEqual([]);
  });

  test('linear steel: at 60 and 80 degC B goes with the remanence, the margin falls with the coercivity', () => {
    const margins = [60, 80].map((celsius) => {
      const { atRest } = judge(atCelsius(celsius));
      const material = hutHydro().materials.magnet_42;
      if (atRest === undefined || cold.atRest === undefined || material?.kind !== 'magnet') throw new Error('a state');
      expect(relativeError(atRest.b / cold.atRest.b, remanenceAt(material, celsius) / 1.3)).toBeLessThan(1e-6);
      expect(atRest.margin).toBeCloseTo(1 + atRest.h / (coercivityAt(material, celsius) ?? Number.NaN), 9);
      return atRest.margin ?? Number.NaN;
    });
    expect(margins[0]).toBeLessThan(cold.atRest?.margin ?? 0);
    expect(margins[1]).toBeLessThan(margins[0] ?? 0);
  });

  test('finer meshes do not change it', () => {
    const radius = cold.atRest?.radius ?? 0;
    const fine = solveSlice(hutHydro(), { radius, weight: 1 }, { accuracy: 1e-6 });
    const rising = (field: typeof fine.field): number => {
      const samples = magnetSamples(field, 'upper magnet');
      const order = [...samples.along.keys()].sort((i, j) => (samples.along[i] ?? 0) - (samples.along[j] ?? 0));
      const whole = samples.area.reduce((sum, part) => sum + part, 0);
      let passed = 0;
      const at = order.find((i) => {
        passed += samples.area[i] ?? 0;
        return passed > 0.01 * whole;
      });
      return fieldStrength(samples, samples.along[at ?? 0] ?? 0);
    };
    expect(relativeError(cold.atRest?.h ?? 0, rising(fine.field))).toBeLessThan(0.02);
    expect(cold.atRest?.h).toBe(rising(solveFineSlice(hutHydro(), radius).field));
  });

  test('a gap closed to next to nothing leaves hardly any field against the magnets; an open one more', () => {
    const h = [0.005, 0.019, 0.06].map((gap) => {
      const machine = withRotor({ gap });
      return judge({ ...machine, winding: { ...machine.winding, thickness: 0.8 * gap } }).atRest?.h ?? 0;
    });
    expect(h[0]).toBeGreaterThan(h[1] ?? 0);
    expect(h[1]).toBeGreaterThan(h[2] ?? 0);
  });
});

describe('under currents', () => {
  const machine = hutHydro();
  const slices = solve(machine);
  const marginWith = (direct: number): number => {
    const { magnets } = computeDemagnetisation(machine, slices, [{ direct, quadrature: 0 }]);
    return magnets[0]?.states.find(({ circuit }) => circuit === 'short')?.margin ?? Number.NaN;
  };

  test('none is the open circuit; more against the magnets is worse; many times the rated ones pass the knee', () => {
    const open = computeDemagnetisation(machine, slices).atRest?.margin ?? Number.NaN;
    const margins = [0, 30, 60, 600].map(marginWith);
    expect(margins[0]).toBeCloseTo(open, 9);
    for (let i = 1; i < margins.length; i++) expect(margins[i]).toBeLessThan(margins[i - 1] ?? 0);
    expect(margins[3]).toBeLessThan(0);
  });

  test('past the knee it is told, with the place, the temperature that would do, and grades that would', () => {
    const { warnings, magnets } = computeDemagnetisation(machine, slices, [{ direct: 500, quadrature: 0 }]);
    expect(magnets[0]?.worst.margin).toBeLessThan(0);
    expect(warnings).toHaveLength(1);
    expect(warnings[0]?.key).toBe('magnets.demagnetisation_margin');
    expect(warnings[0]?.text).toMatch(/past its knee under a short circuit at 20 degC \(with the circuit open/);
    expect(warnings[0]?.text).toMatch(/upper magnet, slice at \d+(\.\d)? mm/);
    expect(magnets[0]?.betterGrades.length).toBeGreaterThan(0);
    for (const grade of magnets[0]?.betterGrades ?? []) expect(warnings[0]?.text).toContain(grade);
  });
});

describe('ferrite in the cold', () => {
  const ferrite = withMagnet(hutHydro(), {
    remanence: 0.39,
    remanenceSlope: -0.002,
    coercivityIntrinsic: 245e3,
    coercivitySlope: 0.0027,
  });
  const machine = { ...ferrite, operation: { ...ferrite.operation, cold: -30 } };

  test('is judged at the coldest start too, and is worse off there: more remanence, less coercivity', () => {
    const { magnets, atRest } = judge(machine);
    const states = magnets[0]?.states ?? [];
    expect(states.map(({ celsius, circuit }) => [celsius, circuit])).toEqual([
      [20, 'open'],
      [-30, 'open'],
    ]);
    expect(magnets[0]?.worst.celsius).toBe(-30);
    expect(atRest?.celsius).toBe(20);
    const [warm, cold] = states;
    expect(relativeError((cold?.h ?? 0) / (warm?.h ?? 1), 1.1)).toBeLessThan(1e-6);
    expect(cold?.knee?.h).toBeCloseTo(-245e3 * (1 - 0.0027 * 50), 6);
  });

  test('NdFeB is not: it gains there', () => {
    const { magnets } = judge({ ...hutHydro(), operation: { ...hutHydro().operation, cold: -30 } });
    expect(magnets[0]?.states).toHaveLength(1);
  });
});

describe('other magnets', () => {
  test('each piece of a Halbach array, each interpole, each side of a keeper machine has its own', () => {
    const regions = (machine: Machine) => judge(machine).magnets.map(({ region }) => region);
    expect(regions(halbachHydro(2))).toEqual(['upper magnet', 'upper magnet 1']);
    expect(regions(interpoled(0.012))).toEqual(['upper magnet', 'upper interpole']);
    expect(regions(keeperHydro())).toEqual(['upper magnet']);
    expect(regions(roundHydro())).toEqual(['upper magnet']);
  });

  test('interpoles face the field of their neighbours: they are worse off than the main magnets', () => {
    const [main, between] = judge(interpoled(0.012)).magnets;
    expect(between?.worst.h).toBeLessThan(main?.worst.h ?? 0);
  });

  test('without coercivity there is B but no margin, and that is told', () => {
    const { magnets, atRest, warnings } = judge(withMagnet(hutHydro(), { coercivityIntrinsic: undefined }));
    expect(atRest?.margin).toBeUndefined();
    expect(atRest?.b).toBeGreaterThan(0.5);
    expect(magnets[0]?.limit).toBeUndefined();
    expect(warnings.map(({ text }) => text).join()).toMatch(/left out for magnet_42: its coercivity at 20 degC/);
  });
});
