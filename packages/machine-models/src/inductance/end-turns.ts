import { MU0 } from '@gapwright/fem-core';
import type { Winding } from '../machine.js';

/** The two end parts of one coil, joined to a ring. */
export interface EndRing {
  /** Mean radius: their length together over 2 pi, m. */
  readonly radius: number;
  /** Radial build of the bundle, m. */
  readonly build: number;
  /** Its axial size, m. */
  readonly thickness: number;
}

/**
 * What of a coil's mean turn (`meanTurn`) is not legs. Concentrated: the opening's two ends and the round corners, pi x leg
 * width. Overlapped: two arcs of one pole pitch.
 */
export function endRing(winding: Winding, poles: number): EndRing {
  const { legWidth, thickness } = winding;
  const length =
    winding.layout === 'concentrated'
      ? winding.opening.innerWidth + winding.opening.outerWidth + Math.PI * legWidth
      : ((2 * Math.PI) / poles) * (winding.legs.innerRadius + winding.legs.outerRadius);
  return { radius: length / (2 * Math.PI), build: legWidth, thickness };
}

/** Cells along each side of the bundle's section. */
const CELLS = 6;

/**
 * Self-inductance in air of a ring of one turn spread evenly over a rectangular section, H: the mean over all pairs of places
 * of the mutual inductance of two coaxial circles (Maxwell, A Treatise on Electricity and Magnetism, 1873, art. 701),
 *
 *   M = mu0 sqrt(a b) ((2/c - c) K(c) - (2/c) E(c)),   c^2 = 4 a b / ((a + b)^2 + z^2)
 *
 * by cells; a cell with itself is the ring of its size, L = mu0 a (ln(8 a/g) - 2), g = 0.2235 (build + thickness) the mean
 * distance of a rectangle from itself (Grover, Inductance Calculations, 1946; both from memory).
 */
export function ringInductance({ radius, build, thickness }: EndRing): number {
  const [width, height] = [build / CELLS, thickness / CELLS];
  const place = (i: number, size: number): number => (i - (CELLS - 1) / 2) * size;
  let sum = 0;
  for (let i = 0; i < CELLS; i++) {
    for (let j = 0; j < CELLS; j++) {
      const [a, b] = [radius + place(i, width), radius + place(j, width)];
      // Pairs of cells one, two, ... apart along the shaft; all of one distance at a time.
      for (let apart = 0; apart < CELLS; apart++) {
        const pairs = (apart === 0 ? 1 : 2) * (CELLS - apart);
        const own = apart === 0 && i === j;
        sum += pairs * (own ? thinRing(a, width, height) : coaxialCircles(a, b, apart * height));
      }
    }
  }
  return sum / CELLS ** 4;
}

/** One turn, section much smaller than the radius, H. */
export function thinRing(radius: number, build: number, thickness: number): number {
  return MU0 * radius * (Math.log((8 * radius) / (0.2235 * (build + thickness))) - 2);
}

/**
 * Mutual inductance of two coaxial circles, H; by the arithmetic-geometric mean:  K = pi/(2 M),
 * E/K = 1 - sum of 2^(n-1) c_n^2 from n = 0 (Abramowitz, Stegun, Handbook of Mathematical Functions, 1964, 17.6; from memory).
 */
export function coaxialCircles(a: number, b: number, apart: number): number {
  const squared = (4 * a * b) / ((a + b) ** 2 + apart ** 2);
  const modulus = Math.sqrt(squared);
  let [x, y, power, sum] = [1, Math.sqrt(1 - squared), 0.5, 0.5 * squared];
  while (Math.abs(x - y) > 1e-15 * x) {
    const difference = (x - y) / 2;
    [x, y] = [(x + y) / 2, Math.sqrt(x * y)];
    power *= 2;
    sum += power * difference * difference;
    if (power > 1e6) break; // converges in some six steps
  }
  const complete = Math.PI / (2 * x);
  return MU0 * Math.sqrt(a * b) * ((2 / modulus - modulus) * complete - (2 / modulus) * complete * (1 - sum));
}
