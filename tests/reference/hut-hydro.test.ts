import { readFileSync } from 'node:fs';
import { buildLocator, valueAt } from '@gapwright/fem-core';
import type { Cuts, Machine, MachineResult, SolvedSlice } from '@gapwright/machine-models';
import { describeMachine, readMachine, solveSlice } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import type { Gap } from './double-disc.js';
import { seriesMean, seriesPull } from './double-disc.js';
import { check } from './table.js';

const FILE = 'hut-hydro.yaml';
const TEXT = readFileSync(new URL(`../../packages/cli/scenarios/${FILE}`, import.meta.url), 'utf8');

/** The hut hydro scenario without its end factor: what the slices alone say. */
function hutHydro(settings: Readonly<Record<string, string>> = {}): Machine {
  return readMachine(TEXT, {
    file: FILE,
    settings: Object.entries({ 'model.end_correction': 'off', ...settings }).map(([key, value]) => ({ key, value })),
  }).machine;
}

const solveAll = (machine: Machine, accuracy?: number): SolvedSlice[] =>
  machine.model.slices.map((slice) => solveSlice(machine, slice, accuracy === undefined ? {} : { accuracy }));

const describeAll = (machine: Machine, slices: readonly SolvedSlice[]): MachineResult =>
  describeMachine(machine, { slices: slices.map(({ answer }) => answer) }, [], { version: '0', inputSha256: '' });

// The machine's figures as its file gives them, worked out here on their own.
const [POLE_PAIRS, COILS_A_PHASE, TURNS, OMEGA] = [8, 4, 58, (2 * Math.PI * 420) / 60];
const [MEAN_RADIUS, LENGTH] = [0.128, 0.055];
const THICKNESS = 0.015;
const SLICES = [
  [MEAN_RADIUS - LENGTH / 2, LENGTH / 6],
  [MEAN_RADIUS, (4 * LENGTH) / 6],
  [MEAN_RADIUS + LENGTH / 2, LENGTH / 6],
] as const;

/**
 * Angles from the coil's axis to the near and the far edge of its leg on the circle of radius r: the opening's side runs
 * from 6 mm off the axis at 104.5 mm to 15 mm at 151.5 mm, the far edge 20.5 mm from it at right angles.
 */
function legEdges(r: number): readonly [near: number, far: number] {
  const slope = (0.015 - 0.006) / (0.1515 - 0.1045);
  const angleAt = (offset: number): number => {
    const across = (along: number): number => 0.006 + slope * (along - 0.1045) + offset * Math.hypot(1, slope);
    let [low, high] = [0, r];
    for (let i = 0; i < 60; i++) {
      const middle = (low + high) / 2;
      if (Math.hypot(middle, across(middle)) < r) low = middle;
      else high = middle;
    }
    return Math.atan2(across(low), low);
  };
  return [angleAt(0), angleAt(0.0205)];
}

