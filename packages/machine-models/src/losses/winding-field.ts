import { applyFunctional, type Functional, weightedIntegral } from '@gapwright/fem-core/goals';
import type { Mesh } from '@gapwright/fem-core/mesh';
import type { Machine } from '../machine.js';
import { ordersThatMatter, windingFunctional } from '../slices/gap-harmonics.js';
import type { PoleSection } from '../slices/pole-section.js';
import type { SolvedSlice } from '../slices/solve-slice.js';

/**
 * The field in the winding's space of one slice, both its components, as plain data. There each odd harmonic is
 *
 *   By = (P cosh(k y) + Q sinh(k y)) cos(k x),   -Bx = (P sinh(k y) + Q cosh(k y)) sin(k x),   k = n pi/polePitch,
 *
 * the part of P even in y, that of Q odd, which twin discs do not have and a keeper brings. As the rotor turns, a wire sees
 * these as waves at n times the electrical frequency, wherever along the circumference it lies.
 */
export interface WindingField {
  /** m. */
  readonly radius: number;
  /** In integrals over the magnets' radial length, m. */
  readonly weight: number;
  readonly polePitch: number;
  /** Of the winding, m. */
  readonly thickness: number;
  /** Odd, rising. */
  readonly order: readonly number[];
  /** By averaged over the winding's thickness, amplitudes in T:  P sinh(e)/e,  e = k thickness/2. */
  readonly axial: readonly number[];
  /** -Bx averaged in the same way:  Q sinh(e)/e; zeros between twin discs. */
  readonly tangential: readonly number[];
}

/** Orders whose amplitude may pass this share of the fundamental's are kept; what is left out is a few thousandths of the loss. */
const LEAST_SHARE = 1e-3;

/**
 * The field in the winding of a solved slice, by projection of A on the shapes above; what the slice's answer has of it already
 * came about in the same way (`slices/gap-harmonics.ts`).
 */
export function windingField(machine: Machine, { answer, field, pole }: SolvedSlice): WindingField {
  const { wire, thickness } = machine.winding;
  const strand = wire.diameter ?? wire.width ?? 0;
  const order = ordersThatMatter(machine, pole, Math.max(strand, 1e-6), LEAST_SHARE);
  const project = (functional: Functional): number => applyFunctional(functional, field.potential);
  return {
    radius: answer.radius,
    weight: answer.weight,
    polePitch: pole.polePitch,
    thickness,
    order,
    axial: order.map(
      (n) =>
        answer.windingB.amplitude[answer.windingB.order.indexOf(n)] ?? project(windingFunctional(field.mesh, pole, n)),
    ),
    tangential: order.map((n) => (pole.cuts.midPlane ? 0 : project(tangentialFunctional(field.mesh, pole, n)))),
  };
}

/**
 * Amplitude of one odd order of -Bx averaged over the winding's thickness, T, as a functional of A. The odd part has
 * A = -(q/k) s(y) sin(k x),  s = sinh(k y)/sinh(e),  q its By at the upper face, so that
 *
 *   q = -k integral of A sin(k x) s(y) / integral of sin^2(k x) s(y)^2,   and the average is  q/e.
 *
 * It is at right angles to the even part over a winding that lies in the middle of the gap.
 */
function tangentialFunctional(mesh: Mesh, pole: PoleSection, order: number): Functional {
  const k = (order * Math.PI) / pole.polePitch;
  const e = k * pole.windingTo;
  const sinh = (y: number): number => (Math.exp(k * y - e) - Math.exp(-k * y - e)) / -Math.expm1(-2 * e);
  // Integral of s^2 from -e to e over k:  (coth(e) - e/sinh(e)^2)/k.
  const squareOverY = (1 / Math.tanh(e) - e / Math.sinh(e) ** 2) / k;
  const factor = -k / (e * ((pole.to - pole.from) / 2) * squareOverY);
  return weightedIntegral(mesh, ['winding'], (x, y) => factor * Math.sin(k * x) * sinh(y), (2 * Math.PI) / k);
}

/** Squares of amplitudes, averaged over the winding's thickness, T^2. */
export interface WaveSquares {
  readonly order: readonly number[];
  /** Of By, along the shaft. */
  readonly axial: readonly number[];
  /** Of Bx, along the circumference. */
  readonly tangential: readonly number[];
}

/**
 * Squares of both components' amplitudes over the winding's thickness. With e = k thickness/2 and
 * mean cosh^2 = 1/2 + sinh(2e)/(4e), mean sinh^2 = that less 1 (products of both vanish),
 *
 *   By^2 = P^2 mean cosh^2 + Q^2 mean sinh^2,   Bx^2 = P^2 mean sinh^2 + Q^2 mean cosh^2;
 *
 * both together (p^2 + q^2) e coth(e) with p, q the averages that `WindingField` holds.
 */
export function waveSquares({ polePitch, thickness, order, axial, tangential }: WindingField): WaveSquares {
  const parts = order.map((n, i) => {
    const e = (n * Math.PI * thickness) / (2 * polePitch);
    const half = 0.5 * (e / Math.sinh(e)) ** 2;
    const whole = (0.5 * e) / Math.tanh(e);
    const [p, q] = [axial[i] ** 2, tangential[i] ** 2];
    return { axial: p * (whole + half) + q * (whole - half), tangential: p * (whole - half) + q * (whole + half) };
  });
  return { order, axial: parts.map((part) => part.axial), tangential: parts.map((part) => part.tangential) };
}
