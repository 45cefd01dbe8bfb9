import { gaussPoints } from '../rotor/gauss-points.js';
import { evaluate } from '../waves/series.js';
import { type BridgePeriod, bridgePeriod } from './bridge-period.js';
import { bridgeCircuit, type Circuit, currentsOf, emfAt, evaluateFlow, type Flow, railCurrent } from './conduction.js';
import { currentDensity, type LoadPoint } from './load-point.js';
import { loopOf, type Source, type Star, starAt } from './source.js';
import { range } from './torque-ripple.js';

/** The DC side of a bridge: a stiff voltage (V), or a resistance (ohm); `diodeDrop` of one diode, V. */
export type DcSide = { readonly diodeDrop: number } & ({ readonly voltage: number } | { readonly resistance: number });

/**
 * A machine on a three-phase diode bridge at one speed.
 *
 * Switching instants and currents are exact (see `Circuit`, `bridgePeriod`); means of squares and powers are integrated
 * by Gauss between them, to rounding. What is left out: the diodes' resistance and recovery, ripple of the bus, saturation.
 *
 * @throws Error on a source without resistance, see `starAt`
 */
export function bridgePoint(source: Source, dc: DcSide, rpm: number): LoadPoint {
  const star = starAt(source, rpm);
  const [voltage, resistance] = 'voltage' in dc ? [dc.voltage, 0] : [0, dc.resistance];
  const drops = 2 * dc.diodeDrop;
  const circuit = bridgeCircuit(star, voltage + drops, resistance);
  const period = bridgePeriod(circuit);
  if (period.stretches.every(({ flow }) => flow.state.kind === 'none')) return atRest(source, star, voltage, rpm);
  const means = meansOver(circuit, period);
  const loop = loopOf(star);
  const dcV = voltage + resistance * means.current;
  const phaseSquare = star.loop === undefined ? means.lineSquare : means.lineSquare / 3 + loop.rms ** 2;
  const electromagnetic = means.power + loop.power;
  return {
    speed_rpm: rpm,
    below_cut_in: false,
    dc_V: dcV,
    dc_A: means.current,
    dc_W: voltage * means.current + resistance * means.currentSquare,
    phase_rms_A: Math.sqrt(phaseSquare),
    line_rms_A: Math.sqrt(means.lineSquare),
    ...(star.loop !== undefined && { loop_rms_A: loop.rms }),
    electromagnetic_W: electromagnetic,
    copper_W: 3 * source.phaseResistance * phaseSquare,
    rectifier_W: drops * means.current,
    cable_W: 3 * star.cableResistance * means.lineSquare,
    torque_Nm: electromagnetic / star.turning,
    torque_ripple: powerRange(circuit, period, star) / electromagnetic,
    conduction_deg: means.conduction,
    overlap_deg: means.overlap,
    ...currentDensity(Math.sqrt(phaseSquare), source.conductorArea),
    converged: period.report.converged,
  };
}

/** Nothing flows but what goes round a delta. */
function atRest(source: Source, star: Star, voltage: number, rpm: number): LoadPoint {
  const loop = loopOf(star);
  return {
    speed_rpm: rpm,
    below_cut_in: true,
    dc_V: voltage,
    dc_A: 0,
    dc_W: 0,
    phase_rms_A: loop.rms,
    line_rms_A: 0,
    ...(star.loop !== undefined && { loop_rms_A: loop.rms }),
    electromagnetic_W: loop.power,
    copper_W: loop.power,
    rectifier_W: 0,
    cable_W: 0,
    torque_Nm: star.turning > 0 ? loop.power / star.turning : 0,
    torque_ripple: 0,
    conduction_deg: 0,
    overlap_deg: 0,
    ...currentDensity(loop.rms, source.conductorArea),
    converged: true,
  };
}

interface Means {
  /** Out of the positive rail, A, and its square. */
  readonly current: number;
  readonly currentSquare: number;
  /** Of one conductor, A^2. */
  readonly lineSquare: number;
  /** Sum e i, W. */
  readonly power: number;
  /** Degrees, see `LoadPoint`. */
  readonly conduction: number;
  readonly overlap: number;
}

const POINTS = gaussPoints(10);

/** Means over the period's span, which stand for all of the period by its symmetry. */
export function meansOver(circuit: Circuit, { stretches, span }: BridgePeriod): Means {
  const quantities = new Float64Array(4);
  const currents = new Float64Array(3);
  const emf = new Float64Array(4);
  const sums = { current: 0, currentSquare: 0, lineSquare: 0, power: 0, conduction: 0, overlap: 0 };
  for (const { flow, to } of stretches) {
    const { kind } = flow.state;
    if (kind === 'none') continue;
    const phases = kind === 'pair' ? 2 : 3;
    sums.conduction += (180 / span) * (phases / 3) * (to - flow.from);
    if (kind === 'triple') sums.overlap += (60 / span) * (to - flow.from);
    for (const [low, high] of panels(circuit, flow, to)) {
      POINTS.at.forEach((x, i) => {
        const theta = (low + high) / 2 + (x * (high - low)) / 2;
        const share = (POINTS.weight[i] * (high - low)) / (2 * span);
        evaluateFlow(flow, theta, quantities);
        currentsOf(flow.state, quantities, currents);
        emfAt(circuit, theta, emf);
        const dc = railCurrent(flow.state, quantities);
        sums.current += share * dc;
        sums.currentSquare += share * dc * dc;
        sums.lineSquare += (share * dot(currents, currents)) / 3;
        sums.power += share * dot(emf, currents);
      });
    }
  }
  return sums;
}

/** Over the three phases. */
function dot(one: Float64Array, other: Float64Array): number {
  return one[0] * other[0] + one[1] * other[1] + one[2] * other[2];
}

/**
 * A stretch cut so that neither the highest harmonic nor what dies away changes much in a panel: half a wavelength at most,
 * and near the start as short as the quickest decay, twofold from there on.
 */
function panels(
  circuit: Circuit,
  { from, firstRate, secondRate }: Flow,
  to: number,
): readonly (readonly [number, number])[] {
  const widest = Math.PI / Math.max(3, circuit.highest);
  const fastest = Math.max(firstRate, secondRate);
  const found: (readonly [number, number])[] = [];
  let low = from;
  let width = circuit.reactance === 0 ? widest : Math.min(widest, 1 / fastest);
  while (low < to) {
    const high = Math.min(low + width, to);
    found.push([low, high]);
    width = Math.min(2 * width, widest);
    low = high;
  }
  return found;
}

/** Highest less lowest of sum e i over time, W. */
function powerRange(circuit: Circuit, { stretches }: BridgePeriod, { loop }: Star): number {
  const quantities = new Float64Array(4);
  const currents = new Float64Array(3);
  const emf = new Float64Array(4);
  const power = (theta: number, piece: number): number => {
    const { flow } = stretches[piece];
    evaluateFlow(flow, theta, quantities);
    currentsOf(flow.state, quantities, currents);
    emfAt(circuit, theta, emf);
    const inLoop = loop === undefined ? 0 : 3 * evaluate(loop.emf, theta) * evaluate(loop.current, theta);
    return dot(emf, currents) + inLoop;
  };
  const pieces = stretches.map(({ flow, to }) => [flow.from, to] as const);
  return range(power, pieces, circuit.highest);
}
