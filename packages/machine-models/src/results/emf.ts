import type { EndFactor } from '../end-effect/end-factor.js';
import type { Machine, Winding } from '../machine.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import type { Harmonics } from '../waves/series.js';
import { amplitudeOf, amplitudes, combine, evaluate, peak, rms, type Series, scaleEach } from '../waves/series.js';
import { coilPlaces, STARS } from '../winding/coil-places.js';
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
 * peaks at 90 degrees. The other phases lag as `phaseLags` tells: phase 2 of three by 120 degrees, phase 3 by 240.
 */
export interface Emf {
  readonly phases: readonly Series[];
  /** All voltages between terminals that a bridge sees: between neighbours in sequence first, then those farther apart. */
  readonly lines: readonly [Lines, ...Lines[]];
  /** Bounds of the mesh's error in the peak value of each harmonic of a phase. */
  readonly phaseBounds: readonly number[];
}

/**
 * Voltages between terminals equally far apart in sequence: one wave, shifted.
 *
 * Star: neighbours e1 - e2, e2 - e3, ... round to phase 1, which is the only kind of three phases; of five there are also
 * e1 - e3, e2 - e4, ...; of two phases e1 - e2 alone. Six phases: the three of the first star, then those of the second.
 * Delta of three phases: across each phase, its EMF less (e1 + e2 + e3)/3, which the loop's own current uses up in the
 * winding.
 */
