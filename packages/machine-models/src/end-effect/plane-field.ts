import type { Machine } from '../machine.js';
import { interpoleWidth } from '../rotor/interpole-shape.js';
import { magnetWidth, segmentCount } from '../rotor/magnet-shape.js';
import type { GapModel } from './gap-model.js';

/** What the two-dimensional machine at one radius is made of: fundamentals over the electrical angle, T. */
export interface PlaneSources {
  /** Amplitude of the axial magnetisation, cosine about the magnet's axis. */
  readonly axial: number;
  /** Amplitude of the tangential magnetisation of the magnets and of the interpoles, sine. */
  readonly tangential: number;
  readonly interpoles: number;
}

/**
 * Fundamentals of the magnetisation along the circumference at one radius, by widths as the slices take them:
 *
 *   magnets     axial (4/pi) Br sin(pi w / (2 polePitch)), w their width
 *   interpoles  tangential (4/pi) Br sin(pi w / (2 polePitch))
 *   Halbach     axial = tangential = Br sin(x)/x,  x = pi / (2 pieces)
 */
export function planeSources(machine: Machine, model: GapModel, radius: number): PlaneSources {
  const { magnets, poles, interpoles: given } = machine.rotor;
  const polePitch = (2 * Math.PI * radius) / poles;
  const square = (width: number): number => (4 / Math.PI) * Math.sin((Math.PI * width) / (2 * polePitch));
  const pieces = segmentCount(magnets);
  if (pieces > 1) {
    const x = Math.PI / (2 * pieces);
    const strength = (model.remanence * Math.sin(x)) / x;
    return { axial: strength, tangential: strength, interpoles: 0 };
  }
  const between = given === undefined ? 0 : Math.max(0, interpoleWidth(given, magnets, poles, radius));
  return {
    axial: model.remanence * square(magnetWidth(magnets, poles, radius)),
    tangential: 0,
    interpoles: model.interpoleRemanence * square(between),
  };
}

/**
 * Fundamental, about the magnet's axis, of By averaged over the winding's thickness in the machine unrolled at one
 * radius, endless along the third direction, T. With h the magnets' thickness, i the interpoles', a from the facing
 * plane to the magnets' face, c = y - facing, R and T the axial and the tangential fundamentals of the magnets, I that
 * of the interpoles:
 *
 *   steel behind, a plane facing   By = cosh(k c) F / sinh k(a + h),
 *                                  F = R sinh(k h) + T (cosh(k h) - 1) + I (cosh(k h) - cosh k(h - i))
 *   no steel, a plane facing       By = cosh(k c) exp(-k a) G
 *   no steel, nothing facing       By = exp(-k (face - y)) G/2,
 *                                  G = (R + T) (1 - exp(-k h)) + I (1 - exp(-k i))
 *   steel behind, nothing facing   By = exp(-k (face - y)) H/2,
 *                                  H = R (1 - exp(-2 k h)) + T (1 - exp(-k h))^2
 *                                      + I (1 - exp(-k i) - exp(-2 k h) (exp(k i) - 1))
 *
 * Derived from the potential of sheets of charge between planes of no potential; R alone is the series of the gap
 * between ideal discs, R = T Mallinson's one-sided flux.
 *
 * @param k pi/polePitch, 1/m
 */
export function planeFundamental({ axial, tangential, interpoles }: PlaneSources, model: GapModel, k: number): number {
  const { face, back, interpoleBack, behind, facing, windingFrom, windingTo } = model;
  const kh = k * (back - face);
  const ki = k * (interpoleBack - face);
  const span = k * (windingTo - windingFrom);
  // All exponentials are written so that none grows.
  const g = (axial + tangential) * -Math.expm1(-kh) + interpoles * -Math.expm1(-ki);
  if (facing === undefined) {
    const h =
      axial * -Math.expm1(-2 * kh) +
      tangential * Math.expm1(-kh) ** 2 +
      interpoles * (-Math.expm1(-ki) - Math.exp(ki - 2 * kh) + Math.exp(-2 * kh));
    const overWinding = (Math.exp(k * (windingTo - face)) - Math.exp(k * (windingFrom - face))) / span;
    return ((behind === undefined ? g : h) * overWinding) / 2;
  }
  const sinh = (x: number, off: number): number => (Math.exp(x - off) - Math.exp(-x - off)) / 2;
  const cosh = (x: number, off: number): number => (Math.exp(x - off) + Math.exp(-x - off)) / 2;
  const ka = k * (face - facing);
  const overWinding = (sinh(k * (windingTo - facing), ka) - sinh(k * (windingFrom - facing), ka)) / span;
  if (behind === undefined) return overWinding * g;
  const f =
    axial * sinh(kh, kh) +
    tangential * (cosh(kh, kh) - Math.exp(-kh)) +
    interpoles * (cosh(kh, kh) - cosh(kh - ki, kh));
  return (overWinding * f) / sinh(ka + kh, ka + kh);
}
