import type { Point } from '../geometry/section.js';
import type { Field } from './field.js';
import type { Locator } from './locate.js';
import { valueAt } from './values.js';

/** Fourier coefficients of the flux density along a line, the whole line being one period. */
export interface LineHarmonics {
  /** 0, 1, 2, ...: of each place in the lists below. */
  readonly order: readonly number[];
  /** B across the line, to its left: sum of cos_n cos(2 pi n s) + sin_n sin(2 pi n s), with s from 0 to 1 along it. */
  readonly across: {
    /** T. */
    readonly cos: readonly number[];
    /** T. */
    readonly sin: readonly number[];
  };
  /** B along the line, forwards, in the same way. */
  readonly along: {
    /** T. */
    readonly cos: readonly number[];
    /** T. */
    readonly sin: readonly number[];
  };
}

/**
 * Harmonics of B along a line, up to the given order, by the midpoint rule on equal steps, which is exact for what the steps
 * resolve; what lies above half their number folds back. NaN where the line leaves the section.
 *
 * @param highest  order, a whole number
 * @param steps  number of places; at least twice the highest order is needed, and eight times is the default
 * @param recovered  gradient of A as `recoverGradients` gives it; straight from the elements where absent
 */
export function lineHarmonics(
  field: Field,
  locator: Locator,
  from: Point,
  to: Point,
  highest: number,
  recovered?: Float64Array,
  steps = Math.max(64, 8 * highest),
): LineHarmonics {
  const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
  const [ux, uy] = [(to[0] - from[0]) / length, (to[1] - from[1]) / length];
  const across = new Float64Array(steps);
  const along = new Float64Array(steps);
  for (let i = 0; i < steps; i++) {
    const s = (i + 0.5) / steps;
    const value = valueAt(field, locator, from[0] + s * (to[0] - from[0]), from[1] + s * (to[1] - from[1]), recovered);
    across[i] = value === undefined ? Number.NaN : ux * value.by - uy * value.bx;
    along[i] = value === undefined ? Number.NaN : ux * value.bx + uy * value.by;
  }
  const order = Array.from({ length: highest + 1 }, (_, n) => n);
  return { order, across: coefficients(across, order), along: coefficients(along, order) };
}

function coefficients(
  samples: Float64Array,
  order: readonly number[],
): { readonly cos: number[]; readonly sin: number[] } {
  const sum = (n: number, wave: (angle: number) => number): number => {
    let total = 0;
    for (let i = 0; i < samples.length; i++) total += samples[i] * wave((2 * Math.PI * n * (i + 0.5)) / samples.length);
    return ((n === 0 ? 1 : 2) * total) / samples.length;
  };
  return { cos: order.map((n) => sum(n, Math.cos)), sin: order.map((n) => sum(n, Math.sin)) };
}
