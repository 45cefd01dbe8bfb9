import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bridgePoint, type DcSide, meansOver } from '../../../packages/machine-models/src/load/bridge.js';
import { bridgePeriod } from '../../../packages/machine-models/src/load/bridge-period.js';
import {
  bridgeCircuit,
  currentsOf,
  emfAt,
  evaluateFlow,
  type Flow,
} from '../../../packages/machine-models/src/load/conduction.js';
import type { LoadPoint } from '../../../packages/machine-models/src/load/load-point.js';
import { phasesFromPeaks, type Source, starAt } from '../../../packages/machine-models/src/load/source.js';
import { hydro, rich, uneven, unitSource } from './sources.js';
import { extrapolated } from './stepped.js';

const bus = (voltage: number, diodeDrop = 0): DcSide => ({ voltage, diodeDrop });

/** What the shaft gives less all that is accounted for, over it. */
function imbalance(point: LoadPoint): number {
  const { electromagnetic_W, copper_W, cable_W, rectifier_W, dc_W = Number.NaN } = point;
  return Math.abs(electromagnetic_W - copper_W - cable_W - rectifier_W - dc_W) / electromagnetic_W;
}

/** Figure of a bridge that carries a constant DC current: behind a very large resistance. Ohm and V per phase, rms. */
function constantCurrent(reactance: number, lineRms: number, current: number) {
  const stiff = 1e6;
  const source: Source = { ...unitSource(reactance, [lineRms * Math.SQRT2]), phaseResistance: 1e-9 };
  const circuit = bridgeCircuit(starAt(source, 60), -stiff * current, stiff);
  const period = bridgePeriod(circuit);
  const means = meansOver(circuit, period);
  return { period, means, dcVoltage: means.power / means.current };
}

describe('ideal bridge, a resistance far above that of the winding (Mohan, Undeland, Robbins, from memory)', () => {
  const lineRms = 1 / Math.SQRT2;
  const point = bridgePoint({ ...unitSource(0), phaseResistance: 1e-9 }, { resistance: 1, diodeDrop: 0 }, 60);

  test('mean voltage 1.35047447 of the rms line voltage, 3/pi of its peak', () => {
    expect(point.dc_V ?? 0).toBeCloseTo(3 / Math.PI, 7);
    expect((point.dc_V ?? 0) / lineRms).toBeCloseTo(1.35047447, 7);
  });

  test('rms voltage 0.955770198 of the peak, which is the power factor too', () => {
    expect(Math.sqrt(point.dc_W ?? 0)).toBeCloseTo(0.955770198, 7);
    expect((point.dc_W ?? 0) / (Math.sqrt(3) * lineRms * point.line_rms_A)).toBeCloseTo(0.955770198, 7);
  });

  test('two diodes in series take their drops from the mean', () => {
    const drop = bridgePoint({ ...unitSource(0), phaseResistance: 1e-9 }, { resistance: 1, diodeDrop: 0.05 }, 60);
    expect(drop.dc_V ?? 0).toBeCloseTo(3 / Math.PI - 0.1, 7);
    expect(drop.rectifier_W).toBeCloseTo(0.1 * (drop.dc_A ?? 0), 12);
  });

  test('a phase carries current for 120 degrees of each half wave, no three at once', () => {
    expect(point.conduction_deg).toBeCloseTo(120, 5);
    expect(point.overlap_deg).toBeCloseTo(0, 5);
  });
});

