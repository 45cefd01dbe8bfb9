import { Matrix, solve } from 'ml-matrix';
import { gaussPoints } from './gauss-points.js';
import type { MagnetOutline } from './magnet-shape.js';
import { magnetReach } from './magnet-shape.js';

/** A slice's radius and its share in integrals along the magnets: integral of f dr = sum weight f(radius). */
export interface SliceRadius {
  readonly radius: number;
  readonly weight: number;
}

/**
 * Evenly spaced radii from `inner` to `outer` with the weights of Simpson's rule, h/3 (1, 4, 2, 4, ..., 1): exact for
 * cubics. One slice: the mean radius, with the whole length for its weight.
 *
 * @param count  odd
 */
export function simpsonRadii(inner: number, outer: number, count: number): readonly SliceRadius[] {
  if (count === 1) return [{ radius: (inner + outer) / 2, weight: outer - inner }];
  const step = (outer - inner) / (count - 1);
  return Array.from({ length: count }, (_, i) => {
    const factor = i === 0 || i === count - 1 ? 1 : i % 2 === 1 ? 4 : 2;
    return { radius: i === count - 1 ? outer : inner + i * step, weight: (factor * step) / 3 };
  });
}

/**
 * The weights that integrate, from `inner` to `outer`, the polynomial through the values at the given radii. One radius:
 * the polynomial is a constant.
 *
 * In x = (2 r - inner - outer) / (outer - inner) the Legendre polynomials P0 ... P(n-1) must be integrated right:
 *
 *   sum_j weight_j P_k(x_j) = (outer - inner) if k = 0, else 0
 *
 * @param radii  n of them, all different; n up to 15 keeps the system well conditioned if they are spread over the length
 */
export function polynomialRadii(inner: number, outer: number, radii: readonly number[]): readonly SliceRadius[] {
  const length = outer - inner;
  const rows = radii.map((radius) => legendre(radii.length, (2 * radius - inner - outer) / length));
  const integrals = radii.map((_, k) => [k === 0 ? length : 0]);
  const weights = solve(new Matrix(rows).transpose(), new Matrix(integrals)).to1DArray();
  return radii.map((radius, i) => ({ radius, weight: weights[i] }));
}

/** P0(x) ... P(count-1)(x), by (k + 1) P(k+1) = (2k + 1) x P(k) - k P(k-1). */
function legendre(count: number, x: number): number[] {
  const p = [1, x];
  for (let k = 1; k + 1 < count; k++) p.push(((2 * k + 1) * x * p[k] - k * p[k - 1]) / (k + 1));
  return p.slice(0, count);
}

/**
 * Gauss-Legendre points in the angle u of  r = meanRadius + (D/2) sin u,  u = -90 ... 90 degrees, dr = (D/2) cos u du: what a
 * round magnet's slices show, whose width vanishes like a square root at both ends, is smooth in u, and the rule converges
 * faster than any power of the number of slices.
 */
export function roundRadii(meanRadius: number, diameter: number, count: number): readonly SliceRadius[] {
  const { at, weight } = gaussPoints(count);
  return at.map((x, i) => {
    const u = (Math.PI / 2) * x;
    return {
      radius: meanRadius + (diameter / 2) * Math.sin(u),
      weight: (diameter / 2) * Math.cos(u) * (Math.PI / 2) * weight[i],
    };
  });
}

/** How often `auto` may choose finer slices after the first ones. */
export const FINEST_LEVEL = 5;

/**
 * The slices of `radii: auto` at a level from 0: for round magnets 5, 7, 9, ... points in the angle, for others 3, 5, 9,
 * 17, ... by Simpson's rule, each of which takes up all radii of the one before.
 */
export function autoRadii(magnets: MagnetOutline, level: number): readonly SliceRadius[] {
  if (magnets.shape === 'round') return roundRadii(magnets.meanRadius, magnets.diameter, 5 + 2 * level);
  const { inner, outer } = magnetReach(magnets);
  return simpsonRadii(inner, outer, 1 + 2 ** (level + 1));
}