describe('discs of mu_r 100 000 and magnets of recoil 1: the series of the double-disc gap is exact', () => {
  const source =
    'scalar potential in layers and the legs as drawn, three slices by Simpson (calculated on its own, no program shared)';
  const machine = hutHydro({
    'materials.gw_disc': '{ kind: steel, mu_r: 100000 }',
    'rotor.disc.material': 'gw_disc',
    'materials.magnet_42.recoil': '1',
  });
  const result = describeAll(machine, solveAll(machine));
  const remanence = 1.3;
  const gapAt = (r: number): Gap => ({
    polePitch: (Math.PI * r) / POLE_PAIRS,
    width: 0.028,
    height: 0.012,
    halfGap: 0.0095,
    remanence,
    recoil: 1,
  });
  // All four coils of a phase stand alike before the poles (3 coils to 4 poles).
  const peakOf = (n: number): number =>
    SLICES.reduce((sum, [r, weight]) => {
      const [near, far] = legEdges(r);
      const [centre, half] = [(POLE_PAIRS * (near + far)) / 2, (POLE_PAIRS * (far - near)) / 2];
      const spread = Math.sin(n * half) / (n * half);
      const leg = seriesMean(gapAt(r), n, THICKNESS / 2) * spread * Math.sin(n * centre);
      return sum + 2 * COILS_A_PHASE * TURNS * OMEGA * weight * r * leg;
    }, 0);
  const orders = [1, 3, 5, 7, 9, 11, 13, 15, 17, 19, 21];
  const rmsOf = (factor: (n: number) => number): number =>
    Math.hypot(...orders.map((n) => peakOf(n) * factor(n))) / Math.SQRT2;
  const given = { case: 'hut hydro, ideal discs', source };

  test('phase EMF: fundamental, harmonics and rms', () => {
    const { phase } = result.emf;
    const fundamental = Math.abs(peakOf(1)) / Math.SQRT2;
    const bound = phase.fundamental_rms_V_rel_err * phase.fundamental_rms_V;
    check(
      {
        ...given,
        quantity: 'phase EMF, fundamental rms, V',
        expected: fundamental,
        got: phase.fundamental_rms_V,
        bound,
      },
      2e-3,
      2e-4, // the discs are not quite ideal
    );
    for (const n of [3, 5, 7]) {
      const got = phase.harmonic_rms_V[phase.order.indexOf(n)];
      const expected = Math.abs(peakOf(n)) / Math.SQRT2;
      check({ ...given, quantity: `phase EMF, order ${n}, rms, V`, expected, got, scale: fundamental }, 2e-3);
    }
    check({ ...given, quantity: 'phase EMF, rms, V', expected: rmsOf(() => 1), got: phase.rms_V }, 2e-3);
  });

  test('line EMF in star and its rectified mean', () => {
    const lineFactor = (n: number): number => 2 * Math.abs(Math.sin((n * Math.PI) / 3));
    const { line } = result.emf;
    check({ ...given, quantity: 'line EMF, rms, V', expected: rmsOf(lineFactor), got: line.rms_V }, 2e-3);
    const steps = 720;
    let expected = 0;
    for (let i = 0; i < steps; i++) {
      const phases = [0, 1, 2].map((p) => {
        const theta = (2 * Math.PI * (i + 0.5)) / steps - (2 * Math.PI * p) / 3;
        return orders.reduce((sum, n) => sum + peakOf(n) * Math.sin(n * theta), 0);
      });
      expected += (Math.max(...phases) - Math.min(...phases)) / steps;
    }
    check({ ...given, quantity: 'rectified mean, V', expected, got: result.emf.rectified_mean_V }, 2e-3);
  });

  test('pull of the discs', () => {
    const expected = SLICES.reduce((sum, [r, weight]) => sum + 2 * POLE_PAIRS * weight * seriesPull(gapAt(r)), 0);
    const { disc_pull_N: got, disc_pull_N_rel_err: relErr } = result.mechanical;
    check({ ...given, quantity: 'pull, N', expected, got, bound: relErr * got }, 2e-3, 2e-4);
  });
});

