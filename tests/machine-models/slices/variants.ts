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
  const common = { thickness, meanRadius, material, temperature };
  const magnets = { shape: 'sector', arc, length: 0.055, segments: 1, ...common } as const;
  return { ...machine, rotor: { ...machine.rotor, magnets } };
}

export function ironless(): Machine {
  const machine = hutHydro();
  return { ...machine, rotor: { ...machine.rotor, disc: undefined } };
}

/** Hut hydro with other parts in its rotor. */
export function withRotor(parts: Partial<Machine['rotor']>, machine: Machine = hutHydro()): Machine {
  return { ...machine, rotor: { ...machine.rotor, ...parts } };
}

/** One magnet disc facing a plain one. */
export function keeperHydro(parts: Partial<Machine['rotor']> = {}): Machine {
  return withRotor({ arrangement: 'keeper', keeper: { material: 'plate', thickness: 0.008 }, ...parts });
}

/** So many pieces a pole, with discs or without. */
export function halbachHydro(segments: number, parts: Partial<Machine['rotor']> = {}): Machine {
  const sector = sectorHydro(1);
  if (sector.rotor.magnets.shape !== 'sector') throw new Error('not a sector');
  return withRotor({ magnets: { ...sector.rotor.magnets, segments }, ...parts }, sector);
}

export function roundHydro(diameter = 0.036): Machine {
  const machine = hutHydro();
  const { thickness, meanRadius, material, temperature } = machine.rotor.magnets;
  return withRotor({ magnets: { shape: 'round', diameter, thickness, meanRadius, material, temperature } });
}

/** Hut hydro with interpoles that fill the room or are as wide as said. */
export function interpoled(
  depth: number,
  width: number | 'fill' = 'fill',
  parts: Partial<Machine['rotor']> = {},
): Machine {
  const machine = withRotor(parts);
  const whole = machine.rotor.magnets.thickness + (machine.rotor.disc?.thickness ?? 0);
  const through = machine.rotor.disc !== undefined && depth >= whole;
  return withRotor({ interpoles: { width, depth, through, material: 'magnet_42' } }, machine);
}
