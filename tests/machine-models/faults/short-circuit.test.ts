import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { shortCircuit } from '../../../packages/machine-models/src/faults/short-circuit.js';
import { evaluate, rms } from '../../../packages/machine-models/src/waves/series.js';
import { emfs, integrate, shorted } from './shorted.js';

const W = (8 * 2 * Math.PI * 420) / 60;

describe('phasors', () => {
  test('E / sqrt(R^2 + (w L)^2), braking with 3 I^2 R / w: 86 A and 270 Nm', () => {
    const machine = shorted();
    const { phaseRms, torque, heat, phasePeak, terminalRms } = shortCircuit(machine, 420);
    const current = 51.7 / Math.hypot(0.535, W * 0.78e-3);
    expect(phaseRms).toBeCloseTo(current, 9);
    expect(phasePeak).toBeCloseTo(current * Math.SQRT2, 6);
    expect(terminalRms).toBe(phaseRms);
    expect(phaseRms).toBeCloseTo(86, 0);
    expect(torque).toBeCloseTo((3 * current ** 2 * 0.535) / (2 * Math.PI * 7), 6);
    expect(Math.round(torque / 10)).toBe(27);
    expect(heat).toBeCloseTo(3 * current ** 2 * 0.535, 6);
  });

  test('EMF goes with speed: far above R/L the current no longer rises, far below it does in proportion', () => {
    const machine = shorted();
    const limit = 51.7 / (W * 0.78e-3);
    expect(shortCircuit(machine, 420e3).phaseRms / limit).toBeCloseTo(1, 5);
    expect(shortCircuit(machine, 0.42).phaseRms).toBeCloseTo((51.7 * 1e-3) / 0.535, 6);
    expect(shortCircuit(machine, 0)).toMatchObject({ phaseRms: 0, torque: 0, heat: 0, firstPeak: 0 });
  });

  test('each order meets n w L; in star the third drives none, in delta it meets the homopolar inductance', () => {
    const order = [1, 3, 5];
    const peak = [70, 20, -8];
    const star = shorted({ emf: emfs(3, order, peak) });
    const z = (n: number, henry: number): number => Math.hypot(0.535, n * W * henry);
    const each = [70 / z(1, 0.78e-3), 20 / z(3, 0.4e-3), 8 / z(5, 0.78e-3)];
    const rmsOf = (parts: readonly number[]): number => Math.hypot(...parts) / Math.SQRT2;
    const [first = 0, third = 0, fifth = 0] = each;
    expect(shortCircuit(star, 420).phaseRms).toBeCloseTo(rmsOf([first, fifth]), 9);
    const delta = shortCircuit({ ...star, connection: 'delta', homopolarInductance: 0.4e-3 }, 420);
    expect(delta.phaseRms).toBeCloseTo(rmsOf([first, third, fifth]), 9);
    expect(delta.terminalRms).toBeCloseTo(Math.sqrt(3) * rmsOf([first, fifth]), 9);
  });

  test.each([5, 6] as const)('%i phases: the fundamental as alone', (phases) => {
    const machine = shorted({ phases, emf: emfs(phases, [1], [70]) });
    for (const current of shortCircuit(machine, 420).currents) {
      expect(rms(current)).toBeCloseTo(70 / Math.SQRT2 / Math.hypot(0.535, W * 0.78e-3), 9);
    }
  });

  test('two phases in one star carry opposite currents, of half the difference of their EMFs', () => {
    const [one, two] = shortCircuit(shorted({ phases: 2, emf: emfs(2, [1], [70]) }), 420).currents;
    if (one === undefined || two === undefined) throw new Error('two currents');
    expect(rms(one)).toBeCloseTo(35 / Math.hypot(0.535, W * 0.78e-3), 9); // |e1 - e2|/2 = 70 sqrt(2)/2 peak
    expect(evaluate(one, 0.7)).toBeCloseTo(-evaluate(two, 0.7), 9);
  });
});

const machines = fc.record({
  peak: fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 4, maxLength: 4 }),
  resistance: fc.double({ min: 0.05, max: 2, noNaN: true }),
  inductance: fc.double({ min: 1e-4, max: 5e-3, noNaN: true }),
  speed: fc.double({ min: 50, max: 2000, noNaN: true }),
  connection: fc.constantFrom('star' as const, 'delta' as const),
});

test('what the EMF gives is the heat: mean of sum e i = R sum I^2 = torque x speed', () => {
  fc.assert(
    fc.property(machines, ({ peak, resistance, inductance, speed, connection }) => {
      const emf = emfs(
        3,
        [1, 3, 5, 7],
        [60, 8, 5, 3].map((size, i) => size * (i === 0 ? 1 : (peak[i] ?? 0))),
      );
      const machine = shorted({ emf, resistance, inductance, connection, homopolarInductance: inductance / 2 });
      const { currents, heat, torque } = shortCircuit(machine, speed);
      const steps = 64;
      let power = 0;
      for (let s = 0; s < steps; s++) {
        const theta = (2 * Math.PI * s) / steps;
        currents.forEach((current, k) => {
          const wave = emf[k];
          if (wave !== undefined) power += (speed / 420) * evaluate(wave, theta) * evaluate(current, theta);
        });
      }
      expect(power / steps / heat).toBeCloseTo(1, 9);
      expect((torque * 2 * Math.PI * speed) / 60 / heat).toBeCloseTo(1, 12);
    }),
    { seed: 11, numRuns: 40 },
  );
});

describe('from the open machine', () => {
  const order = [1, 5, 7];
  const peak = [73, 6, -4];
  const emf = emfs(3, order, peak);
  const [first] = emf;
  if (first === undefined) throw new Error('an EMF');

  test.each([
    [0.535, 0.78e-3],
    [0.1, 1.5e-3],
    [0.02, 1e-3],
  ])('R %f ohm, L %f H: first peak and steady current as by fine steps in time', (resistance, inductance) => {
    const machine = shorted({ emf, resistance, inductance });
    const { firstPeak, currents } = shortCircuit(machine, 420);
    const circuit = { resistance, henry: inductance, w: W };
    let highest = 0;
    for (let start = 0; start < 90; start++) {
      const wave = integrate((theta) => evaluate(first, theta), circuit, (2 * Math.PI * start) / 90, 1, 360);
      for (const current of wave) highest = Math.max(highest, Math.abs(current));
    }
    expect(firstPeak / highest).toBeGreaterThan(0.9999);
    expect(firstPeak / highest).toBeLessThan(1.002); // instants between those 90
    const long = integrate((theta) => evaluate(first, theta), circuit, 0, 60, 360);
    const steady = currents[0];
    if (steady === undefined) throw new Error('a current');
    expect(Math.abs((long.at(-1) ?? 0) - evaluate(steady, 0))).toBeLessThan(1e-3 * firstPeak);
  });

  test('between the steady peak (no inductance) and twice that (no resistance)', () => {
    const pure = shorted();
    const free = shortCircuit({ ...pure, inductance: 0 }, 420);
    expect(free.firstPeak).toBeCloseTo(free.phasePeak, 6);
    expect(free.phasePeak).toBeCloseTo((51.7 * Math.SQRT2) / 0.535, 6);
    const stiff = shortCircuit({ ...pure, resistance: 1e-6 }, 420);
    expect(stiff.firstPeak / stiff.phasePeak).toBeCloseTo(2, 4);
    const { firstPeak, phasePeak } = shortCircuit(pure, 420);
    expect(firstPeak).toBeGreaterThan(phasePeak);
    expect(firstPeak).toBeLessThan(2 * phasePeak);
  });
});