describe('constant DC current and inductance alone (textbook)', () => {
  test('30 V, 60 Hz, 0.5 mH, 10 A: 38.7142342 V, overlap 24.336305 degrees', () => {
    const { means, dcVoltage } = constantCurrent(2 * Math.PI * 60 * 0.5e-3, 30, 10);
    expect(dcVoltage).toBeCloseTo(38.7142342, 4); // the stiff source gives 10.0000387 A
    expect(means.overlap).toBeCloseTo(24.336305, 3);
    expect(means.conduction).toBeCloseTo(120 + 24.336305, 3);
  });

  test.each([0.05, 0.3, 0.6, 0.99])(
    'drop 3 X I/pi and cos u = 1 - 2 X I/(sqrt(2) V) at %s of the largest such I',
    (share) => {
      const [lineRms, reactance] = [30, 0.2];
      const largest = (Math.SQRT2 * lineRms) / (4 * reactance); // u = 60 degrees
      const current = share * largest;
      const { means, dcVoltage } = constantCurrent(reactance, lineRms, current);
      const open = (3 * Math.SQRT2 * lineRms) / Math.PI;
      expect(dcVoltage / (open - (3 * reactance * current) / Math.PI)).toBeCloseTo(1, 5);
      const overlap = Math.acos(1 - (2 * reactance * current) / (Math.SQRT2 * lineRms));
      expect(means.overlap).toBeCloseTo((overlap * 180) / Math.PI, 2);
    },
  );

  test.each([5, 15, 25])(
    'beyond 60 degrees commutation is put off by %s degrees and three phases always conduct',
    (degrees) => {
      // I = V/(sqrt(2) X) sin(a + 30 deg), V_d = V_d0 cos(30 deg) cos(a + 30 deg): overlap stays 60 degrees from a to a + 60
      const [lineRms, reactance] = [30, 0.2];
      const angle = ((degrees + 30) * Math.PI) / 180;
      const current = (lineRms / (Math.SQRT2 * reactance)) * Math.sin(angle);
      const { means, dcVoltage } = constantCurrent(reactance, lineRms, current);
      const open = (3 * Math.SQRT2 * lineRms) / Math.PI;
      expect(dcVoltage / (open * Math.cos(Math.PI / 6) * Math.cos(angle))).toBeCloseTo(1, 4);
      expect(means.overlap).toBeCloseTo(60, 2);
    },
  );

  test('without inductance: line rms sqrt(2/3) of the current, power factor 3/pi', () => {
    const { means } = constantCurrent(0, 30, 10);
    expect(Math.sqrt(means.lineSquare) / means.current).toBeCloseTo(Math.sqrt(2 / 3), 6);
    expect(means.power / (Math.sqrt(3) * 30 * Math.sqrt(means.lineSquare))).toBeCloseTo(3 / Math.PI, 6);
  });
});

describe('stiff battery, resistance alone', () => {
  test.each([0.999999, 0.98, 0.95, 0.9, 0.87])('two phases at a time at v = %s: the closed form', (v) => {
    // I R/E = (3/pi)(sin d - v d),  (I_rms R/E)^2 = (3/(4 pi))[(d + sin(2d)/2) - 4 v sin d + 2 v^2 d],  d = arccos v
    const d = Math.acos(v);
    const square = (3 / (4 * Math.PI)) * (d + Math.sin(2 * d) / 2 - 4 * v * Math.sin(d) + 2 * v * v * d);
    const point = bridgePoint(unitSource(0), bus(v), 60);
    const mean = (3 / Math.PI) * (Math.sin(d) - v * d);
    expect(point.dc_A ?? 0).toBeCloseTo(mean, 11);
    expect((point.dc_A ?? 0) / mean).toBeCloseTo(1, v > 0.999 ? 6 : 11); // the formula itself cancels near v = 1
    expect(point.line_rms_A).toBeCloseTo(Math.sqrt((2 / 3) * square), v > 0.999 ? 8 : 11);
    expect(point.overlap_deg).toBe(0);
    expect(point.conduction_deg).toBeCloseTo((4 * d * 180) / Math.PI, 6);
  });

  test.each([
    [0.98, 0.00254903, 0.00368659],
    [0.95, 0.01009121, 0.01159536],
    [0.9, 0.0286152, 0.02760361],
    [0.87, 0.04247998, 0.03833837],
    [0.8, 0.077924, 0.065383],
    [0.7, 0.130333, 0.105856],
    [0.5, 0.241131, 0.189427],
  ])('v = %s, three at once below 0.866: table by an independent time-step solution', (v, mean, line) => {
    const point = bridgePoint(unitSource(0), bus(v), 60);
    expect(Math.abs((point.dc_A ?? 0) - mean)).toBeLessThan(6e-7);
    expect(Math.abs(point.line_rms_A - line)).toBeLessThan(6e-7);
  });

  test('11.5 V, 0.25 ohm, 24 V battery, 0.7 V a diode: the worked example', () => {
    const source: Source = {
      ...hydro,
      phases: phasesFromPeaks([1], [11.5 * Math.SQRT2]),
      referenceRpm: 300,
      phaseResistance: 0.25,
      phaseInductance: 0,
    };
    const point = bridgePoint(source, bus(24, 0.7), 300);
    expect(point.dc_A).toBeCloseTo(3.14229989, 7);
    expect(point.line_rms_A).toBeCloseTo(3.04437875, 7);
    expect(point.copper_W).toBeCloseTo(6.95118147, 7);
    expect(point.dc_W).toBeCloseTo(75.4151975, 6);
    expect(point.rectifier_W).toBeCloseTo(4.39921985, 7);
  });
});

