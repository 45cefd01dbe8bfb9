import { expect, test } from 'vitest';
import {
  cutInSpeed,
  linePeak,
  loopOf,
  phasesFromPeaks,
  starAt,
  throughImpedance,
} from '../../../packages/machine-models/src/load/source.js';
import { evaluate, peak, rms } from '../../../packages/machine-models/src/waves/series.js';
import { hydro, rich, uneven } from './sources.js';

const angles = [0, 0.3, 1.1, 2.7, 4, 6];

test('phases of a bench test: sum peak_n sin(n theta), each 120 degrees behind the one before', () => {
  const phases = phasesFromPeaks([1, 3, 5], [20, 3, -1.6]);
  const first = (theta: number): number => 20 * Math.sin(theta) + 3 * Math.sin(3 * theta) - 1.6 * Math.sin(5 * theta);
  for (const theta of angles) {
    phases.forEach((phase, k) => {
      expect(evaluate(phase, theta)).toBeCloseTo(first(theta - (k * 2 * Math.PI) / 3), 12);
    });
  }
});

test('EMFs of the equal star add to nought and have the lines of the machine, which grow with speed', () => {
  for (const source of [hydro, rich, uneven]) {
    const star = starAt(source, 630);
    const delta = starAt({ ...source, connection: 'delta' }, 630);
    for (const theta of angles) {
      const phases = source.phases.map((phase) => 1.5 * evaluate(phase, theta));
      const mean = (phases[0] + phases[1] + phases[2]) / 3;
      const [a, b, c] = star.emf.map((emf) => evaluate(emf, theta));
      expect(a + b + c).toBeCloseTo(0, 12);
      expect(a - b).toBeCloseTo(phases[0] - phases[1], 11);
      const [da, db, dc] = delta.emf.map((emf) => evaluate(emf, theta));
      expect(da + db + dc).toBeCloseTo(0, 12);
      expect(da - db).toBeCloseTo(phases[0] - mean, 11); // phase 1 lies between terminals 1 and 2
    }
  }
});

test('symmetry is seen where it is, and not where it is not', () => {
  expect(starAt(rich, 100).symmetric).toBe(true);
  expect(starAt(uneven, 100).symmetric).toBe(false);
  expect(starAt({ ...rich, phases: [rich.phases[0], rich.phases[2], rich.phases[1]] }, 100).symmetric).toBe(false);
});

test('current through R and X satisfies R i + X di/dtheta = e', () => {
  const emf = uneven.phases[2];
  const current = throughImpedance(emf, 0.3, 0.7);
  for (const theta of angles) {
    const h = 1e-5;
    const slope = (evaluate(current, theta + h) - evaluate(current, theta - h)) / (2 * h);
    expect(0.3 * evaluate(current, theta) + 0.7 * slope).toBeCloseTo(evaluate(emf, theta), 6);
  }
});

test('cut-in: the speed at which the line peak is the DC voltage and two drops', () => {
  expect(cutInSpeed(hydro, 106, 0.9)).toBeCloseTo((420 * 107.8) / (50.7 * Math.sqrt(6)), 8);
  for (const source of [rich, uneven, { ...uneven, connection: 'delta' as const }]) {
    expect(linePeak(starAt(source, cutInSpeed(source, 24, 0.7)))).toBeCloseTo(25.4, 9);
  }
  const [one, two] = [rich.phases[0], rich.phases[1]];
  const line = { ...one, cos: one.cos.map((c, i) => c - two.cos[i]), sin: one.sin.map((s, i) => s - two.sin[i]) };
  expect(linePeak(starAt(rich, 420))).toBeCloseTo(peak(line), 9);
});

test('round a delta flows what the phases have in common, over 3 R and three times the zero-sequence inductance', () => {
  const star = starAt({ ...rich, connection: 'delta', loopInductance: 0.4e-3 }, 420);
  const omega = (2 * Math.PI * 420 * 8) / 60;
  const { rms: current, power } = loopOf(star);
  expect(current).toBeCloseTo(8 / Math.SQRT2 / Math.hypot(0.4713, 3 * omega * 0.4e-3), 10);
  expect(power).toBeCloseTo(3 * 0.4713 * current ** 2, 10);
  expect(rms(star.loop?.current ?? { order: [], cos: [], sin: [] })).toBeCloseTo(current, 12);
  expect(loopOf(starAt(rich, 420))).toEqual({ rms: 0, power: 0 });
});

test('phases of unlike orders, more or fewer than three, and a winding without resistance are refused', () => {
  expect(() => starAt({ ...hydro, phases: hydro.phases.slice(0, 2) }, 1)).toThrow(/three phases/);
  expect(() => starAt({ ...hydro, phases: [...hydro.phases.slice(0, 2), rich.phases[2]] }, 1)).toThrow(/same orders/);
  expect(() => starAt({ ...hydro, phaseResistance: 0 }, 1)).toThrow(/resistance above 0/);
});
