import { MU0 } from '@gapwright/fem-core';
import type { Wire } from '../machine.js';
import type { WaveSquares } from './winding-field.js';

/**
 * One strand: round, or rectangular with its sides along the circumference (`across`) and along the shaft (`along`), as the
 * width and the height of flat wire are taken.
 */
export type Strand =
  | { readonly kind: 'round'; readonly diameter: number }
  | { readonly kind: 'flat'; readonly across: number; readonly along: number };

export function strandOf({ diameter, width = 0, height = 0 }: Wire): Strand {
  return diameter === undefined ? { kind: 'flat', across: width, along: height } : { kind: 'round', diameter };
}

/** Skin depth  sqrt(2 rho/(omega mu0)), m. */
export function skinDepth(angularFrequency: number, resistivity: number): number {
  return Math.sqrt((2 * resistivity) / (angularFrequency * MU0));
}

/**
 * Eddy loss per volume of copper, W/m^3, of strands across a field that alternates with amplitudes b at n times the
 * fundamental's angular frequency w:
 *
 *   round         sum (n w)^2 (By^2 + Bx^2) d^2/(32 rho) F(d/delta_n)
 *   rectangular   sum (n w)^2 (By^2 a^2 + Bx^2 c^2)/(24 rho),  a the side along the circumference, c along the shaft
 *
 * the reaction of the eddies in round strands by the exact F (`reactionFactor`); in rectangular ones it is left out, which
 * is on the safe side and within a few per cent up to a side of one skin depth. Each strand carries its eddies alone: what
 * circulates between strands in parallel is not in it. Textbook, low-frequency limit (J. Lammeraner and M. Stafl, Eddy
 * Currents, 1966; from memory).
 */
export function strandLossDensity(
  strand: Strand,
  squares: WaveSquares,
  fundamentalFrequency: number,
  resistivity: number,
): number {
  return squares.order.reduce((sum, order, i) => {
    const w = order * fundamentalFrequency;
    const [axial, tangential] = [squares.axial[i], squares.tangential[i]];
    if (strand.kind === 'flat') {
      return sum + (w * w * (axial * strand.across ** 2 + tangential * strand.along ** 2)) / (24 * resistivity);
    }
    const factor = w === 0 ? 1 : reactionFactor(strand.diameter / skinDepth(w, resistivity));
    return sum + (w * w * (axial + tangential) * strand.diameter ** 2 * factor) / (32 * resistivity);
  }, 0);
}

/**
 * Eddy loss of a round strand in an even transverse alternating field over that of the law that leaves the eddies'
 * own field out; x = d/delta. Inside, A = C J1(z r) sin(phi) with z^2 = -i w mu0/rho; outside, the applied field and a dipole.
 * With u = |z| d/2 = x/sqrt2 and g = z (d/2) J0/J1 this is
 *
 *   F = 16 Im(g) / (u^2 |g|^2),   g = 2 + i u^2/(4 + i u^2/(6 + ...)),
 *
 * the continued fraction of J0/J1 (Abramowitz, Stegun, Handbook of Mathematical Functions, 1964, 9.1.73, from memory), which
 * needs some u of its steps. F starts as 1 - (11/1536) x^4 and ends as
 * 32/x^3. Derived here.
 */
export function reactionFactor(x: number): number {
  const square = (x * x) / 2;
  if (square === 0) return 1;
  let [re, im] = [0, 0];
  const steps = Math.ceil(Math.sqrt(square)) + 20;
  for (let m = steps; m >= 1; m--) {
    // g_m = 2 m + i u^2 / g_(m+1), the last one 2 m.
    const size = re * re + im * im;
    [re, im] = size === 0 ? [2 * m, 0] : [2 * m + (square * im) / size, (square * re) / size];
  }
  return (16 * im) / (square * (re * re + im * im));
}

/** Diameter, or the longer side, m. */
export const strandSize = (strand: Strand): number =>
  strand.kind === 'round' ? strand.diameter : Math.max(strand.across, strand.along);
