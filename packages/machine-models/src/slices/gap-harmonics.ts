import type { Functional } from '@gapwright/fem-core/goals';
import { weightedIntegral } from '@gapwright/fem-core/goals';
import type { Mesh } from '@gapwright/fem-core/mesh';
import type { Machine } from '../machine.js';
import { remanenceAt } from '../materials/at-temperature.js';
import { legSpreadFactor } from '../winding/factors.js';
import type { PoleSection } from './pole-section.js';

/**
 * In the winding's space there is neither current nor magnet, so each odd harmonic of the field is known but for one
 * number: By = b cosh(k y)/cosh(e) cos(k x), A = -(b/k) cosh(k y)/cosh(e) sin(k x), with k = n pi/polePitch, e = k times
 * half the winding's thickness, and b the amplitude at the winding's faces. (Parts odd in y average to nothing over the
 * winding and vanish on the mid-plane.) b is the projection of A on that shape over the whole space, which leaves out
 * whatever the elements add that no field can be:
 *
 *   b = -k integral of A sin(k x) c(y) / integral of sin^2(k x) c(y)^2,   c(y) = cosh(k y)/cosh(e).
 */
interface GapMode {
  readonly k: number;
  /** k times half the winding's thickness. */
  readonly e: number;
  readonly shape: (x: number, y: number) => number;
  /** Integral of the shape squared over what is drawn of the winding, m^2. */
  readonly square: number;
}

function gapMode(pole: PoleSection, order: number): GapMode {
  const k = (order * Math.PI) / pole.polePitch;
  const e = k * pole.windingTo;
  const scale = 1 + Math.exp(-2 * e);
  const cosh = (y: number): number => (Math.exp(k * Math.abs(y) - e) + Math.exp(-k * Math.abs(y) - e)) / scale;
  const halves = pole.cuts.midPlane ? 1 : 2;
  const squareOverY = halves * (pole.windingTo / (2 * Math.cosh(e) ** 2) + Math.tanh(e) / (2 * k));
  return {
    k,
    e,
    shape: (x, y) => Math.sin(k * x) * cosh(y),
    square: ((pole.to - pole.from) / 2) * squareOverY,
  };
}

/** Amplitude of one odd order of By averaged over the winding's thickness, T, as a functional of A. */
export function windingFunctional(mesh: Mesh, pole: PoleSection, order: number): Functional {
  const { k, e, shape, square } = gapMode(pole, order);
  const factor = (-k * Math.tanh(e)) / (e * square);
  return weightedIntegral(mesh, ['winding'], (x, y) => factor * shape(x, y), (2 * Math.PI) / k);
}

/** Amplitude on the mid-plane over that averaged over the winding's thickness: e / sinh(e). */
export function midPlaneShare(pole: PoleSection, order: number): number {
  const { e } = gapMode(pole, order);
  return e / Math.sinh(e);
}

/** At least this many odd orders are kept, and at most that many. */
const FEWEST = 6;
const MOST = 40;

/**
 * Odd orders to keep: all whose share in a leg's average may pass `share` of the fundamental's, by an upper bound of the
 * series of the gap between ideal discs (recoil 1, |sin| taken as 1):
 *
 *   (4 Br/(n pi)) [sinh(e)/e] / [cosh(k g/2) + sinh(k g/2) coth(k h)] x min(1, 2/(k b)),   b the leg's width.
 */
export function ordersThatMatter(
  machine: Machine,
  pole: PoleSection,
  legWidth: number,
  share: number,
): readonly number[] {
  const { rotor } = machine;
  const magnet = machine.materials[rotor.magnets.material];
  const remanence = magnet.kind === 'magnet' ? remanenceAt(magnet, rotor.magnets.temperature) : 0;
  const bound = (n: number): number => {
    const k = (n * Math.PI) / pole.polePitch;
    const g = k * rotor.gap;
    const t = k * 2 * pole.windingTo;
    // Numerator and denominator both divided by exp(k g/2)/2, so that neither overflows.
    const across = (Math.exp((t - g) / 2) * (1 - Math.exp(-t))) / (t / 2);
    const through = 1 + Math.exp(-g) + (1 - Math.exp(-g)) / Math.tanh(k * rotor.magnets.thickness);
    return (((4 * remanence) / (n * Math.PI)) * across * Math.min(1, 2 / (k * legWidth))) / through;
  };
  const least = share * bound(1) * Math.abs(legSpreadFactor(legWidth, pole.polePitch, 1));
  let count = FEWEST;
  for (let i = FEWEST; i < MOST; i++) if (bound(2 * i + 1) > least) count = i + 1;
  return oddOrders(count);
}

/** The orders 1, 3, ... 2 count - 1. */
export const oddOrders = (count: number): readonly number[] => Array.from({ length: count }, (_, i) => 2 * i + 1);
