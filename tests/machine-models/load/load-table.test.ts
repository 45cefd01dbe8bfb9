import { describe, expect, test } from 'vitest';
import { loadCutIn, loadPoint, loadTable, loadWarnings } from '../../../packages/machine-models/src/load/load-table.js';
import type { Load } from '../../../packages/machine-models/src/machine.js';
import { hydro, uneven } from './sources.js';

const battery: Load = { kind: 'bridge', voltage: 106, diodeDrop: 0.9 };

describe('a bridge on a bus', () => {
  const table = loadTable({ ...uneven, conductorArea: 2.187e-6 }, battery, 420, 756);

  test('rows rise from just above cut-in to overspeed, the working speed among them, and all conduct', () => {
    const speeds = table.rows.map(({ speed_rpm }) => speed_rpm);
    expect(speeds).toEqual([...speeds].sort((a, b) => a - b));
    expect(speeds).toContain(420);
    expect(speeds[0]).toBeGreaterThan(table.cut_in_rpm);
    expect(speeds[speeds.length - 1]).toBeCloseTo(756, 9);
    expect(table.rows.every(({ below_cut_in, converged }) => converged && !below_cut_in)).toBe(true);
  });

  test('faster or into a lower bus: more current, more torque', () => {
    for (const rows of [table.rows, ...table.buses.map((bus) => bus.rows)]) {
      for (let i = 1; i < rows.length; i++) {
        expect(rows[i].dc_A ?? 0).toBeGreaterThanOrEqual(rows[i - 1].dc_A ?? 0);
        expect(rows[i].torque_Nm).toBeGreaterThanOrEqual(rows[i - 1].torque_Nm);
      }
    }
    const atTop = table.buses.map(({ rows }) => rows[rows.length - 1].dc_A ?? 0);
    expect(atTop).toEqual([...atTop].sort((a, b) => b - a));
  });

  test('cut-in goes with the voltage of the bus and of the diodes', () => {
    for (const { voltage_V, cut_in_rpm } of table.buses) {
      expect(cut_in_rpm / table.cut_in_rpm).toBeCloseTo((voltage_V + 1.8) / 107.8, 12);
    }
  });

  test('current begins at the cut-in speed itself', () => {
    const cutIn = loadCutIn(uneven, battery);
    expect(loadPoint(uneven, battery, cutIn * (1 - 1e-7)).below_cut_in).toBe(true);
    const above = loadPoint(uneven, battery, cutIn * (1 + 1e-7));
    expect(above.below_cut_in).toBe(false);
    expect(above.dc_A).toBeGreaterThan(0);
  });
});

test('below cut-in the reader is told so, with the speed at which current begins', () => {
  const table = loadTable(hydro, battery, 300, 300);
  expect(table.rows).toHaveLength(1);
  expect(table.rows[0]).toMatchObject({ below_cut_in: true, dc_A: 0, dc_W: 0, phase_rms_A: 0 });
  const [warning] = loadWarnings(table, table.rows[0]);
  expect(warning.text).toMatch(/below cut-in: at 300 rpm .* begins at 364.6 rpm/);
  expect(loadWarnings(table, loadPoint(hydro, battery, 420))).toEqual([]);
});

test('a bridge on a resistance begins where the diodes do; resistors and drives at once', () => {
  expect(loadCutIn(hydro, { kind: 'bridge', resistance: 6, diodeDrop: 0.9 })).toBeCloseTo(
    (420 * 1.8) / (50.7 * Math.sqrt(6)),
    9,
  );
  for (const load of [
    { kind: 'resistor', resistance: 4 },
    { kind: 'drive', current: 8 },
  ] as const) {
    const table = loadTable(hydro, load, 420, 756);
    expect(table.cut_in_rpm).toBe(0);
    expect(table.rows).toHaveLength(13);
    expect(table.buses).toEqual([]);
  }
});