describe('small steps of time, which know nothing of states, give the same', () => {
  const resistance = (ohm: number): DcSide => ({ resistance: ohm, diodeDrop: 0.9 });
  const delta: Source = { ...uneven, connection: 'delta', cableResistance: 0 };
  test.each<[string, Source, DcSide, number, number, number, number?]>([
    ['pulses just above cut-in', hydro, bus(106, 0.9), 370, 3, 1500],
    ['the working point', hydro, bus(106, 0.9), 420, 5, 1500],
    ['harmonics', rich, bus(106, 0.9), 420, 5, 1500],
    ['unlike phases', uneven, bus(106, 0.9), 420, 5, 1500],
    ['straight from rail to rail', hydro, bus(106, 0.9), 1000, 8, 4000, 3e-4], // each jump falls anywhere in a step
    ['straight from rail to rail, unlike phases', uneven, resistance(0.5), 900, 7, 4000, 3e-4],
    ['a resistance', uneven, resistance(6), 420, 4, 1500],
    ['delta, with the current round it', delta, bus(56, 0.9), 500, 6, 1500],
    ['no inductance', { ...uneven, phaseInductance: 0 }, bus(80, 0.9), 420, 1, 1500],
  ])('%s', (_, source, dc, rpm, periods, steps, bound = 1e-4) => {
    const point = bridgePoint(source, dc, rpm);
    const side = 'voltage' in dc ? { ...dc, resistance: 0 } : { ...dc, voltage: 0 };
    const means = extrapolated(source, side, rpm, periods, steps);
    const apart = (stepped: number, exact: number): number => Math.abs(stepped / exact - 1);
    expect(apart(means.dcMean, point.dc_A ?? 0)).toBeLessThan(bound);
    expect(apart(means.lineSquare, point.line_rms_A ** 2)).toBeLessThan(bound);
    expect(apart(means.phaseSquare, point.phase_rms_A ** 2)).toBeLessThan(bound);
    expect(apart(means.electromagnetic, point.electromagnetic_W)).toBeLessThan(bound);
    expect(imbalance(point)).toBeLessThan(1e-12);
  });
});

test('a stiff bus at high speed: fundamentals by phasors, for the terminals step through six levels in phase with the current', () => {
  // the steps' fundamental is (2/pi) U; their higher orders drive little where U is far below the EMF
  const source = { ...hydro, phaseInductance: 20e-3 };
  const rpm = 3000;
  const point = bridgePoint(source, bus(20), rpm);
  const emf = (50.7 * Math.SQRT2 * rpm) / 420;
  const reactance = (2 * Math.PI * 8 * rpm * 20e-3) / 60;
  const terminal = (2 / Math.PI) * 20;
  // emf^2 = (terminal + R I)^2 + (X I)^2
  const [a, b, c] = [0.4713 ** 2 + reactance ** 2, terminal * 0.4713, terminal ** 2 - emf ** 2];
  const peak = (-b + Math.sqrt(b * b - a * c)) / a;
  expect(point.overlap_deg).toBeCloseTo(60, 9);
  expect(point.conduction_deg).toBeCloseTo(180, 9);
  expect((point.line_rms_A * Math.SQRT2) / peak).toBeCloseTo(1, 3);
  expect((point.dc_A ?? 0) / ((3 / Math.PI) * peak)).toBeCloseTo(1, 3);
});

