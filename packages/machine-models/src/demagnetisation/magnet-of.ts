import type { Machine } from '../machine.js';
import type { Magnet } from '../materials/at-temperature.js';

/** A magnet's material, with its name. */
export interface NamedMagnet {
  readonly name: string;
  readonly magnet: Magnet;
}

/** What a magnet of a slice is made of, by its region; without one, the main magnets. */
export function magnetOf({ rotor, materials }: Machine, region = ''): NamedMagnet {
  const { interpoles, magnets } = rotor;
  const name = interpoles !== undefined && region.includes('interpole') ? interpoles.material : magnets.material;
  const magnet = materials[name];
  if (magnet?.kind !== 'magnet') throw new Error(`${name} is no magnet`); // the checks see to it
  return { name, magnet };
}