describe('the set as it is', () => {
  const machine = hutHydro();
  const solved = solveAll(machine);
  const result = describeAll(machine, solved);

  /** A anywhere round the machine, from the drawn half of a pole above the mid-plane, by its symmetries. */
  function potentialOf({ field, pole }: SolvedSlice): (x: number, y: number) => number {
    const locator = buildLocator(field.mesh);
    const { polePitch } = pole;
    expect(pole.cuts).toEqual({ magnetAxis: true, midPlane: true });
    return (x, y) => {
      const poles = Math.round(x / polePitch);
      const within = x - poles * polePitch;
      const value = valueAt(field, locator, Math.abs(within), Math.abs(y));
      if (value === undefined) throw new Error(`(${x}, ${y}) lies outside`);
      return Math.sign(within) * value.a * (poles % 2 === 0 ? 1 : -1);
    };
  }

  test('EMF by flux cutting is the rate of change of the flux linkage taken from A of the same fields', () => {
    const nodes = [0.0694318442, 0.3300094782, 0.6699905218, 0.9305681558]; // Gauss, four points
    const weights = [0.1739274226, 0.3260725774, 0.3260725774, 0.1739274226];
    const degrees = 360;
    const linkage = new Float64Array(degrees);
    SLICES.forEach(([r, weight], s) => {
      const potential = potentialOf(solved[s]);
      const [near, far] = legEdges(r);
      // Mean of A over a leg's section, its edges given as angles from the magnet's axis.
      const legMean = (from: number, to: number): number => {
        const parts = 6;
        let sum = 0;
        for (let part = 0; part < parts; part++) {
          nodes.forEach((u, i) => {
            const x = r * (from + ((to - from) * (part + u)) / parts);
            nodes.forEach((v, j) => {
              sum += (weights[i] * weights[j] * potential(x, (v * THICKNESS) / 2)) / parts;
            });
          });
        }
        return sum;
      };
      for (let i = 0; i < degrees; i++) {
        const turned = (2 * Math.PI * i) / (degrees * POLE_PAIRS); // the rotor moves on, so the coil falls back
        const between = legMean(-far - turned, -near - turned) - legMean(near - turned, far - turned);
        linkage[i] += COILS_A_PHASE * TURNS * weight * between;
      }
    });
    const { phase, waveform } = result.emf;
    const at = (i: number): number => linkage[(i + degrees) % degrees];
    const step = (2 * Math.PI) / degrees;
    let [worst, where] = [0, 0];
    const emf = Float64Array.from({ length: degrees }, (_, i) => {
      const slope = (8 * (at(i + 1) - at(i - 1)) - (at(i + 2) - at(i - 2))) / (12 * step);
      return -POLE_PAIRS * OMEGA * slope;
    });
    emf.forEach((value, i) => {
      const off = Math.abs(value - waveform.phase_V[i]);
      if (off > worst) [worst, where] = [off, i];
    });
    check(
      {
        case: 'hut hydro, EMF from the rate of change of linkage',
        quantity: `phase EMF where they differ most (${where} degrees), V`,
        source: "Faraday's law applied to A of the fields themselves",
        expected: emf[where],
        got: waveform.phase_V[where],
        scale: phase.peak_V,
      },
      1e-3,
    );
  });

  test.each([
    ['half, cut along the magnet axis', { magnetAxis: true, midPlane: false }],
    ['half, cut along the mid-plane', { magnetAxis: false, midPlane: true }],
    ['whole pole', { magnetAxis: false, midPlane: false }],
  ] as const)('the quarter section equals the %s within the reported errors', (name, cuts: Cuts) => {
    machine.model.slices.forEach((slice, s) => {
      const quarter = solved[s].answer;
      const other = solveSlice(machine, slice, { cuts }).answer;
      expect(other.accurate).toBe(true);
      const given = {
        case: `hut hydro at ${(1000 * slice.radius).toFixed(1)} mm, quarter and ${name}`,
        source: 'symmetry',
      };
      [1, 3, 5].forEach((n, i) => {
        check(
          {
            ...given,
            quantity: `B_${n} over the winding`,
            expected: other.windingB.amplitude[i],
            got: quarter.windingB.amplitude[i],
            scale: other.windingB.amplitude[0],
            bound: quarter.windingBErr[i] + other.windingBErr[i],
          },
          2e-3,
        );
      });
      const bound = quarter.pullRelErr * quarter.pull + other.pullRelErr * other.pull;
      check({ ...given, quantity: 'pull', expected: other.pull, got: quarter.pull, bound }, 1e-2);
      const energyBound = quarter.energyRelErr * quarter.energy + other.energyRelErr * other.energy;
      check(
        { ...given, quantity: 'energy', expected: other.energy, got: quarter.energy, bound: energyBound },
        1e-2,
        1e-4,
      );
    });
  });

  test('the errors reported at 0.2 % bound what a mesh for 0.004 % still changes', () => {
    const fine = describeAll(machine, solveAll(machine, 4e-5));
    const source = 'the same on meshes fifty times as accurate';
    const given = { case: 'hut hydro at 0.2 %', source };
    result.slices.forEach((slice, s) => {
      const other = fine.slices[s];
      const where = `at ${(1000 * slice.radius_m).toFixed(1)} mm`;
      const leg = { quantity: `leg B, peak, ${where}`, expected: other.leg_B.peak_T, got: slice.leg_B.peak_T };
      check({ ...given, ...leg, bound: slice.leg_B_rel_err * slice.leg_B.peak_T }, 2e-3);
      const pull = { quantity: `pull ${where}`, expected: other.pull_N_per_m_pole, got: slice.pull_N_per_m_pole };
      check({ ...given, ...pull, bound: slice.pull_N_per_m_pole_rel_err * slice.pull_N_per_m_pole }, 1e-2);
      const energy = {
        quantity: `energy ${where}`,
        expected: other.energy_J_per_m_pole,
        got: slice.energy_J_per_m_pole,
      };
      check({ ...given, ...energy, bound: slice.energy_J_per_m_pole_rel_err * slice.energy_J_per_m_pole }, 1e-2);
    });
    const emf = { quantity: 'phase EMF, rms', expected: fine.emf.phase.rms_V, got: result.emf.phase.rms_V };
    check({ ...given, ...emf, bound: result.emf.phase.rms_V_rel_err * result.emf.phase.rms_V }, 2e-3);
  });
});