export interface Lines {
  readonly series: readonly Series[];
  /** Bounds of the mesh's error in the peak value of each harmonic of one of them. */
  readonly bounds: readonly number[];
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
 * omega is the mechanical speed; h and b are taken at each slice's radius. All orders take the same factor of the ends.
 */
export function computeEmf(machine: Machine, slices: readonly SliceAnswer[], ends = SLICES_ALONE): Emf {
  const order = longestOrders(slices);
  const phaseSums = sumsOverCoils(machine, order);
  const [neighbours, ...farther] = betweenTerminals(phaseSums, machine.winding);
  const { coil, coilBounds } = coilEmf(machine, slices, order, ends);
  const bound = (sums: Series): number[] => amplitudes(sums).map((amplitude, i) => coilBounds[i] * amplitude);
  const lines = (alike: readonly Series[]): Lines => ({
    series: alike.map((sums) => scaleEach(sums, coil)),
    bounds: bound(alike[0]),
  });
  return {
    phases: phaseSums.map((sums) => scaleEach(sums, coil)),
    lines: [lines(neighbours), ...farther.map(lines)],
    phaseBounds: bound(phaseSums[0]),
  };
}

/** For each phase, the sum over its coils of  sense sum over n of sin(n (theta - alpha)). */
function sumsOverCoils(machine: Machine, order: readonly number[]): readonly Series[] {
  const { poles } = machine.rotor;
  const places = coilPlaces(machine.winding, poles);
  const origin = phaseAxis(places, poles, 1);
  return Array.from({ length: machine.winding.phases }, (_, k) => {
    const sums = order.map((n) => coilSum(places, poles, k + 1, n, origin));
    // sin(n (theta - alpha)) = sin(n theta) cos(n alpha) - cos(n theta) sin(n alpha)
    return { order, cos: sums.map(({ im }) => -im), sin: sums.map(({ re }) => re) };
  });
}

/** The voltages of `Lines`, by how far apart the terminals are in sequence. */
function betweenTerminals(
  phases: readonly Series[],
  { connection, phases: count }: Pick<Winding, 'connection' | 'phases'>,
): readonly (readonly Series[])[] {
  if (connection === 'delta') {
    const [first, second, third] = phases;
    const fromEach = [
      [first, second, third],
      [second, third, first],
      [third, first, second],
    ];
    return [fromEach.map((phasesFromHere) => combine(phasesFromHere, [2 / 3, -1 / 3, -1 / 3]))];
  }
  const rings = STARS[count];
  const inRing = rings[0].length;
  return Array.from({ length: Math.floor(inRing / 2) }, (_, i) => {
    const apart = i + 1;
    return rings.flatMap((ring) => {
      const starts = ring.slice(0, 2 * apart === inRing ? apart : inRing); // across the ring: once, not there and back
      return starts.map((from, k) => combine([phases[from], phases[ring[(k + apart) % inRing]]], [1, -1]));
    });
  });
}

/** What the EMF of the slices is multiplied by, and the relative bound of that factor's own error. */
export interface Ends {
  readonly factor: number;
  readonly relErr: number;
}

/** No third dimension. */
export const SLICES_ALONE: Ends = { factor: 1, relErr: 0 };

/** Signed peak value, V, of each harmonic of one coil's EMF over the number of paths, and its bound. */
function coilEmf(
  machine: Machine,
  slices: readonly SliceAnswer[],
  order: readonly number[],
  ends: Ends,
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
  return {
    coil: coil.map((value) => ends.factor * value),
    coilBounds: coilBounds.map((bound, i) => ends.factor * (bound + ends.relErr * Math.abs(coil[i]))),
  };
}

/**
 * `emf` of the results, at the machine's speed; with the end factor where the machine asks for it and it is at hand, and
 * beside it what the slices give alone.
 */
export function describeEmf(machine: Machine, slices: readonly SliceAnswer[], endFactor?: EndFactor): EmfResult {
  const { phases, lines, phaseBounds } = computeEmf(machine, slices, endsOf(machine, endFactor));
  const alone = computeEmf(machine, slices);
  const speed = machine.operation.speedRpm;
  const seen = lines.flatMap(({ series }) => series);
  const line = describeVoltage(seen[0], lines[0].bounds);
  const mean = rectifiedMean(seen);
  const meanBound = Math.max(...lines.map(({ bounds }) => peakBound(bounds)));
  const degrees = Array.from({ length: 360 }, (_, i) => i);
  const sample = (value: (theta: number) => number): number[] => degrees.map((deg) => value((deg * Math.PI) / 180));
  return {
    speed_rpm: speed,
    frequency_Hz: ((machine.rotor.poles / 2) * speed) / 60,
    ...(endFactor !== undefined && {
      end_factor: endFactor.endFactor,
      end_factor_rel_err: endFactor.relErr,
      end_factor_band_rel: endFactor.band,
      end_factor_legs: endFactor.endFactorLegs,
    }),
    end_corrected: machine.model.endCorrection && endFactor !== undefined,
    slices_alone: {
      phase_rms_V: rms(alone.phases[0]),
      phase_fundamental_rms_V: amplitudeOf(toHarmonics(alone.phases[0]), 1) / Math.SQRT2,
      line_rms_V: rms(alone.lines[0].series[0]),
    },
    phase: describeVoltage(phases[0], phaseBounds),
    line,
    rectified_mean_V: mean,
    rectified_mean_V_rel_err: relative(meanBound, mean),
    line_rms_V_per_rpm: line.rms_V / speed,
    line_rms_V_per_rpm_rel_err: line.rms_V_rel_err,
    waveform: {
      electrical_deg: degrees,
      phase_V: sample((theta) => evaluate(phases[0], theta)),
      line_V: sample((theta) => evaluate(seen[0], theta)),
      rectified_V: sample((theta) => rectifiedAt(seen, theta)),
    },
  };
}

/** What the machine's EMF is multiplied by. */
export function endsOf({ model }: Machine, endFactor: EndFactor | undefined): Ends {
  if (!model.endCorrection || endFactor === undefined) return SLICES_ALONE;
  return { factor: endFactor.endFactor, relErr: endFactor.relErr };
}

const toHarmonics = (series: Series): Harmonics => ({ order: series.order, amplitude: amplitudes(series) });

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
 * Highest rectified voltage with the load open, V: the highest peak between any two terminals. Of three phases it is that
 * of the line, of five it is not, for those two apart in sequence see more.
 */
export function rectifiedPeak({ lines }: Emf): number {
  return Math.max(...lines.map(({ series }) => peak(series[0])));
}

/**
 * Rms of the EMF that drives current round a closed delta, per phase: that of (e1 + e2 + e3)/3, V. Orders 3, 9, 15, ...
 */
export function circulatingEmf({ phases }: Emf): number {
  const shares = phases.map(() => 1 / phases.length);
  return rms(combine(phases, shares));
}
