import type { Magnets } from '../machine.js';

/** What a magnet's outline depends on; the input checks have no more when they ask. */
export type MagnetOutline =
  | { readonly shape: 'block'; readonly width: number; readonly length: number; readonly meanRadius: number }
  | { readonly shape: 'sector'; readonly arc: number; readonly length: number; readonly meanRadius: number }
  | { readonly shape: 'round'; readonly diameter: number; readonly meanRadius: number };

/** Radial length of a magnet, m. */
export function magnetLength(magnets: MagnetOutline): number {
  return magnets.shape === 'round' ? magnets.diameter : magnets.length;
}

/** Radii between which the magnets lie, m. */
export function magnetReach(magnets: MagnetOutline): { readonly inner: number; readonly outer: number } {
  const half = magnetLength(magnets) / 2;
  return { inner: magnets.meanRadius - half, outer: magnets.meanRadius + half };
}

/**
 * Width of a magnet along the circumference at a radius, m; 0 beyond the ends of a round one. A round magnet is cut by the
 * cylinder as if that were flat:  2 sqrt((D/2)^2 - (r - meanRadius)^2).
 */
export function magnetWidth(magnets: MagnetOutline, poles: number, radius: number): number {
  switch (magnets.shape) {
    case 'block':
      return magnets.width;
    case 'sector':
      return (magnets.arc * 2 * Math.PI * radius) / poles;
    case 'round':
      return 2 * Math.sqrt(Math.max(0, (magnets.diameter / 2) ** 2 - (radius - magnets.meanRadius) ** 2));
  }
}

/** Face of one magnet, m^2; a sector is the share `arc` of a pole pitch of the ring meanRadius -/+ length/2. */
export function magnetFace(magnets: MagnetOutline, poles: number): number {
  if (magnets.shape === 'round') return (Math.PI / 4) * magnets.diameter ** 2;
  return magnetWidth(magnets, poles, magnets.meanRadius) * magnets.length;
}

/** Pieces a pole is made of; more than one in a Halbach array. */
export function segmentCount(magnets: Magnets): number {
  return magnets.shape === 'sector' ? magnets.segments : 1;
}
