import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { describeMachine } from '../../../packages/machine-models/src/results/assemble.js';
import { lineResistanceHot } from '../../../packages/machine-models/src/results/merit.js';
import { windingFactor } from '../../../packages/machine-models/src/results/winding-figures.js';
import { closedFormSlices, hutHydro, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';
import { singleToothWindingFactor } from '../../helpers/single-tooth.js';

const stamp = { version: '0.1.0', inputSha256: 'abc' };
const solve = (machine: Machine): ReturnType<typeof describeMachine> =>
  describeMachine(machine, { slices: closedFormSlices(machine) }, [], stamp);

describe('hut hydro with ideal discs', () => {
  const machine = hutHydro();
  const result = solve(machine);

  test('the discs draw together with about 2850 N (Maxwell stress of the same series [CALC])', () => {
    expect(relativeError(result.mechanical.disc_pull_N, 2850)).toBeLessThan(0.002);
  });

  test('masses: 32 blocks, two rings, and 0.202 m x 696 turns of 2.19 mm2', () => {
    expect(result.masses.magnets_kg).toBeCloseTo(32 * 0.028 * 0.055 * 0.012 * 7500, 10);
    expect(result.masses.steel_kg).toBeCloseTo(2 * Math.PI * (0.165 ** 2 - 0.09 ** 2) * 0.01 * 7850, 10);
    expect(relativeError(result.masses.copper_kg, 0.2021 * 696 * 2.187e-6 * 8890)).toBeLessThan(1e-3);
  });

  test('a sector fills its share of the pole pitch', () => {
    const { magnets } = machine.rotor;
    const { material, thickness, meanRadius, temperature } = magnets;
    const sector = {
      ...machine,
      rotor: {
        ...machine.rotor,
        magnets: {
          shape: 'sector' as const,
          arc: 1,
          length: 0.055,
          segments: 1,
          material,
          thickness,
          meanRadius,
          temperature,
        },
      },
    };
    const ring = Math.PI * (0.1555 ** 2 - 0.1005 ** 2) * 0.012;
    expect(solve(sector).masses.magnets_kg).toBeCloseTo(2 * ring * 7500, 10);
  });

  test('masses without a density, and the steel of an ironless machine, are left out', () => {
    const { density: _density, ...plate } = machine.materials.plate;
    const noDensity = { ...machine, materials: { ...machine.materials, plate } };
    expect(solve(noDensity).masses).not.toHaveProperty('steel_kg');
    const ironless = { ...machine, rotor: { ...machine.rotor, disc: undefined } };
    expect(solve(ironless).masses).not.toHaveProperty('steel_kg');
    expect(solve(ironless).slices[0]).not.toHaveProperty('disc_B_T');
  });

  test('merit is V^2/R of the rectified mean over two phases in series, hot', () => {
    const { rectified_mean_V } = result.emf;
    const hot = result.winding.phase_resistance_hot_ohm;
    expect(hot / result.winding.phase_resistance_20C_ohm).toBeCloseTo(1 + 0.00393 * 70, 12);
    expect(result.merit.merit_W).toBeCloseTo(rectified_mean_V ** 2 / (2 * hot), 6);
  });

  test('turns against wire section leave the merit alone: half the turns of twice the section', () => {
    const { wire } = machine.winding;
    const other = solve(withWinding(machine, { turns: 29, wire: { ...wire, strandArea: 2 * wire.strandArea } }));
    expect(other.merit.merit_W).toBeCloseTo(result.merit.merit_W, 6);
    expect(other.winding.fill_factor).toBeCloseTo(result.winding.fill_factor, 12);
  });

  test('star and delta have the same merit but for the harmonics', () => {
    const delta = withWinding(machine, { connection: 'delta' });
    expect(lineResistanceHot(machine) / lineResistanceHot(delta)).toBeCloseTo(3, 12);
    expect(relativeError(solve(delta).merit.merit_W, result.merit.merit_W)).toBeLessThan(0.03);
  });

  test('winding factors: the pitch and spread of real legs at the mean radius, times the published distribution', () => {
    expect(result.winding.order[0]).toBe(1);
    // 12 coils on 16 poles: hole 21 mm and leg about 20.9 mm at 128 mm radius, pole pitch 50.3 mm
    const span = 0.021 + 0.0209;
    const estimate =
      Math.sin((Math.PI * span) / (2 * 0.05027)) *
      (Math.sin((Math.PI * 0.0209) / (2 * 0.05027)) / ((Math.PI * 0.0209) / (2 * 0.05027)));
    expect(result.winding.winding_factor[0]).toBeCloseTo(estimate, 2);
    expect(windingFactor(overlappedHydro(), 1)).toBeGreaterThan(singleToothWindingFactor(12, 16, 1));
    expect(result.winding.phase_map.slice(0, 3)).toEqual([
      { phase: 1, sense: 1 },
      { phase: 3, sense: 1 },
      { phase: 2, sense: 1 },
    ]);
  });

  test('the result is plain data without a hole: JSON gives it back', () => {
    expect(JSON.parse(JSON.stringify(result))).toEqual(result);
    expect(result).toMatchObject({
      format: 'gapwright-result/1',
      gapwright: '0.1.0',
      machine: 'Hut hydro, 106 V link',
      input_sha256: 'abc',
    });
    expect(result.slices.map(({ radius_m }) => radius_m)).toEqual(machine.model.slices.map(({ radius }) => radius));
    expect(result.emf).not.toHaveProperty('end_factor');
  });
});

describe('warnings', () => {
  const machine = hutHydro();
  const slices = closedFormSlices(machine);

  test('of the reader come first, and a slice that failed adds its own', () => {
    const given = { key: 'operation.load', text: 'left out' };
    const bad = slices.map((slice, i) => ({ ...slice, converged: i !== 0, accurate: i !== 2 }));
    const { warnings } = describeMachine(machine, { slices: bad }, [given], stamp);
    expect(warnings.map(({ key }) => key)).toEqual(['operation.load', 'slices[0]', 'slices[2]']);
    expect(warnings[1].text).toMatch(/100\.5 mm did not converge/);
    expect(warnings[2].text).toMatch(/0\.20 %/);
  });
});

describe('cautions', () => {
  const machine = hutHydro();
  const about = (other: Machine, word: RegExp): string | undefined =>
    solve(other).cautions.find((text) => word.test(text));

  test('every machine has the general ones, the preliminary nature last', () => {
    const { cautions } = solve(machine);
    expect(cautions.at(-1)).toMatch(/preliminary.*licensed/);
  });

  test('crushing is told in N and kgf, unless magnets are small and the pull is slight', () => {
    const newtons = solve(machine).mechanical.disc_pull_N;
    const text = about(machine, /^Crushing/);
    expect(text).toContain(`${newtons.toFixed(0)} N (${(newtons / 9.80665).toFixed(0)} kgf)`);
    const { magnets } = machine.rotor;
    const tiny = {
      ...machine,
      rotor: { ...machine.rotor, gap: 0.06, magnets: { ...magnets, length: 0.015 } },
    };
    const weak = closedFormSlices(tiny).map((slice) => ({ ...slice, pull: 0.1 }));
    const { cautions } = describeMachine(tiny, { slices: weak }, [], stamp);
    expect(cautions.some((each) => /^Crushing/.test(each))).toBe(false);
  });

  test('shock is told where the open bridge peaks above 60 V DC, at speed or at overspeed', () => {
    const { peak_V } = solve(machine).emf.line;
    // Magnets at -10 degC carry 1 + 0.0012 x 30 times their remanence at 20 degC.
    const overspeedPeak = (1.036 * peak_V * 756) / 420;
    expect(about(machine, /^Electric shock/)).toContain(
      `${overspeedPeak.toFixed(0)} V at 756 rpm with magnets at -10 degC`,
    );
    expect(relativeError(solve(machine).faults.overspeed_dc_peak_V ?? 0, overspeedPeak)).toBeLessThan(1e-12);
    const { cold: _cold, ...mild } = machine.operation;
    const slow = (overspeedRpm: number): Machine => ({
      ...machine,
      operation: { ...mild, speedRpm: (420 * 40) / peak_V, overspeedRpm },
    });
    expect(about(slow((420 * 59) / peak_V), /^Electric shock/)).toBeUndefined();
    expect(about(slow((420 * 61) / peak_V), /^Electric shock/)).toMatch(/60 V DC/);
  });

  test('the rim speed is that of the disc at overspeed', () => {
    const rim = (2 * Math.PI * 756 * 0.165) / 60;
    expect(about(machine, /^Flying parts/)).toContain(`${rim.toFixed(1)} m/s at 756 rpm`);
  });

  test('saturated discs draw a warning, others none', () => {
    const keys = (discB: number): readonly string[] => {
      const slices = closedFormSlices(machine).map((slice) => ({ ...slice, discB }));
      return describeMachine(machine, { slices }, [], stamp).warnings.map(({ key }) => key);
    };
    expect(keys(1.7)).toEqual([]);
    expect(keys(2.1)).toEqual(['rotor.disc.thickness']);
  });

  test('heat is told above 60 degC only', () => {
    expect(about(machine, /^Heat/)).toContain('90 degC');
    expect(about(withWinding(machine, { temperature: 60 }), /^Heat/)).toBeUndefined();
  });

  test('current that circulates with no load: triplen harmonics in delta', () => {
    expect(about(machine, /^Circulating/)).toBeUndefined();
    const third = (connection: 'star' | 'delta'): readonly string[] => {
      const other = withWinding(machine, { connection });
      const slices = closedFormSlices(other).map((slice) => ({
        ...slice,
        windingB: { order: [1, 3], amplitude: [0.5, 0.2] },
      }));
      return describeMachine(other, { slices }, [], stamp).cautions.filter((text) => /^Circulating/.test(text));
    };
    expect(third('star')).toEqual([]);
    expect(third('delta')[0]).toMatch(/V rms per phase.*A through it/);
  });
});
