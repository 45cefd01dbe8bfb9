import type { Machine } from '../machine.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import { amplitudeOf, amplitudes, combine, evaluate, peak, rms, type Series, scaleEach } from '../waves/series.js';
import { coilPlaces } from '../winding/coil-places.js';
import { coilSum, legSpreadFactor, phaseAxis, pitchFactor } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';
import { harmonicBound, peakBound, relative, rmsBound } from './error-bounds.js';
import { longestOrders } from './leg-wave.js';
import { rectifiedAt, rectifiedMean } from './rectified.js';
import type { EmfResult, VoltageResult } from './result.js';

/**
 * Open-circuit EMFs of a machine in volts against the electrical angle theta.
 *
 * theta = 0 when a magnet that points along +y stands on the axis of phase 1, and grows as the rotor turns towards larger
 * angles; so  e1 = sum peak_n sin(n theta)  where the coils of a phase lie evenly about its axis, and its fundamental
 * peaks at 90 degrees. Phase 2 lags by 120 degrees, phase 3 by 240.
 */
export interface Emf {
  readonly phases: readonly Series[];
  /**
   * Between terminals. Star: e1 - e2, e2 - e3, e3 - e1. Delta: across each phase, its EMF less (e1 + e2 + e3)/3, which
   * the loop's own current uses up in the winding.
   */
  readonly lines: readonly Series[];
  /** Bounds of the mesh's error in the peak value of each harmonic of a phase and of a line. */
  readonly phaseBounds: readonly number[];
  readonly lineBounds: readonly number[];
}

/**
 * EMF by flux cutting. A leg that fills the width b about its centre, at the electrical angle theta_leg from a magnet's
 * axis, gives per conductor
 *
 *   omega sum over slices of weight r leg(r, theta_leg),   leg = sum over n of B_n ks_n cos(n theta_leg),
 *
 * a coil with its axis at alpha and its legs half a span h to either side gives turns x (right leg - left leg)
 *
 *   = 2 turns omega sum weight r sum over n of B_n ks_n sin(n h) sin(n (theta - alpha)),
 *
 * and a phase the sum over its coils, each with its sense, over the number of parallel paths (their mean, if unlike).
 * omega is the mechanical speed; h and b are taken at each slice's radius.
 */
export function computeEmf(machine: Machine, slices: readonly SliceAnswer[]): Emf {
  const order = longestOrders(slices);
  const phaseSums = sumsOverCoils(machine, order);
  const lineSums = betweenTerminals(phaseSums, machine.winding.connection);
  const { coil, coilBounds } = coilEmf(machine, slices, order);
  const bound = (sums: Series): number[] => amplitudes(sums).map((amplitude, i) => coilBounds[i] * amplitude);
  return {
    phases: phaseSums.map((sums) => scaleEach(sums, coil)),
    lines: lineSums.map((sums) => scaleEach(sums, coil)),
    phaseBounds: bound(phaseSums[0]),
    lineBounds: bound(lineSums[0]),
  };
}

/** For each phase, the sum over its coils of  sense sum over n of sin(n (theta - alpha)). */
function sumsOverCoils(machine: Machine, order: readonly number[]): readonly Series[] {
  const { poles } = machine.rotor;
  const places = coilPlaces(machine.winding, poles);
  const origin = phaseAxis(places, poles, 1);
  return [1, 2, 3].map((phase) => {
    const sums = order.map((n) => coilSum(places, poles, phase, n, origin));
    // sin(n (theta - alpha)) = sin(n theta) cos(n alpha) - cos(n theta) sin(n alpha)
    return { order, cos: sums.map(({ im }) => -im), sin: sums.map(({ re }) => re) };
  });
}

/** Star: each phase less the next. Delta: each phase less the mean of the three. */
function betweenTerminals(phases: readonly Series[], connection: 'star' | 'delta'): readonly Series[] {
  const factors = connection === 'star' ? [1, -1, 0] : [2 / 3, -1 / 3, -1 / 3];
  const [first, second, third] = phases;
  return [
    [first, second, third],
    [second, third, first],
    [third, first, second],
  ].map((fromHere) => combine(fromHere, factors));
}

