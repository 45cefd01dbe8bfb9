import { describe, expect, test } from 'vitest';
import { COPPER_RESISTIVITY_20C } from '../../../packages/machine-models/src/winding/copper.js';
import {
  awgDiameter,
  overallDiameter,
  WIRE_SIZES,
  type WireSize,
} from '../../../packages/machine-models/src/winding-chooser/wire-sizes.js';
import { relativeError } from '../../helpers/machines.js';

function size(name: string): WireSize {
  const found = WIRE_SIZES.find((one) => one.name === name);
  if (found === undefined) throw new Error(`no ${name}`);
  return found;
}

describe('round enamelled copper wire', () => {
  test.each([
    [10, 2.588187],
    [14, 1.627727],
    [16, 1.290846],
    [18, 1.023687],
    [20, 0.811821],
    [24, 0.510559],
  ])('AWG %i is %f mm (ASTM B258)', (gauge, millimetres) => {
    expect(awgDiameter(gauge) * 1e3).toBeCloseTo(millimetres, 6);
  });

  test('six gauges halve the diameter, almost: 92^(6/39) = 2.0050', () => {
    expect(awgDiameter(10) / awgDiameter(16)).toBeCloseTo(92 ** (6 / 39), 12);
  });

  test.each([
    ['0.500 mm', 0.544, 0.566],
    ['1.000 mm', 1.062, 1.094],
    ['1.600 mm', 1.67, 1.706],
    ['2.000 mm', 2.074, 2.112],
    ['AWG 26', 0.443, 0.463],
  ])("%s is at most %f mm over enamel of grade 1, %f mm over grade 2 (makers' tables)", (name, first, second) => {
    expect(overallDiameter(size(name), 'grade 1') * 1e3).toBeCloseTo(first, 9);
    expect(overallDiameter(size(name), 'grade 2') * 1e3).toBeCloseTo(second, 9);
    expect(size(name).interpolated).toBe(false);
  });

  test('square packing of 1 mm wire, grade 2, fills 0.656229, closest packing 0.757748', () => {
    const ratio = (1e-3 / overallDiameter(size('1.000 mm'), 'grade 2')) ** 2;
    expect((Math.PI / 4) * ratio).toBeCloseTo(0.656229, 6);
    expect((Math.PI / (2 * Math.sqrt(3))) * ratio).toBeCloseTo(0.757748, 6);
  });

  test.each([
    [0.404e-3, 0.134496],
    [0.254e-3, 0.340255],
    [0.127e-3, 1.361022],
  ])('%f m: a maker prints %f ohm a metre, as 1/58e6 ohm m has it', (diameter, ohm) => {
    expect(relativeError(COPPER_RESISTIVITY_20C / ((Math.PI / 4) * diameter ** 2), ohm)).toBeLessThan(1e-4);
  });

  test('sizes fall, each finds its enamel, and enamel grows with the grade and, in share, with thinner wire', () => {
    for (let i = 0; i < WIRE_SIZES.length; i++) {
      const one = WIRE_SIZES[i];
      const [first, second, third] = (['grade 1', 'grade 2', 'grade 3'] as const).map((grade) =>
        overallDiameter(one, grade),
      );
      expect(first).toBeGreaterThan(one.diameter * 1.02);
      expect(second).toBeGreaterThan(first);
      expect(third).toBeGreaterThan(second);
      expect(third).toBeLessThan(one.diameter * 1.4);
      if (i > 0) expect(one.diameter).toBeLessThanOrEqual(WIRE_SIZES[i - 1].diameter);
    }
  });

  test('metric steps are those of R 20, or of R 40 between: ratios near 10^(1/20) and 10^(1/40)', () => {
    const metric = WIRE_SIZES.filter(({ standard }) => standard === 'metric');
    for (let i = 1; i < metric.length; i++) {
      const steps = 40 * Math.log10(metric[i - 1].diameter / metric[i].diameter);
      expect(Math.abs(steps - Math.round(steps))).toBeLessThan(0.25); // preferred numbers are rounded
      expect(Math.round(steps)).toBeLessThanOrEqual(2);
      expect(Math.round(steps)).toBeGreaterThanOrEqual(1);
    }
  });

  test('1.18 mm, which no table at hand prints, lies between its neighbours', () => {
    const one = size('1.180 mm');
    expect(one.interpolated).toBe(true);
    expect(overallDiameter(one, 'grade 2') * 1e3).toBeCloseTo(1.278, 3);
  });
});
