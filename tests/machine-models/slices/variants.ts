import type { Machine } from '../../../packages/machine-models/src/machine.js';
import type { Cuts } from '../../../packages/machine-models/src/slices/pole-section.js';
import { hutHydro } from '../../helpers/machines.js';

export const ALL_CUTS: readonly Cuts[] = [
  { magnetAxis: false, midPlane: false },
  { magnetAxis: true, midPlane: false },
  { magnetAxis: false, midPlane: true },
  { magnetAxis: true, midPlane: true },
];

export function nameOf({ magnetAxis, midPlane }: Cuts): string {
  const planes = [...(magnetAxis ? ['the magnet'] : []), ...(midPlane ? ['the mid-plane'] : [])];
  return planes.length === 0 ? 'nothing' : planes.join(' and ');
}

/** Hut hydro with sector magnets of the same thickness. */
export function sectorHydro(arc: number): Machine {
  const machine = hutHydro();
  const { thickness, meanRadius, material, temperature } = machine.rotor.magnets;
  const magnets = { shape: 'sector', arc, length: 0.055, thickness, meanRadius, material, temperature } as const;
  return { ...machine, rotor: { ...machine.rotor, magnets } };
}

export function ironless(): Machine {
  const machine = hutHydro();
  return { ...machine, rotor: { ...machine.rotor, disc: undefined } };
}