/** Signed peak value, V, of each harmonic of one coil's EMF over the number of paths, and its bound. */
function coilEmf(
  machine: Machine,
  slices: readonly SliceAnswer[],
  order: readonly number[],
): { readonly coil: readonly number[]; readonly coilBounds: readonly number[] } {
  const { rotor, winding, operation } = machine;
  const omega = (2 * Math.PI * operation.speedRpm) / 60;
  const coil = order.map(() => 0);
  const coilBounds = order.map(() => 0);
  for (const slice of slices) {
    const { halfSpan, width } = legCut(winding, rotor.poles, rotor.magnets.meanRadius, slice.radius);
    const speedTimesLength = omega * slice.radius * slice.weight;
    for (let i = 0; i < order.length; i++) {
      const n = order[i];
      const factor = pitchFactor((rotor.poles / 2) * halfSpan, n) * legSpreadFactor(width, slice.polePitch, n);
      const voltsPerTesla = (2 * winding.turns * speedTimesLength * factor) / winding.paths;
      coil[i] += voltsPerTesla * amplitudeOf(slice.windingB, n);
      coilBounds[i] += Math.abs(voltsPerTesla) * harmonicBound(slice, n);
    }
  }
  return { coil, coilBounds };
}

/** `emf` of the results, at the machine's speed. */
export function describeEmf(machine: Machine, slices: readonly SliceAnswer[]): EmfResult {
  const { phases, lines, phaseBounds, lineBounds } = computeEmf(machine, slices);
  const speed = machine.operation.speedRpm;
  const line = describeVoltage(lines[0], lineBounds);
  const mean = rectifiedMean(lines);
  const degrees = Array.from({ length: 360 }, (_, i) => i);
  const sample = (value: (theta: number) => number): number[] => degrees.map((deg) => value((deg * Math.PI) / 180));
  return {
    speed_rpm: speed,
    frequency_Hz: ((machine.rotor.poles / 2) * speed) / 60,
    phase: describeVoltage(phases[0], phaseBounds),
    line,
    rectified_mean_V: mean,
    rectified_mean_V_rel_err: relative(peakBound(lineBounds), mean),
    line_rms_V_per_rpm: line.rms_V / speed,
    line_rms_V_per_rpm_rel_err: line.rms_V_rel_err,
    waveform: {
      electrical_deg: degrees,
      phase_V: sample((theta) => evaluate(phases[0], theta)),
      line_V: sample((theta) => evaluate(lines[0], theta)),
      rectified_V: sample((theta) => rectifiedAt(lines, theta)),
    },
  };
}

function describeVoltage(series: Series, bounds: readonly number[]): VoltageResult {
  const harmonicRms = amplitudes(series).map((amplitude) => amplitude / Math.SQRT2);
  const fundamental = amplitudeOf({ order: series.order, amplitude: harmonicRms }, 1);
  const [rmsV, peakV] = [rms(series), peak(series)];
  const thd = Math.sqrt(Math.max(0, (rmsV / fundamental) ** 2 - 1)); // rounding can leave it just under 0
  return {
    rms_V: rmsV,
    rms_V_rel_err: relative(rmsBound(bounds), rmsV),
    peak_V: peakV,
    peak_V_rel_err: relative(peakBound(bounds), peakV),
    fundamental_rms_V: fundamental,
    fundamental_rms_V_rel_err: relative(rmsBound(bounds.slice(0, 1)), fundamental),
    order: series.order,
    harmonic_rms_V: harmonicRms,
    harmonic_rms_V_rel_err: harmonicRms.map((value, i) => relative(bounds[i] / Math.SQRT2, value)),
    thd,
    thd_rel_err: relative(rmsBound(bounds.slice(1)) / fundamental, thd),
  };
}

/**
 * Rms of the EMF that drives current round a closed delta, per phase: that of (e1 + e2 + e3)/3, V. Orders 3, 9, 15, ...
 */
export function circulatingEmf({ phases }: Emf): number {
  return rms(combine(phases, [1 / 3, 1 / 3, 1 / 3]));
}
