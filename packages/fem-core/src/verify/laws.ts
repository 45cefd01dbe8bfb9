import { MU0 } from '../base/constants.js';
import type { BHCurve } from '../materials/bh-curve.js';
import { buildBHCurve } from '../materials/bh-curve.js';

/**
 * B = mu0 H + Js H/(H + h), a steel whose curve, inverse and energy are all in closed form.
 * Froehlich, 1881, and Kennelly, Magnetic reluctance, Trans. AIEE 8, 1891 (from memory).
 */
export const SATURATION = 1.9;
export const KNEE = 250;

/** B in T at H in A/m. */
export const fluxDensityAt = (h: number): number => MU0 * h + (SATURATION * h) / (h + KNEE);

/** H in A/m at B in T: the positive root of mu0 H^2 + p H - B h = 0, p = mu0 h + Js - B. */
export function fieldStrengthAt(b: number): number {
  const p = MU0 * KNEE + SATURATION - b;
  const root = Math.sqrt(p * p + 4 * MU0 * b * KNEE);
  return p > 0 ? (2 * b * KNEE) / (p + root) : (root - p) / (2 * MU0); // whichever does not cancel
}

/** Integral of H dB from 0, J/m^3, at field strength H: H B less the coenergy. */
export function energyDensityAt(h: number): number {
  const coenergy = (MU0 * h * h) / 2 + SATURATION * (h - KNEE * Math.log1p(h / KNEE));
  return h * fluxDensityAt(h) - coenergy;
}

/** Rows [H, B] of the law, close enough that the curve drawn through them is the law to about 1e-7. */
export const LAW_ROWS: readonly (readonly [h: number, b: number])[] = Array.from({ length: 800 }, (_, i) => {
  const h = KNEE * Math.expm1(0.01 * i);
  return [h, fluxDensityAt(h)] as const;
});

export const lawCurve = (): BHCurve => buildBHCurve(LAW_ROWS);

/** Integral by Simpson's rule, for what has no closed form. */
export function integrate(f: (x: number) => number, from: number, to: number, pieces = 400): number {
  const step = (to - from) / pieces;
  let sum = f(from) + f(to);
  for (let i = 1; i < pieces; i++) sum += (i % 2 === 0 ? 2 : 4) * f(from + i * step);
  return (sum * step) / 3;
}
