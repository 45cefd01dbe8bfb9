import type { Machine, Rotor } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import type { AnnularPlate, RingLoad } from './annular-plate.js';
import { clampStress, plateDeflection } from './annular-plate.js';
import type { Elasticity } from './elasticity.js';
import { elasticityOf } from './elasticity.js';

/** A disc that is a whole plate, bent by the pull. */
export interface BentDisc {
  readonly part: 'disc' | 'keeper';
  readonly plate: AnnularPlate;
  readonly elasticity: Elasticity;
  /** Towards the other disc, under the pull at the undisturbed gap, m: at the outer edge, and the mean over the pull. */
  readonly edge: number;
  readonly overLoad: number;
  /** At the magnets' outer radius, m. */
  readonly atMagnets: number;
  /** Largest bending stress, at the clamp, Pa. */
  readonly stress: number;
}

/** Why a part's bending is not told: a key of the machine file, and a text. */
export interface LeftOut {
  readonly key: string;
  readonly text: string;
}

/**
 * The load of the slices on a disc: each as a ring at its radius with its share of the pull. A plate answers linearly, so
 * the sum over the rings is the slices' own rule of integration applied to the pull times the plate's answer to a ring.
 */
export function ringLoads({ rotor }: Machine, slices: readonly SliceAnswer[]): readonly RingLoad[] {
  return slices.map(({ radius, weight, pull }) => ({ radius, force: rotor.poles * weight * pull }));
}

/**
 * Discs as annular plates clamped at the clamp radius, free at the rim, under the slices' pull: the magnets' own stiffness is
 * not counted. Where the clamp lies within the hole, the plate is taken to go on to the clamp.
 *
 * Interpoles sunk into the disc leave the plate the thickness behind them, taken all over: the safe side. Discs cut through by
 * interpoles are no plates, and ironless ones of unknown stuff: they are left out.
 */
export function bendDiscs(
  machine: Machine,
  slices: readonly SliceAnswer[],
): { readonly discs: readonly BentDisc[]; readonly leftOut: readonly LeftOut[] } {
  const { rotor } = machine;
  const { disc, keeper, arrangement } = rotor;
  const loads = ringLoads(machine, slices);
  const discs: BentDisc[] = [];
  const leftOut: LeftOut[] = [];
  const parts: readonly BentDisc['part'][] =
    arrangement === 'keeper' && keeper !== undefined ? ['disc', 'keeper'] : ['disc'];
  if (disc === undefined) {
    leftOut.push({ key: 'rotor.disc', text: 'what carries the magnets is not described, so its bending is left out' });
    return { discs, leftOut };
  }
  if (disc.clampRadius === undefined) {
    const text =
      'not given, so bending, stress and clearance of the discs are left out; give the radius up to which a hub holds them';
    return { discs, leftOut: [{ key: 'rotor.disc.clamp_radius', text }] };
  }
  for (const part of parts) {
    if (part === 'disc' && rotor.interpoles?.through === true) {
      const text =
        'cut through the disc, what is left of it are separate plates: the bending of whatever carries them is left out';
      leftOut.push({ key: 'rotor.interpoles.depth', text });
      continue;
    }
    const name = part === 'keeper' && keeper !== undefined ? keeper.material : disc.material;
    const elasticity = elasticityOf(name, machine.materials[name]);
    if (elasticity === undefined) {
      leftOut.push({
        key: `rotor.${part}.material`,
        text: `the stiffness of ${name} is not known, so the bending is left out`,
      });
      continue;
    }
    const plate: AnnularPlate = {
      clampRadius: disc.clampRadius,
      outerRadius: disc.outerRadius,
      thickness: part === 'keeper' && keeper !== undefined ? keeper.thickness : wholeThickness(rotor),
      young: elasticity.young,
      poisson: elasticity.poisson,
    };
    discs.push(bendDisc(machine, part, plate, elasticity, loads));
  }
  return { discs, leftOut };
}

function bendDisc(
  { rotor }: Machine,
  part: BentDisc['part'],
  plate: AnnularPlate,
  elasticity: Elasticity,
  loads: readonly RingLoad[],
): BentDisc {
  const total = loads.reduce((sum, { force }) => sum + force, 0);
  const work = loads.reduce((sum, { force, radius }) => sum + force * plateDeflection(plate, loads, radius), 0);
  const { outer } = magnetReach(rotor.magnets);
  return {
    part,
    plate,
    elasticity,
    edge: plateDeflection(plate, loads, plate.outerRadius),
    overLoad: total === 0 ? 0 : work / total,
    atMagnets: plateDeflection(plate, loads, Math.min(outer, plate.outerRadius)),
    stress: clampStress(plate, loads),
  };
}

/** Thickness of the disc behind whatever is sunk into it, m. */
function wholeThickness({ disc, interpoles, magnets }: Rotor): number {
  const sunk = Math.max(0, (interpoles?.depth ?? 0) - magnets.thickness);
  return (disc?.thickness ?? Number.NaN) - sunk;
}
