import type { Disc, LibraryMaterial, Machine, Magnets } from '../machine.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import { copperMass } from '../winding/turn.js';
import { relative } from './error-bounds.js';
import type { MachineResult } from './result.js';

/** Pull of one disc towards the other over the magnets' radial length:  poles x sum(weight x pull), N. */
export function describePull(machine: Machine, slices: readonly SliceAnswer[]): MachineResult['mechanical'] {
  const { poles } = machine.rotor;
  let pull = 0;
  let bound = 0;
  for (const slice of slices) {
    pull += poles * slice.weight * slice.pull;
    bound += poles * Math.abs(slice.weight * slice.pull) * slice.pullRelErr;
  }
  return { disc_pull_N: pull, disc_pull_N_rel_err: relative(bound, pull) };
}

/**
 * Masses of the active parts: magnets of all magnet discs, bare copper, both steel discs (plain rings, holes and hubs
 * left out). What has no density in its material, or no steel, is left out.
 */
export function describeMasses(machine: Machine): MachineResult['masses'] {
  const { rotor, winding, materials } = machine;
  const magnetDiscs = rotor.arrangement === 'twin' ? 2 : 1;
  const magnetDensity = density(materials, rotor.magnets.material);
  const steelDensity = rotor.disc && density(materials, rotor.disc.material);
  return {
    ...(magnetDensity !== undefined && {
      magnets_kg: magnetDiscs * rotor.poles * magnetVolume(rotor.magnets, rotor.poles) * magnetDensity,
    }),
    copper_kg: copperMass(winding, rotor.poles),
    ...(rotor.disc && steelDensity !== undefined && { steel_kg: 2 * discVolume(rotor.disc) * steelDensity }),
  };
}

/** One magnet, m^3; a sector is the share `arc` of a pole pitch of the ring meanRadius -/+ length/2. */
function magnetVolume(magnets: Magnets, poles: number): number {
  const meanWidth =
    magnets.shape === 'block' ? magnets.width : (magnets.arc * 2 * Math.PI * magnets.meanRadius) / poles;
  return meanWidth * magnets.length * magnets.thickness;
}

function discVolume({ innerRadius, outerRadius, thickness }: Disc): number {
  return Math.PI * (outerRadius ** 2 - innerRadius ** 2) * thickness;
}

function density(materials: Readonly<Record<string, LibraryMaterial>>, name: string): number | undefined {
  return materials[name]?.density;
}
