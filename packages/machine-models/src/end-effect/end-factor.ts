import type { Machine, Warning } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import type { GapModel } from './gap-model.js';
import { gapModel } from './gap-model.js';
import type { Linkage } from './linkage.js';
import { COARSE, FINE, measureLinkage } from './linkage.js';
import type { Mirrors } from './plate-mirror.js';
import { plateMirrors } from './plate-mirror.js';

/** What the third dimension makes of the slices' EMF. */
export interface EndFactor {
  /** EMF of the whole coil, end turns and all, in three dimensions, over that of the slices; of the fundamentals. */
  readonly endFactor: number;
  /** The same for straight legs over the magnets' radial length alone. */
  readonly endFactorLegs: number;
  /** Half width of the band about `endFactor` for what the model leaves out, relative. */
  readonly band: number;
  /** Bound of the numerical error of `endFactor`, relative. */
  readonly relErr: number;
  readonly warnings: readonly Warning[];
}

/**
 * The end factor: linkage of one coil in three dimensions over that of the slices, both under the same assumptions,
 * recoil 1 and steel of endless permeability or none, so that what these leave out nearly cancels.
 *
 * Three dimensions: all magnets at their real places round the shaft as evenly magnetised bodies, the field of their
 * charged faces in closed form, steel by images in endless planes; the coil with all its turns (`coilWindow`). Slices:
 * the unrolled machine at each radius, straight legs along the magnets' radial length (`measureLinkage`). In steel
 * discs interpoles count as deep as the magnets at most.
 *
 * Steel that is thin, saturated or of low permeability mirrors the field by a share only (`plateMirrors`): the factor
 * then lies so far between those with planes and without.
 *
 * Curvature is in it. The other orders of the EMF take the same factor.
 *
 * @param discB  of the slices, T: how far the discs saturate
 */
export function computeEndFactor(machine: Machine, discB?: number): EndFactor {
  const model = gapModel(machine);
  const fine = measureLinkage(machine, model, FINE);
  const coarse = measureLinkage(machine, model, COARSE);
  const left = leftOut(machine, model, fine, factorOf(coarse));
  const leaking = leakage(machine, model, plateMirrors(machine, discB), coarse);
  return {
    endFactor: factorOf(fine) * (1 + leaking.whole),
    endFactorLegs: (fine.legs / fine.plane) * (1 + leaking.legs),
    band: left.rims + left.recoil + left.interpoles + left.coil + leaking.band,
    relErr: Math.abs(factorOf(coarse) / factorOf(fine) - 1) + SUMMATION,
    warnings: warningsOf(machine, model, fine, left),
  };
}

/** What imperfect mirrors change of the factors, relative, and the band that this leaves. */
interface Leakage {
  readonly whole: number;
  readonly legs: number;
  readonly band: number;
}

/** Plates that mirror more than all but this share of the field are taken to mirror all of it. */
const PERFECT = 0.01;

function leakage(machine: Machine, model: GapModel, mirrors: Mirrors, coarse: Linkage): Leakage {
  const missing = [
    { lost: model.behind === undefined ? 0 : 1 - mirrors.disc, without: { ...model, behind: undefined } },
    { lost: machine.rotor.keeper === undefined ? 0 : 1 - mirrors.keeper, without: { ...model, facing: undefined } },
  ].filter(({ lost }) => lost > PERFECT);
  let [whole, legs, band] = [0, 0, 0];
  for (const { lost, without } of missing) {
    const bare = measureLinkage(machine, without, COARSE);
    const change = factorOf(bare) / factorOf(coarse) - 1;
    whole += lost * change;
    legs += lost * (bare.legs / bare.plane / (coarse.legs / coarse.plane) - 1);
    // Halfway between plane and nothing the share itself is least certain.
    band += Math.min(lost, 1 - lost) * Math.abs(change);
  }
  return { whole, legs, band };
}

const factorOf = ({ whole, plane }: Linkage): number => whole / plane;

/** Far faces by their moments, images left out, and what FINE and COARSE may have in common. */
const SUMMATION = 1e-4;

/** Shares of the band, relative, one for each thing the model leaves out. */
interface LeftOut {
  readonly rims: number;
  readonly recoil: number;
  readonly interpoles: number;
  readonly coil: number;
}

/**
 * Discs that end raise the factor: by at most 0.047 (1 - endFactorLegs) exp(-1.3 K o) at either end, o what the disc
 * goes on beyond the magnets, K = sqrt(k^2 + (pi/P)^2) how fast the field falls off there between planes P apart.
 * Recoil m in the magnets but not beyond their ends raises it by at most 0.41 (m - 1)(1 - endFactorLegs). Both by
 * finite differences on straight rows of magnets of eight proportions (gap 8 to 24 mm, magnets 18 to 58 mm long, discs
 * up to a gap beyond them, m 1.05 and 1.2).
 */
