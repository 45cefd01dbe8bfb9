import { describe, expect, test } from 'vitest';
import type { Inductance, InductanceParts } from '../../../packages/machine-models/src/inductance/inductance.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { describeMachine } from '../../../packages/machine-models/src/results/assemble.js';
import { closedFormSlices, hutHydro, withWinding } from '../../helpers/machines.js';

const stamp = { version: '0.1.0', inputSha256: 'abc' };

const parts = (total: number): InductanceParts => ({
  total,
  slices: total,
  endTurns: 0,
  slicesRelErr: 0,
  endTurnsBand: 0,
});
const inductance: Inductance = {
  self: parts(0.9e-3),
  mutual: parts(-0.1e-3),
  phase: parts(1e-3),
  slices: [],
  warnings: [],
};

const bridge = { kind: 'bridge', voltage: 106, diodeDrop: 0.9 } as const;
const onLoad = (operation: Partial<Machine['operation']> = {}, machine: Machine = hutHydro()): Machine => ({
  ...machine,
  operation: { ...machine.operation, load: bridge, ...operation },
});

/** Waves in the winding's space, so that strands have eddies. */
const eddiesOf = (machine: Machine) => ({
  endShare: 0.9,
  fields: closedFormSlices(machine).map(({ radius, weight, polePitch, windingB: { order, amplitude } }) => {
    const { thickness } = machine.winding;
    return { radius, weight, polePitch, thickness, order, axial: amplitude, tangential: order.map(() => 0) };
  }),
});

const resultOf = (machine: Machine) =>
  describeMachine(machine, { slices: closedFormSlices(machine), inductance, eddies: eddiesOf(machine) }, [], stamp);

describe('power is conserved', () => {
  test.each([
    ['a bus', {}],
    ['a bus behind a cable', { cableResistance: 0.1 }],
    ['a resistance behind a bridge', { load: { kind: 'bridge', resistance: 12, diodeDrop: 0.9 } }],
    ['resistors', { load: { kind: 'resistor', resistance: 6 } }],
    ['a drive', { load: { kind: 'drive', current: 8 } }],
  ] as const)('%s: the shaft gives what is delivered and every loss', (_, operation) => {
    const { load, losses } = resultOf(onLoad(operation));
    if (load === undefined) throw new Error('no load');
    const lost = Object.values(losses).reduce((sum, loss) => sum + loss, 0);
    const delivered = load.dc_W ?? load.ac_W ?? 0;
    expect(losses.strand_eddy_W).toBeGreaterThan(1);
    expect(losses.rotation_W).toBeGreaterThan(1);
    expect(Math.abs((delivered + lost) / load.shaft_W - 1)).toBeLessThan(1e-9);
    expect(load.efficiency).toBeCloseTo(delivered / load.shaft_W, 12);
    expect(load.torque_Nm).toBeCloseTo(load.shaft_W / ((2 * Math.PI * 420) / 60), 9);
  });
});

test('below cut-in currents and powers are nought, and a warning says so', () => {
  const { load, losses, warnings } = resultOf(onLoad({ speedRpm: 200 }));
  expect(load?.below_cut_in).toBe(true);
  expect([load?.dc_A, load?.dc_W, load?.phase_rms_A, losses.copper_W]).toEqual([0, 0, 0, 0]);
  expect(load?.shaft_W).toBeGreaterThan(0); // drag and eddies
  expect(warnings.map(({ key }) => key)).toContain('operation.speed');
});

test('the speed table rises from cut-in to overspeed', () => {
  const { load } = resultOf(onLoad());
  const speeds = load?.table.map(({ speed_rpm }) => speed_rpm) ?? [];
  expect(speeds.length).toBeGreaterThan(5);
  expect(speeds).toEqual([...speeds].sort((a, b) => a - b));
  expect(speeds[0]).toBeGreaterThan(load?.cut_in_rpm ?? 0);
  expect(speeds.at(-1)).toBeCloseTo(756, 9);
});

test('without a load nothing is said of one', () => {
  const result = resultOf(hutHydro());
  expect(result).not.toHaveProperty('load');
  expect(result).not.toHaveProperty('thermal');
  expect(result.losses).not.toHaveProperty('copper_W');
  expect(result.losses.rotation_W).toBeGreaterThan(0);
});

test('loads of other than three phases are left out', () => {
  expect(resultOf(onLoad({}, withWinding(hutHydro(), { phases: 6 })))).not.toHaveProperty('load');
});

test('what was measured replaces what was computed, for load and short circuit', () => {
  const measured = {
    phaseEmf: { speedRpm: 420, order: [1], peak: [100] },
    phaseResistance: 0.5,
    phaseInductance: 2e-3,
  };
  const { faults, emf } = resultOf({ ...onLoad(), measured });
  // E / |R + j w L| of the fundamental alone, 56 Hz.
  const expected = 100 / Math.SQRT2 / Math.hypot(0.5, 2 * Math.PI * 56 * 2e-3);
  expect(faults.short_circuit_A).toBeCloseTo(expected, 9);
  expect(emf.phase.fundamental_rms_V).toBeCloseTo(resultOf(onLoad()).emf.phase.fundamental_rms_V, 12);
});

test('a machine whose inductance is not known has no short-circuit figures', () => {
  const machine = onLoad();
  const { faults, cautions } = describeMachine(machine, { slices: closedFormSlices(machine) }, [], stamp);
  expect(faults).not.toHaveProperty('short_circuit_A');
  expect(cautions.some((text) => /^Short circuit/.test(text))).toBe(false);
});

test('the controller is warned of only when the voltage at overspeed comes near its limit', () => {
  const keys = (controllerVoltage: number) =>
    resultOf({ ...onLoad(), limits: { controllerVoltage } }).warnings.map(({ key }) => key);
  expect(keys(150)).toContain('limits.controller_voltage');
  expect(keys(400)).not.toContain('limits.controller_voltage');
});

test('costs are masses times prices, with no total where a price is missing', () => {
  const prices = { currency: 'EUR', magnets: 60, copper: 14, steel: 3 };
  const { costs, masses } = resultOf({ ...hutHydro(), prices });
  const { magnets_kg: magnets = 0, copper_kg: copper, steel_kg: steel = 0 } = masses;
  expect(costs?.total).toBeCloseTo(60 * magnets + 14 * copper + 3 * steel, 9);
  const { steel: _, ...some } = prices;
  expect(resultOf({ ...hutHydro(), prices: some }).costs).not.toHaveProperty('total');
});

test('a closed delta without a load is heated by the current round it, 3 R I^2; a star has none', () => {
  const delta = resultOf(withWinding(hutHydro(), { connection: 'delta' }));
  const { phase_resistance_hot_ohm: resistance } = delta.winding;
  const current = Math.sqrt((delta.losses.circulation_W ?? 0) / (3 * resistance));
  expect(current).toBeGreaterThan(0.1);
  const told = delta.cautions.find((text) => /^Circulating/.test(text));
  expect(Number(/up to ([\d.]+) A/.exec(told ?? '')?.[1])).toBeCloseTo(current, 1);
  expect(resultOf(hutHydro()).losses).not.toHaveProperty('circulation_W');
});
