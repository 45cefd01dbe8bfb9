import type { Machine, Winding } from '../machine.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import { amplitudeOf, amplitudes, evaluate, peak, type Series } from '../waves/series.js';
import { legSpreadFactor } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';
import { harmonicBound, peakBound, relative } from './error-bounds.js';
import type { MachineResult, SliceResult } from './result.js';

/**
 * Flux density averaged over a leg, against the electrical angle of the leg's centre from a magnet's axis, with a bound
 * of the mesh's error for each harmonic (T).
 */
export interface LegWave {
  readonly series: Series;
  readonly bounds: readonly number[];
}

/** The leg's wave in one slice: each harmonic of the winding's By times the leg-spread factor of the width here. */
export function legWave(machine: Machine, slice: SliceAnswer): LegWave {
  const { width } = legCut(machine.winding, machine.rotor.poles, machine.rotor.magnets.meanRadius, slice.radius);
  const { order, amplitude } = slice.windingB;
  const spread = order.map((n) => legSpreadFactor(width, slice.polePitch, n));
  return {
    series: { order, cos: amplitude.map((value, i) => value * spread[i]), sin: order.map(() => 0) },
    bounds: order.map((n, i) => harmonicBound(slice, n) * Math.abs(spread[i])),
  };
}

const ROOT5 = Math.sqrt(5);
const SINE_72 = Math.sqrt((5 + ROOT5) / 8);
const SINE_144 = Math.sqrt((5 - ROOT5) / 8);

/** cos and sin of n times 360 deg / 3, 4 or 5, by n modulo that number, so that what cancels does so exactly. */
const TURNS = {
  3: { cos: [1, -0.5, -0.5], sin: [0, Math.sqrt(3) / 2, -Math.sqrt(3) / 2] },
  4: { cos: [1, 0, -1, 0], sin: [0, 1, 0, -1] },
  5: {
    cos: [1, (ROOT5 - 1) / 4, -(ROOT5 + 1) / 4, -(ROOT5 + 1) / 4, (ROOT5 - 1) / 4],
    sin: [0, SINE_72, SINE_144, -SINE_144, -SINE_72],
  },
};

/** Angle between neighbouring phases of one star as a share of a turn, 1 over this: 120, 90, 72 and (two stars) 120 degrees. */
const NEIGHBOURS = { 2: 4, 3: 3, 5: 5, 6: 3 } as const;

/**
 * leg(theta) - leg(theta - lag), lag the angle between neighbouring phases of a star: what the two see together. Three
 * and six phases: 120 degrees, triplen orders cancel; five: 72 degrees, orders 5, 15, ... cancel; two: 90 degrees.
 */
export function lineWave({ series, bounds }: LegWave, phases: Winding['phases']): LegWave {
  const parts = NEIGHBOURS[phases];
  const { cos: c, sin: s } = TURNS[parts];
  const { order, cos, sin } = series;
  return {
    series: {
      order,
      cos: order.map((n, i) => cos[i] * (1 - c[n % parts]) + sin[i] * s[n % parts]),
      sin: order.map((n, i) => sin[i] * (1 - c[n % parts]) - cos[i] * s[n % parts]),
    },
    bounds: order.map((n, i) => bounds[i] * Math.hypot(1 - c[n % parts], s[n % parts])),
  };
}

/**
 * Wave of the whole machine:  sum(weight r leg(r, theta)) / sum(weight r),  each slice's leg about its own centre, so
 * that legs which are not radial count as if they were.
 */
export function effectiveWave(machine: Machine, slices: readonly SliceAnswer[]): LegWave {
  const order = longestOrders(slices);
  const legs = slices.map((slice) => legWave(machine, slice));
  const shares = slices.map(({ weight, radius }) => weight * radius);
  const total = shares.reduce((sum, share) => sum + share, 0);
  const overSlices = (pick: (leg: LegWave) => readonly number[], factors: readonly number[]): number[] =>
    order.map((_, i) => legs.reduce((sum, leg, k) => sum + factors[k] * (pick(leg)[i] ?? 0), 0) / total);
  return {
    series: { order, cos: overSlices((leg) => leg.series.cos, shares), sin: order.map(() => 0) },
    bounds: overSlices((leg) => leg.bounds, shares.map(Math.abs)), // weights of freely chosen radii may be negative
  };
}

/** Orders of the slice that holds most; the orders of a slice are 1, 3, 5, ... without a hole. */
export function longestOrders(slices: readonly SliceAnswer[]): readonly number[] {
  return slices.map(({ windingB }) => windingB.order).reduce((a, b) => (b.length > a.length ? b : a), []);
}

/** The part of a slice's result that depends on the leg. */
export function describeLeg(
  machine: Machine,
  slice: SliceAnswer,
): Pick<SliceResult, 'leg_B' | 'leg_width_m' | 'line_B_peak_T' | 'leg_B_rel_err'> {
  const leg = legWave(machine, slice);
  const degrees = Array.from({ length: 72 }, (_, i) => 5 * i);
  const peakT = peak(leg.series);
  return {
    leg_B: {
      electrical_deg: degrees,
      value_T: degrees.map((degree) => evaluate(leg.series, (degree * Math.PI) / 180)),
      peak_T: peakT,
      fundamental_T: leg.series.cos[0] ?? 0,
    },
    leg_width_m: legCut(machine.winding, machine.rotor.poles, machine.rotor.magnets.meanRadius, slice.radius).width,
    line_B_peak_T: peak(lineWave(leg, machine.winding.phases).series),
    leg_B_rel_err: relative(peakBound(leg.bounds), peakT),
  };
}

/** `effective_B` of the results. */
export function describeEffectiveB(machine: Machine, slices: readonly SliceAnswer[]): MachineResult['effective_B'] {
  const phase = effectiveWave(machine, slices);
  const line = lineWave(phase, machine.winding.phases);
  const [phasePeak, linePeak] = [peak(phase.series), peak(line.series)];
  return {
    peak_T: phasePeak,
    peak_T_rel_err: relative(peakBound(phase.bounds), phasePeak),
    line_peak_T: linePeak,
    line_peak_T_rel_err: relative(peakBound(line.bounds), linePeak),
    third_share_phase: thirdShare(phase.series),
    third_share_line: thirdShare(line.series),
  };
}

/** |b3| / |b1|. */
function thirdShare(series: Series): number {
  const harmonics = { order: series.order, amplitude: amplitudes(series) };
  return amplitudeOf(harmonics, 3) / amplitudeOf(harmonics, 1);
}
