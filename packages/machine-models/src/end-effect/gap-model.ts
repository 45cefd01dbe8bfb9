import type { Machine } from '../machine.js';
import { remanenceAt } from '../materials/at-temperature.js';

/**
 * The machine as the end factor sees it, the upper disc alone, y along the shaft from mid-gap: recoil 1, and steel as
 * planes that the field meets at right angles. Of two alike discs the mid-plane of the gap is such a plane too.
 */
export interface GapModel {
  readonly poles: number;
  /** Remanence of the main magnets and of the interpoles (0: none), T. */
  readonly remanence: number;
  readonly interpoleRemanence: number;
  /** Magnets reach from the face to the back, interpoles to their own, no farther than steel behind the magnets, m. */
  readonly face: number;
  readonly back: number;
  readonly interpoleBack: number;
  /** Planes the field meets at right angles, m: behind the magnets; the mid-plane or a keeper's face. */
  readonly behind: number | undefined;
  readonly facing: number | undefined;
  /** What is looked at of the winding, m: all of it, or its upper half where the mid-plane is a plane of symmetry. */
  readonly windingFrom: number;
  readonly windingTo: number;
}

export function gapModel(machine: Machine): GapModel {
  const { rotor, winding } = machine;
  const { magnets, interpoles } = rotor;
  const twin = rotor.arrangement === 'twin';
  const face = rotor.gap / 2;
  const strength = (name: string): number => {
    const material = machine.materials[name];
    return material.kind === 'magnet' ? remanenceAt(material, magnets.temperature) : 0;
  };
  const back = face + magnets.thickness;
  const steel = rotor.disc !== undefined && isSteel(machine, rotor.disc.material);
  const keeper = rotor.keeper !== undefined && isSteel(machine, rotor.keeper.material);
  return {
    poles: rotor.poles,
    remanence: strength(magnets.material),
    interpoleRemanence: interpoles === undefined ? 0 : strength(interpoles.material),
    face,
    back,
    interpoleBack: Math.min(face + (interpoles?.depth ?? 0), steel ? back : Infinity),
    behind: steel ? back : undefined,
    facing: twin ? 0 : keeper ? -face : undefined,
    windingFrom: twin ? 0 : -winding.thickness / 2,
    windingTo: winding.thickness / 2,
  };
}

function isSteel({ materials }: Machine, name: string): boolean {
  const { kind } = materials[name];
  return kind === 'steel' || kind === 'steel-curve';
}
