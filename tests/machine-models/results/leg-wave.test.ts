import { describe, expect, test } from 'vitest';
import {
  describeEffectiveB,
  describeLeg,
  effectiveWave,
  legWave,
  lineWave,
} from '../../../packages/machine-models/src/results/leg-wave.js';
import { evaluate, peak } from '../../../packages/machine-models/src/waves/series.js';
import { closedFormSlices, hutHydro } from '../../helpers/machines.js';

const machine = hutHydro();
const slices = closedFormSlices(machine);

describe('the wave of a leg', () => {
  test('is the mean of By over the leg, by sampling the slice across the width', () => {
    for (const slice of slices) {
      const { leg_B, leg_width_m } = describeLeg(machine, slice);
      for (const index of [0, 7, 18, 40]) {
        const centre = (leg_B.electrical_deg[index] * slice.polePitch) / 180;
        const points = 2000;
        let mean = 0;
        for (let i = 0; i < points; i++) {
          const x = centre + leg_width_m * ((i + 0.5) / points - 0.5);
          const { order, amplitude } = slice.windingB;
          for (const [j, n] of order.entries()) {
            mean += (amplitude[j] * Math.cos((n * Math.PI * x) / slice.polePitch)) / points;
          }
        }
        expect(leg_B.value_T[index]).toBeCloseTo(mean, 6);
      }
    }
  });

  test('is even about the magnet, odd about the gap between two, and positive under the magnet', () => {
    const { electrical_deg, value_T } = describeLeg(machine, slices[1]).leg_B;
    expect(electrical_deg).toEqual(Array.from({ length: 72 }, (_, i) => 5 * i));
    expect(value_T[0]).toBeGreaterThan(0.3);
    for (let i = 1; i < 36; i++) {
      expect(value_T[i]).toBeCloseTo(value_T[72 - i], 12);
      expect(value_T[i]).toBeCloseTo(-value_T[36 - i], 12);
    }
  });

  test('peaks no lower than any of its values; the line peaks between once and twice as high', () => {
    for (const slice of slices) {
      const { leg_B, line_B_peak_T } = describeLeg(machine, slice);
      expect(leg_B.peak_T).toBeGreaterThanOrEqual(Math.max(...leg_B.value_T.map(Math.abs)) - 1e-15);
      expect(line_B_peak_T).toBeGreaterThan(leg_B.peak_T);
      expect(line_B_peak_T).toBeLessThanOrEqual(2 * leg_B.peak_T);
    }
  });

  test('the line wave is the wave less itself 120 degrees later, without triplen orders', () => {
    const leg = legWave(machine, slices[0]);
    const line = lineWave(leg, 3);
    for (const theta of [0, 0.5, 2, 4.4]) {
      const expected = evaluate(leg.series, theta) - evaluate(leg.series, theta - (2 * Math.PI) / 3);
      expect(evaluate(line.series, theta)).toBeCloseTo(expected, 12);
    }
    for (const [i, n] of line.series.order.entries()) {
      if (n % 3 === 0)
        expect([line.series.cos[i], line.series.sin[i], line.bounds[i]].map(Math.abs)).toEqual([0, 0, 0]);
    }
  });
});

describe('the line wave of other than three phases', () => {
  test.each([
    [2, 90, []],
    [5, 72, [5, 15, 25]],
    [6, 120, [3, 9, 15]],
  ] as const)('%i phases: the wave less itself %i degrees later, exactly 0 at orders %j', (phases, degrees, none) => {
    const leg = legWave(machine, slices[0]);
    const line = lineWave(leg, phases);
    for (const theta of [0, 0.5, 2, 4.4]) {
      const expected = evaluate(leg.series, theta) - evaluate(leg.series, theta - (degrees * Math.PI) / 180);
      expect(evaluate(line.series, theta)).toBeCloseTo(expected, 12);
    }
    for (const [i, n] of line.series.order.entries()) {
      const size = Math.hypot(line.series.cos[i], line.series.sin[i]) + line.bounds[i];
      if (none.some((order) => order === n)) expect(size).toBe(0);
      else if (n < 20 && leg.series.cos[i] !== 0) expect(size).toBeGreaterThan(0);
    }
  });
});

describe('effective flux density', () => {
  test('one slice gives the wave of that slice, whatever its weight', () => {
    const one = { ...slices[1], weight: 3 };
    expect(describeEffectiveB(machine, [one]).peak_T).toBeCloseTo(describeLeg(machine, one).leg_B.peak_T, 12);
  });

  test('is the mean of the slices weighted by weight and radius', () => {
    const [top, bottom] = [0, 1.1, 2].map((theta) => {
      let sum = 0;
      let weights = 0;
      for (const slice of slices) {
        sum += slice.weight * slice.radius * evaluate(legWave(machine, slice).series, theta);
        weights += slice.weight * slice.radius;
      }
      return [evaluate(effectiveWave(machine, slices).series, theta), sum / weights];
    });
    expect(top[0]).toBeCloseTo(top[1], 12);
    expect(bottom[0]).toBeCloseTo(bottom[1], 12);
  });

  test('a third harmonic shows in the phase and never in the line', () => {
    const strong = slices.map((slice) => ({
      ...slice,
      windingB: { order: [1, 3], amplitude: [0.6, 0.2] },
    }));
    const effective = describeEffectiveB(machine, strong);
    const { series } = effectiveWave(machine, strong);
    expect(effective.third_share_phase).toBeCloseTo(Math.abs(series.cos[1] / series.cos[0]), 12);
    expect(effective.third_share_phase).toBeGreaterThan(0.05);
    expect(effective.third_share_line).toBe(0);
  });

  test('the line peak of a pure fundamental is sqrt(3) times the peak', () => {
    const pure = slices.map((slice) => ({ ...slice, windingB: { order: [1], amplitude: [0.6] } }));
    const { peak_T, line_peak_T } = describeEffectiveB(machine, pure);
    expect(line_peak_T / peak_T).toBeCloseTo(Math.sqrt(3), 10);
    expect(peak(effectiveWave(machine, pure).series)).toBeCloseTo(peak_T, 12);
  });
});
