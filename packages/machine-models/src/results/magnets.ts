import type { Machine } from '../machine.js';
import { coercivityAt, remanenceAt } from '../materials/at-temperature.js';
import type { MachineResult, MagnetResult } from './result.js';

/** `magnets` of the results: what the magnets are at their temperature. */
export function describeMagnets(machine: Machine): MachineResult['magnets'] {
  const { magnets, interpoles } = machine.rotor;
  const other = interpoles !== undefined && interpoles.material !== magnets.material;
  return {
    ...atTemperature(machine, magnets.material),
    ...(other && { interpoles: atTemperature(machine, interpoles.material) }),
  };
}

function atTemperature({ rotor, materials }: Machine, name: string): MagnetResult {
  const { temperature } = rotor.magnets;
  const material = materials[name];
  if (material?.kind !== 'magnet') throw new Error(`${name} is no magnet`); // the checks see to it
  const coercivity = coercivityAt(material, temperature);
  return {
    material: name,
    temperature_C: temperature,
    remanence_T: remanenceAt(material, temperature),
    ...(coercivity !== undefined && { coercivity_intrinsic_A_per_m: coercivity }),
  };
}