const anySource = fc
  .record({
    peaks: fc.array(fc.double({ min: -0.3, max: 0.3, noNaN: true }), { minLength: 5, maxLength: 5 }),
    reactance: fc.oneof(
      fc.constant(0),
      fc.double({ min: -4, max: 3, noNaN: true }).map((e) => 10 ** e),
    ),
    unlike: fc.array(fc.double({ min: -0.2, max: 0.2, noNaN: true }), { minLength: 3, maxLength: 3 }),
    isUneven: fc.boolean(),
    connection: fc.constantFrom('star' as const, 'delta' as const),
    cable: fc.constantFrom(0, 0.3),
  })
  .map(({ peaks, reactance, unlike, isUneven, connection, cable }): Source => {
    const source = unitSource(reactance, [1, ...peaks]);
    const phases = source.phases.map((phase, k) => ({
      ...phase,
      sin: phase.sin.map((s, i) => s * (1 + (isUneven ? unlike[k] * (i + 1) : 0))),
    }));
    return { ...source, phases, connection, cableResistance: cable };
  });
const anyDc = fc.oneof(
  fc.record({ voltage: fc.double({ min: 0.01, max: 1.5, noNaN: true }), diodeDrop: fc.constantFrom(0, 0.02) }),
  fc.record({
    resistance: fc.double({ min: -3, max: 3, noNaN: true }).map((e) => 10 ** e),
    diodeDrop: fc.constantFrom(0, 0.02),
  }),
);

describe('any EMF, any impedance, any load', () => {
  test('power in equals all powers out to 1e-9, and the state is periodic', () => {
    fc.assert(
      fc.property(anySource, anyDc, (source, dc) => {
        const point = bridgePoint(source, dc, 60);
        expect(point.converged).toBe(true);
        if (!point.below_cut_in) expect(imbalance(point)).toBeLessThan(1e-9);
      }),
      { seed: 5, numRuns: 300 },
    );
  });

  test('twice the EMF at twice the DC voltage: twice the current, four times the power', () => {
    fc.assert(
      fc.property(anySource, fc.double({ min: 0.05, max: 1, noNaN: true }), (source, voltage) => {
        const one = bridgePoint(source, bus(voltage, 0.01), 60);
        // half the inductance at twice the speed keeps the reactance
        const loopInductance = source.phaseInductance / 2;
        const faster = { ...source, phaseInductance: source.phaseInductance / 2, loopInductance };
        const two = bridgePoint(faster, bus(2 * voltage, 0.02), 120);
        expect((two.dc_A ?? 0) / 2).toBeCloseTo(one.dc_A ?? 0, 10);
        expect(two.electromagnetic_W / 4).toBeCloseTo(one.electromagnetic_W, 10);
        expect(two.torque_Nm / 2).toBeCloseTo(one.torque_Nm, 10);
      }),
      { seed: 6, numRuns: 50 },
    );
  });

  test('all impedances and the load twice as large: half the current', () => {
    fc.assert(
      fc.property(anySource, fc.double({ min: 0.05, max: 50, noNaN: true }), (source, resistance) => {
        const twice: Source = {
          ...source,
          phaseResistance: 2 * source.phaseResistance,
          phaseInductance: 2 * source.phaseInductance,
          cableResistance: 2 * source.cableResistance,
        };
        const one = bridgePoint(source, { resistance, diodeDrop: 0 }, 60);
        const two = bridgePoint(twice, { resistance: 2 * resistance, diodeDrop: 0 }, 60);
        expect(2 * (two.dc_A ?? 0)).toBeCloseTo(one.dc_A ?? 0, 10);
        expect(2 * two.phase_rms_A).toBeCloseTo(one.phase_rms_A, 10);
      }),
      { seed: 7, numRuns: 50 },
    );
  });

  test('a sixth of the period tells what half of it tells', () => {
    fc.assert(
      fc.property(anySource, fc.double({ min: 0.1, max: 0.9, noNaN: true }), (source, voltage) => {
        const alike = { ...source, phases: phasesFromPeaks(source.phases[0].order, source.phases[0].sin) };
        const circuit = bridgeCircuit(starAt(alike, 60), voltage, 0.1);
        expect(circuit.symmetric).toBe(true);
        const [sixth, half] = [circuit, { ...circuit, symmetric: false }].map((one) =>
          meansOver(one, bridgePeriod(one)),
        );
        expect(half.current).toBeCloseTo(sixth.current, 11);
        expect(half.lineSquare).toBeCloseTo(sixth.lineSquare, 11);
        expect(half.overlap).toBeCloseTo(sixth.overlap, 6);
      }),
      { seed: 8, numRuns: 50 },
    );
  });

  test('the order of the phases does not matter to unlike ones', () => {
    fc.assert(
      fc.property(anySource, fc.double({ min: 0.1, max: 0.9, noNaN: true }), (source, voltage) => {
        const [first, second, third] = source.phases;
        const one = bridgePoint({ ...source, connection: 'star' }, bus(voltage), 60);
        const other = bridgePoint({ ...source, connection: 'star', phases: [second, first, third] }, bus(voltage), 60);
        expect(other.dc_A ?? 0).toBeCloseTo(one.dc_A ?? 0, 10);
        expect(other.electromagnetic_W).toBeCloseTo(one.electromagnetic_W, 10);
      }),
      { seed: 9, numRuns: 50 },
    );
  });
});

