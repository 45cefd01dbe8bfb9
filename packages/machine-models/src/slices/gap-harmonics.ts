import type { Field, Locator } from '@gapwright/fem-core';
import { gaussLegendre, valueAt } from '@gapwright/fem-core';
import type { PoleSection } from './pole-section.js';
import type { Harmonics } from './slice-answer.js';

/** Places across half a pole at which the potential is sampled: ten for the shortest wave kept. */
const STATIONS = 256;
/** Gauss points over (half) the winding thickness; the potential is smooth there. */
const LEVELS = 6;

/**
 * Harmonics of By from samples of A. With A = -sum (b_n/k_n) sin(k_n x), k_n = n pi/polePitch, odd n alone (By is even
 * about the magnet's axis and reverses from pole to pole), each b_n is a discrete sine sum over equally spaced stations,
 * exact up to aliasing with orders beyond 4 STATIONS - n.
 *
 * @param orders  odd harmonic orders
 * @param levels  heights y and weights that sum to 1: By is averaged over them
 */
function harmonicsAt(
  field: Field,
  locator: Locator,
  pole: PoleSection,
  orders: readonly number[],
  levels: readonly { readonly y: number; readonly weight: number }[],
): Harmonics {
  const { polePitch, from, to } = pole;
  const count = pole.cuts.magnetAxis ? STATIONS : 2 * STATIONS;
  const step = (to - from) / count;
  const x = Float64Array.from({ length: count }, (_, j) => from + (j + 0.5) * step);
  const mean = x.map((at) => {
    let sum = 0;
    for (const { y, weight } of levels) {
      const value = valueAt(field, locator, at, y);
      if (value === undefined) throw new Error(`harmonicsAt: (${at}, ${y}) m lies outside the section`);
      sum += weight * value.a;
    }
    return sum;
  });
  const amplitude = orders.map((n) => {
    const k = (n * Math.PI) / polePitch;
    const sine = mean.reduce((sum, a, j) => sum + a * Math.sin(k * x[j]), 0);
    return (-k * 2 * sine) / count;
  });
  return { order: [...orders], amplitude };
}

/** By on the mid-plane of the gap. */
export function midPlaneHarmonics(
  field: Field,
  locator: Locator,
  pole: PoleSection,
  orders: readonly number[],
): Harmonics {
  return harmonicsAt(field, locator, pole, orders, [{ y: 0, weight: 1 }]);
}

/** By averaged over the winding's thickness. */
export function windingHarmonics(
  field: Field,
  locator: Locator,
  pole: PoleSection,
  orders: readonly number[],
): Harmonics {
  const { points, weights } = gaussLegendre(LEVELS);
  const height = pole.windingTo - pole.windingFrom;
  const levels = Array.from(points, (s, i) => ({ y: pole.windingFrom + s * height, weight: weights[i] }));
  return harmonicsAt(field, locator, pole, orders, levels);
}

/** The orders 1, 3, ... 2 count - 1. */
export const oddOrders = (count: number): readonly number[] => Array.from({ length: count }, (_, i) => 2 * i + 1);
