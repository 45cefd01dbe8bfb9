import type { Demagnetisation } from '../demagnetisation/demagnetisation.js';
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

/** Working point and margins; left out where they are not known. */
export function describeMargin(found: Demagnetisation | undefined): Partial<MachineResult['magnets']> {
  const rest = found?.atRest;
  if (found === undefined || rest === undefined) return {};
  const margins = found.magnets.flatMap(({ worst }) => (worst.margin === undefined ? [] : [worst.margin]));
  const weakest = found.magnets.find(({ worst }) => worst.margin === Math.min(...margins));
  return {
    working_B_min_T: rest.b,
    ...(rest.margin !== undefined && { demagnetisation_margin: rest.margin }),
    ...(weakest?.worst.margin !== undefined && {
      demagnetisation_margin_short: weakest.worst.margin,
      worst_region: weakest.region,
    }),
  };
}
