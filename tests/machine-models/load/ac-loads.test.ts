import { describe, expect, test } from 'vitest';
import { drivePoint, resistorPoint } from '../../../packages/machine-models/src/load/ac-loads.js';
import type { LoadPoint } from '../../../packages/machine-models/src/load/load-point.js';
import { phasesFromPeaks, type Source } from '../../../packages/machine-models/src/load/source.js';
import { hydro, rich, uneven } from './sources.js';

const omega = (2 * Math.PI * 420 * 8) / 60;

function imbalance({ electromagnetic_W, copper_W, cable_W, ac_W = Number.NaN }: LoadPoint): number {
  return Math.abs(electromagnetic_W - copper_W - cable_W - ac_W) / Math.abs(electromagnetic_W);
}

const machines: readonly (readonly [string, Source])[] = [
  ['sinusoidal', hydro],
  ['rich', rich],
  ['uneven', uneven],
  ['rich delta', { ...rich, connection: 'delta' }],
  ['uneven delta', { ...uneven, connection: 'delta' }],
];

describe('three resistances in star', () => {
  test('sinusoidal EMF: E over the impedance, power 3 R I^2, steady torque', () => {
    const point = resistorPoint({ ...hydro, cableResistance: 0.2 }, 4, 420);
    const current = 50.7 / Math.hypot(0.4713 + 0.2 + 4, omega * 1.017e-3);
    expect(point.phase_rms_A).toBeCloseTo(current, 11);
    expect(point.ac_W).toBeCloseTo(3 * 4 * current ** 2, 9);
    expect(point.ac_line_V).toBeCloseTo(Math.sqrt(3) * 4 * current, 10);
    expect(point.torque_Nm).toBeCloseTo((3 * (0.4713 + 0.2 + 4) * current ** 2) / ((2 * Math.PI * 420) / 60), 9);
    expect(point.torque_ripple).toBeLessThan(1e-12);
  });

  test('each harmonic over its own impedance; the third finds no way back', () => {
    const point = resistorPoint(rich, 4, 420);
    const square = [
      [1, 71.7],
      [5, -5],
      [7, 3],
      [11, 1],
    ].reduce((sum, [n, top]) => sum + top ** 2 / 2 / (4.5713 ** 2 + (n * omega * 1.017e-3) ** 2), 0);
    expect(point.line_rms_A).toBeCloseTo(Math.sqrt(square), 11);
  });

  test('delta: a third of the impedance, and the third harmonic goes round inside whatever the load', () => {
    const delta: Source = { ...rich, connection: 'delta' };
    const loop = 8 / Math.SQRT2 / Math.hypot(0.4713, 3 * omega * 1.017e-3);
    for (const load of [1, 1000]) expect(resistorPoint(delta, load, 420).loop_rms_A).toBeCloseTo(loop, 10);
    const sinusoidal = resistorPoint({ ...hydro, connection: 'delta' }, 4, 420);
    const line = 50.7 / Math.sqrt(3) / Math.hypot(4 + 0.4713 / 3, (omega * 1.017e-3) / 3);
    expect(sinusoidal.line_rms_A).toBeCloseTo(line, 10);
    expect(sinusoidal.phase_rms_A).toBeCloseTo(line / Math.sqrt(3), 10);
  });
});

describe('sinusoidal current in phase with the EMF', () => {
  test('power is 3 E I, at the terminals less 3 R I^2', () => {
    const point = drivePoint(hydro, 8, 420);
    expect(point.electromagnetic_W).toBeCloseTo(3 * 50.7 * 8, 9);
    expect(point.copper_W).toBeCloseTo(3 * 0.4713 * 64, 10);
    expect(point.ac_W).toBeCloseTo(3 * 50.7 * 8 - 3 * 0.4713 * 64, 9);
    expect(point.torque_ripple).toBeLessThan(1e-12);
    const terminal = Math.hypot(50.7 - 8 * 0.4713, 8 * omega * 1.017e-3);
    expect(point.ac_line_V).toBeCloseTo(Math.sqrt(3) * terminal, 10);
  });

  test('backwards it is a motor: it takes the losses on top', () => {
    const point = drivePoint(hydro, -8, 420);
    expect(point.electromagnetic_W).toBeCloseTo(-3 * 50.7 * 8, 9);
    expect(point.ac_W).toBeCloseTo(-3 * 50.7 * 8 - 3 * 0.4713 * 64, 9);
    expect(point.torque_Nm).toBeLessThan(0);
    expect(point.phase_rms_A).toBeCloseTo(8, 12);
  });

  test('harmonics of the EMF give no mean power, but ripple: order 5 alone pulsates by twice its share', () => {
    const fifth: Source = { ...hydro, phases: phasesFromPeaks([1, 5], [71.7, 3.585]) };
    const point = drivePoint(fifth, 8, 420);
    expect(point.electromagnetic_W).toBeCloseTo((3 * 71.7 * 8) / Math.SQRT2, 9);
    expect(point.torque_ripple).toBeCloseTo(2 * 0.05, 9); // e5 i1 makes one wave of order 6, of 5 % of the mean
  });

  test('delta: as much current per phase, sqrt(3) as much in the line', () => {
    const point = drivePoint({ ...hydro, connection: 'delta' }, 8, 420);
    expect(point.phase_rms_A).toBeCloseTo(8, 11);
    expect(point.line_rms_A).toBeCloseTo(8 * Math.sqrt(3), 11);
    expect(point.electromagnetic_W).toBeCloseTo(3 * 50.7 * 8, 9);
  });
});

test.each(machines)('power in equals power out and losses: %s', (_, source) => {
  for (const rpm of [50, 420, 2000]) {
    expect(imbalance(resistorPoint(source, 4, rpm))).toBeLessThan(1e-12);
    expect(imbalance(drivePoint(source, 8, rpm))).toBeLessThan(1e-12);
    expect(imbalance(drivePoint(source, -8, rpm))).toBeLessThan(1e-12);
  }
});

test('the density is the current over the copper, where that is known', () => {
  const point = drivePoint({ ...hydro, conductorArea: 2e-6 }, 8, 420);
  expect(point.current_density_A_per_mm2).toBeCloseTo(4, 12);
  expect(drivePoint(hydro, 8, 420).current_density_A_per_mm2).toBeUndefined();
});
