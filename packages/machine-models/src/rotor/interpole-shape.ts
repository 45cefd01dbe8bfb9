import type { Interpoles } from '../machine.js';
import type { MagnetOutline } from './magnet-shape.js';
import { magnetFace, magnetLength, magnetReach, magnetWidth } from './magnet-shape.js';

/** Room between two main magnets at a radius, m. */
export function roomBetween(magnets: MagnetOutline, poles: number, radius: number): number {
  return (2 * Math.PI * radius) / poles - magnetWidth(magnets, poles, radius);
}

/** Width of an interpole along the circumference at a radius, m. */
export function interpoleWidth(
  { width }: Pick<Interpoles, 'width'>,
  magnets: MagnetOutline,
  poles: number,
  radius: number,
): number {
  return width === 'fill' ? roomBetween(magnets, poles, radius) : width;
}

/** Face of one interpole over the main magnets' radial length, m^2. */
export function interpoleFace({ width }: Pick<Interpoles, 'width'>, magnets: MagnetOutline, poles: number): number {
  const length = magnetLength(magnets);
  if (width !== 'fill') return width * length;
  return (2 * Math.PI * magnets.meanRadius * length) / poles - magnetFace(magnets, poles);
}

/** The least room between two main magnets anywhere along them, and the radius where it is, m. */
export function leastRoom(magnets: MagnetOutline, poles: number): { readonly room: number; readonly radius: number } {
  const { inner, outer } = magnetReach(magnets);
  const steps = magnets.shape === 'round' ? 64 : 1; // blocks and sectors: linear in the radius, so one end has it
  let least = { room: Infinity, radius: inner };
  for (let i = 0; i <= steps; i++) {
    const radius = inner + ((outer - inner) * i) / steps;
    const room = roomBetween(magnets, poles, radius);
    if (room < least.room) least = { room, radius };
  }
  return least;
}