describe('limits', () => {
  test('inductance that vanishes: as without, the difference in proportion to it', () => {
    const none = bridgePoint(unitSource(0, [1, 0.1, -0.1]), bus(0.6), 60);
    const differences = [1e-3, 1e-4, 1e-9].map((reactance) => {
      const point = bridgePoint(unitSource(reactance, [1, 0.1, -0.1]), bus(0.6), 60);
      return Math.abs((point.dc_A ?? 0) - (none.dc_A ?? 0));
    });
    expect(differences[0]).toBeLessThan(1e-2);
    expect(differences[1]).toBeLessThan(0.2 * differences[0]);
    expect(differences[2]).toBeLessThan(1e-8);
  });

  test('a bus of no voltage short-circuits the machine: every harmonic over its impedance', () => {
    const source = unitSource(2, [1, 0, -0.2, 0.1]);
    const point = bridgePoint(source, bus(0), 60);
    const square = [1, 5, 7].reduce((sum, n, i) => sum + [1, -0.2, 0.1][i] ** 2 / 3 / (1 + (2 * n) ** 2) / 2, 0);
    expect(point.line_rms_A).toBeCloseTo(Math.sqrt(square), 9);
    expect(point.dc_W).toBeCloseTo(0, 12);
  });

  test.each([1e-3, 1e-6])('above cut-in by %s, through inductance: short pulses, in closed form', (above) => {
    // The line's top is E (1 - x^2/2), so 2 X z' = E (d^2 - x^2)/2 from -d on, d = sqrt(2 (1 - v)), until z
    // vanishes again at 2 d: the mean of six such pulses grows with the square of the excess
    const current = (share: number): number => bridgePoint(unitSource(1e3), bus(1 - share), 60).dc_A ?? 0;
    const d = Math.sqrt(2 * above);
    const pulse = ((27 / 24) * d ** 4) / 2e3; // z = (3 d^2 x - x^3 + 2 d^3)/(12 X) between -d and 2 d
    expect(current(above) / ((6 / (2 * Math.PI)) * pulse)).toBeCloseTo(1, 2);
    expect(current(above) / current(above / 4)).toBeCloseTo(16, 1);
  });

  test('below cut-in nothing flows but round a delta', () => {
    const star = bridgePoint(rich, bus(150), 420);
    expect(star).toMatchObject({
      below_cut_in: true,
      dc_A: 0,
      dc_W: 0,
      phase_rms_A: 0,
      electromagnetic_W: 0,
      torque_Nm: 0,
    });
    const delta = bridgePoint({ ...rich, connection: 'delta' }, bus(150), 420);
    expect(delta).toMatchObject({ below_cut_in: true, dc_A: 0, dc_W: 0, line_rms_A: 0 });
    const omega = (2 * Math.PI * 420 * 8) / 60;
    const loop = 8 / Math.SQRT2 / Math.hypot(0.4713, 3 * omega * 1.017e-3);
    expect(delta.loop_rms_A).toBeCloseTo(loop, 10);
    expect(delta.copper_W).toBeCloseTo(3 * 0.4713 * loop ** 2, 9);
  });

  test('at standstill there is nothing, and it is told without a division by nought', () => {
    const point = bridgePoint({ ...rich, connection: 'delta' }, bus(12, 0.9), 0);
    expect(Object.values(point).every((value) => typeof value === 'boolean' || Number.isFinite(value))).toBe(true);
    expect(point).toMatchObject({ below_cut_in: true, torque_Nm: 0 });
  });
});