const RIM = 0.06;
const RIM_FALL = 1.3;
const RECOIL = 0.5;

/** The turns' real places, the end bundles' above all, and steel of finite permeability; a judgement. */
const COIL = { concentrated: 0.01, overlapped: 0.015 } as const;

function leftOut(machine: Machine, model: GapModel, fine: Linkage, coarseFactor: number): LeftOut {
  const { magnets, interpoles } = machine.rotor;
  const material = machine.materials[magnets.material];
  const recoil = material.kind === 'magnet' ? material.recoil : 1;
  const change = (other: GapModel): number =>
    Math.abs(factorOf(measureLinkage(machine, other, COARSE)) / coarseFactor - 1);
  const lost = Math.abs(1 - fine.legs / fine.plane);
  let beyond = 0;
  // Interpoles go on behind the magnets: as much again as they do beside them. Through the disc: its plates are not at
  // one potential, so something between the plane and none.
  if (reachBehind(machine, model)) beyond = change({ ...model, interpoleRemanence: 0 });
  if (interpoles?.through === true && model.behind !== undefined) beyond += change({ ...model, behind: undefined });
  return {
    rims: lost * rimShares(machine, model).reduce((sum, share) => sum + share, 0),
    recoil: lost * RECOIL * Math.abs(recoil - 1),
    interpoles: beyond,
    coil: COIL[machine.winding.layout],
  };
}

/** Of the inner and of the outer rim. */
function rimShares({ rotor }: Machine, { poles, behind, facing }: GapModel): readonly [inner: number, outer: number] {
  const { disc, magnets } = rotor;
  if (disc === undefined || behind === undefined) return [0, 0];
  const { inner, outer } = magnetReach(magnets);
  const fall = Math.hypot(poles / (2 * magnets.meanRadius), Math.PI / (behind - (facing ?? 0)));
  const share = (overhang: number): number => RIM * Math.exp(-RIM_FALL * fall * Math.max(0, overhang));
  return [share(inner - disc.innerRadius), share(disc.outerRadius - outer)];
}

/** Interpoles that go on in the disc, where the model ends them. */
function reachBehind({ rotor: { interpoles, magnets } }: Machine, { behind }: GapModel): boolean {
  return interpoles !== undefined && behind !== undefined && interpoles.depth > magnets.thickness * (1 + 1e-9);
}

/** Rims that widen the band by more than this are worth a word. */
const RIM_TOLD = 0.005;
/** A factor below this is no correction any more. */
const LOW = 0.75;

function warningsOf(machine: Machine, model: GapModel, fine: Linkage, left: LeftOut): Warning[] {
  const { rotor } = machine;
  const { inner } = magnetReach(rotor.magnets);
  const percent = (share: number): string => `${(100 * share).toFixed(1)} %`;
  const warnings: Warning[] = [];
  if (left.rims > RIM_TOLD) {
    const [atInner, atOuter] = rimShares(machine, model);
    const key = atOuter > atInner ? 'rotor.disc.outer_radius' : 'rotor.disc.inner_radius';
    warnings.push({
      key,
      text:
        `the disc ends close to the magnets' ends, and the end factor takes it as endless: its band is wider by ` +
        percent(left.rims),
    });
  }
  if (reachBehind(machine, model)) {
    const how = rotor.interpoles?.through === true ? 'go through the disc' : 'reach into the disc';
    warnings.push({
      key: 'rotor.interpoles',
      text:
        `they ${how}; the end factor takes them as deep as the magnets, which widens its band by ` +
        percent(left.interpoles),
    });
  }
  const polePitch = (2 * Math.PI * inner) / rotor.poles;
  if (polePitch < rotor.gap) {
    warnings.push({
      key: 'rotor.poles',
      text:
        `at the magnets' inner radius the pole pitch is ${(1000 * polePitch).toFixed(1)} mm, less than the gap: ` +
        'little field crosses there, and the end factor, that of the fundamental, fits the other harmonics badly',
    });
  }
  if (fine.whole / fine.plane < LOW) {
    warnings.push({
      key: 'emf.end_factor',
      text:
        `${percent(1 - fine.whole / fine.plane)} of the slices' EMF is lost at the ends: too much for a correction; ` +
        'take the EMF as a rough guide',
    });
  }
  return warnings;
}
