import type { CoilPlace } from './coil-places.js';

/**
 * Sum of the coils' unit vectors of one phase for an odd harmonic, angles measured from `origin`:
 *
 *   D = sum over its coils of sense exp(i order (pole pairs x axis - origin))
 *
 * @param origin electrical radians
 */
export function coilSum(
  places: readonly CoilPlace[],
  poles: number,
  phase: number,
  order: number,
  origin: number,
): { readonly re: number; readonly im: number } {
  let re = 0;
  let im = 0;
  for (const place of places) {
    if (place.phase !== phase) continue;
    const angle = order * ((poles / 2) * place.axis - origin);
    re += place.sense * Math.cos(angle);
    im += place.sense * Math.sin(angle);
  }
  return { re, im };
}

/** Electrical angle in radians of the axis of a phase: that of the sum of its coils' unit vectors. */
export function phaseAxis(places: readonly CoilPlace[], poles: number, phase: number): number {
  const { re, im } = coilSum(places, poles, phase, 1, 0);
  return Math.atan2(im, re);
}

/**
 * Distribution factor of phase 1: the sum of its coils' vectors over the sum of their lengths, signed about the axis of
 * the phase, 1 at the fundamental when all its coils are in step.
 *
 * @param order odd
 */
export function distributionFactor(places: readonly CoilPlace[], poles: number, order: number): number {
  const count = places.filter(({ phase }) => phase === 1).length;
  return coilSum(places, poles, 1, order, phaseAxis(places, poles, 1)).re / count;
}

/**
 * Pitch factor  kp = sin(order x half span).
 *
 * @param halfSpan electrical radians from the coil's axis to the leg's centre
 */
export function pitchFactor(halfSpan: number, order: number): number {
  return Math.sin(order * halfSpan);
}

/**
 * Leg-spread factor, the average of a harmonic over the leg's width b:  ks = sin(x)/x,  x = order pi b / (2 polePitch).
 *
 * @param width      along the circumference, m
 * @param polePitch  m
 */
export function legSpreadFactor(width: number, polePitch: number, order: number): number {
  const x = (order * Math.PI * width) / (2 * polePitch);
  return x === 0 ? 1 : Math.sin(x) / x;
}
