/**
 * How the mesh's error reaches the figures, to first order and as bounds.
 *
 * A slice bounds the error of each harmonic of By it keeps, `windingBErr`. All figures of voltage and flux density
 * are linear in these harmonics up to a last step (rms, peak, mean of the highest less the lowest):
 *
 * - a harmonic of a leg, an EMF or `effective_B` is a sum over slices; the bounds add up with the sizes of the weights;
 * - rms: by the triangle inequality off by at most the rms of the error, sqrt(sum bound^2 / 2);
 * - peak, and the mean of a rectified voltage: off by at most the largest error at any angle, sum of bounds;
 * - a square (merit, line_B_squared_thickness) is off by twice the relative error of what is squared;
 * - pull and energy are sums of the slices' own figures; their bounds add up in the same way.
 *
 * Harmonics past those a slice keeps (each under a fiftieth of the wanted error) and the model itself are not in them.
 */
import type { SliceAnswer } from '../slices/slice-answer.js';

/** Bound of the error of one odd harmonic of a slice's `windingB`, T; 0 past those that were estimated. */
export function harmonicBound(slice: SliceAnswer, order: number): number {
  return slice.windingBErr[(order - 1) / 2] ?? 0;
}

/** Bound of the rms of a waveform whose harmonics' peak values have these bounds. */
export function rmsBound(bounds: readonly number[]): number {
  return Math.hypot(...bounds) / Math.SQRT2;
}

/** Bound of a waveform at any angle, hence of its peak, from the bounds of its harmonics' peak values. */
export function peakBound(bounds: readonly number[]): number {
  return bounds.reduce((sum, bound) => sum + bound, 0);
}

/** Bound over value; 0 where there is nothing to be wrong about. */
export function relative(bound: number, value: number): number {
  return bound === 0 ? 0 : bound / Math.abs(value);
}