test('a delta of sinusoidal EMFs is a star of EMFs smaller by sqrt(3) and a third of the impedance', () => {
  const delta: Source = { ...hydro, connection: 'delta', cableResistance: 0.05 };
  const star: Source = {
    ...hydro,
    phases: phasesFromPeaks([1], [(50.7 * Math.SQRT2) / Math.sqrt(3)]),
    phaseResistance: 0.4713 / 3,
    phaseInductance: 1.017e-3 / 3,
    cableResistance: 0.05,
  };
  const [one, other] = [delta, star].map((source) => bridgePoint(source, bus(60, 0.9), 420));
  expect(one.dc_A).toBeCloseTo(other.dc_A ?? 0, 9);
  expect(one.phase_rms_A * Math.sqrt(3)).toBeCloseTo(other.phase_rms_A, 9);
  expect(one.copper_W).toBeCloseTo(other.copper_W, 9);
  expect(one.torque_ripple).toBeCloseTo(other.torque_ripple, 7);
});

test('torque ripple: highest less lowest of sum e i over speed, by brute force', () => {
  const source = rich;
  const star = starAt(source, 420);
  const circuit = bridgeCircuit(star, 107.8, 0);
  const point = bridgePoint(source, bus(106, 0.9), 420);
  expect(point.torque_Nm * star.turning).toBeCloseTo(point.electromagnetic_W, 9);
  // stiff bus: sum e i = U i_dc + R sum i^2 + d/dt (L sum i^2 / 2); here from its parts, sampled
  const { stretches } = bridgePeriod(circuit);
  const samples = Array.from({ length: 20000 }, (_, i) => ((i + 0.5) * Math.PI) / 3 / 20000);
  const powers = samples.map((theta) => {
    const stretch = stretches.find(({ to }) => theta < to) ?? stretches[stretches.length - 1];
    return powerAt(circuit, stretch.flow, theta);
  });
  const range = Math.max(...powers) - Math.min(...powers);
  expect((point.torque_ripple * point.electromagnetic_W) / range).toBeCloseTo(1, 5);
});

/** Sum e i from the flow's own currents. */
function powerAt(circuit: ReturnType<typeof bridgeCircuit>, flow: Flow, theta: number): number {
  const quantities = evaluateFlow(flow, theta, new Float64Array(4));
  const currents = currentsOf(flow.state, quantities, new Float64Array(3));
  return emfAt(circuit, theta, new Float64Array(4))
    .subarray(0, 3)
    .reduce((sum, e, k) => sum + e * currents[k], 0);
}
