import { figure, millimetres } from '../input/format-figure.js';
import type { Machine, Warning } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import type { RingLoad } from './annular-plate.js';
import type { Approach, PullAtGap } from './approach.js';
import { jackingCurve, pullSlope } from './approach.js';
import type { BentDisc, LeftOut } from './bend-discs.js';
import { bendDiscs, ringLoads } from './bend-discs.js';
import { elasticityOf } from './elasticity.js';
import { describeResin, type Resin } from './resin.js';
import { describeRetention, type Retention } from './retention.js';
import type { TurningStress } from './rotating-disc.js';
import { carriedStress, turningStress } from './rotating-disc.js';

/** Forces, bending and stress of the turning parts. */
export interface Mechanics {
  /** Pull of one disc towards the other at the machine's gap, N. */
  readonly pull: number;
  /** Pull while the discs come together, from far to the machine's gap; undefined without an `Approach`. */
  readonly jacking?: readonly PullAtGap[];
  readonly stiffness?: Stiffness;
  /** Each kind of disc that is a plate: `disc` stands for both where both carry magnets. */
  readonly discs: readonly BentDisc[];
  /** Undefined where not all discs' bending is known. */
  readonly clearance?: Clearance;
  readonly turning?: DiscTurning;
  readonly retention?: Retention;
  readonly resin: Resin;
  readonly warnings: readonly Warning[];
  /** Figures that lack their input, and why. */
  readonly leftOut: readonly LeftOut[];
  /** What was taken for what the machine does not tell. */
  readonly notes: readonly string[];
}

/**
 * What a change of the gap does to the pull. A coreless winding is no steel: pushed aside it feels no pull, and discs joined
 * on one shaft that move together along it keep theirs. It is a change of the gap itself, on one side or all round, that
 * is unstable.
 */
export interface Stiffness {
  /** dF/dg of the whole disc, N/m; negative: the closer, the stronger. */
  readonly axial: number;
  /** Moment that tilts a disc further, per radian of tilt against the other, Nm:  -(1/2) sum poles weight r^2 dpull/dg. */
  readonly tilting: number;
}

/** Room between winding and magnets once both discs have bent, m. */
export interface Clearance {
  /** Each side, discs flat: (gap - winding thickness)/2. */
  readonly flat: number;
  /** Factor by which the bending grows as it closes the gap; infinite where the discs snap together. */
  readonly growth: number;
  /** The least of both sides, at the discs' rims. */
  readonly left: number;
}

/** Stress of the disc from turning, at the machine's fastest, Pa. */
export interface DiscTurning {
  readonly speedRpm: number;
  /** Of the bare disc, both edges free. */
  readonly bare: TurningStress;
  /** Mean hoop stress that magnets and interpoles add where the disc alone holds them; undefined without their density. */
  readonly magnets?: number;
}

/** Of the clearance: bending beyond this share of it is told. */
const NOTICEABLE = 0.1;
/** Of the thickness: beyond it the theory of small deflections overstates, and the plate is too soft anyway. */
const LARGE = 0.5;
/** Of the strength: stress beyond it is told. */
const BEARABLE = 0.5;

/**
 * Mechanics of a solved machine. Pure: `approach` comes from `solveApproach`, which solves slices at other gaps.
 *
 * Bending closes the gap and raises the pull: with the relative slope s = -dF/dg / F and the discs' deflections averaged over
 * the pull, e1 + e2, all grow by 1/(1 - s (e1 + e2)), to first order.
 */
export function describeMechanics(machine: Machine, slices: readonly SliceAnswer[], approach?: Approach): Mechanics {
  const loads = ringLoads(machine, slices);
  const pull = loads.reduce((sum, { force }) => sum + force, 0);
  const slope = approach === undefined ? undefined : pullSlope(machine, approach);
  const stiffness = slope === undefined ? undefined : stiffnessOf(loads, slope);
  const { discs, leftOut } = bendDiscs(machine, slices);
  const clearance = clearanceLeft(machine, discs, slope);
  const retention = describeRetention(machine);
  const turning = turnDisc(machine, retention);
  const left = [...leftOut, ...retentionLeftOut(machine, retention)];
  return {
    pull,
    ...(approach !== undefined && { jacking: jackingCurve(machine, slices, approach) }),
    ...(stiffness !== undefined && { stiffness }),
    discs,
    ...(clearance !== undefined && { clearance }),
    ...(turning !== undefined && { turning }),
    ...(retention !== undefined && { retention }),
    resin: describeResin(machine),
    warnings: findWarnings(machine, discs, clearance, turning),
    leftOut: left,
    notes: [...assumptions(machine, discs), ...(stiffness === undefined ? [] : [asideNote(machine, stiffness)])],
  };
}

function stiffnessOf(loads: readonly RingLoad[], slope: number): Stiffness {
  const total = (share: (load: RingLoad) => number): number => loads.reduce((sum, load) => sum + share(load), 0);
  return {
    axial: slope * total(({ force }) => force),
    tilting: (-slope / 2) * total(({ force, radius }) => force * radius * radius),
  };
}

/** A change of the gap to tell the stiffness by, m. */
const TENTH = 1e-4;

function asideNote({ rotor }: Machine, { axial, tilting }: Stiffness): string {
  const rim = rotor.disc?.outerRadius ?? magnetReach(rotor.magnets).outer;
  return (
    'the coreless winding is no steel: pushed aside it adds nothing to the pull on either disc. A gap smaller by 0.1 mm adds ' +
    `${figure(-axial * TENTH)} N; discs tilted so that their rims are 0.1 mm closer on one side and 0.1 mm wider on the other are tilted ` +
    `further by ${figure((tilting * TENTH) / rim)} Nm`
  );
}

function clearanceLeft(
  { rotor, winding }: Machine,
  discs: readonly BentDisc[],
  slope: number | undefined,
): Clearance | undefined {
  const wanted = rotor.arrangement === 'twin' ? 1 : 2;
  if (discs.length < wanted) return undefined;
  const both = rotor.arrangement === 'twin' ? [discs[0], discs[0]] : discs;
  const closing = (slope === undefined ? 0 : -slope) * both.reduce((sum, { overLoad }) => sum + overLoad, 0);
  const growth = closing < 1 ? 1 / (1 - closing) : Infinity;
  const flat = (rotor.gap - winding.thickness) / 2;
  return { flat, growth, left: flat - growth * Math.max(...both.map(({ edge }) => edge)) };
}

/** Undefined where the disc is none, is cut to pieces, or has no density or elasticity to go by. */
function turnDisc(machine: Machine, retention: Retention | undefined): DiscTurning | undefined {
  const { rotor, materials, operation } = machine;
  const { disc, interpoles } = rotor;
  if (disc === undefined || interpoles?.through === true) return undefined;
  const density = materials[disc.material]?.density;
  const poisson = elasticityOf(disc.material, materials[disc.material])?.poisson;
  if (density === undefined || poisson === undefined) return undefined;
  const speedRpm = Math.max(operation.speedRpm, operation.overspeedRpm ?? 0);
  const { innerRadius, outerRadius } = disc;
  return {
    speedRpm,
    bare: turningStress({ innerRadius, outerRadius, density, poisson }, (2 * Math.PI * speedRpm) / 60),
    ...(retention !== undefined && { magnets: carriedStress(retention.discForce, disc) }),
  };
}

function retentionLeftOut(machine: Machine, retention: Retention | undefined): readonly LeftOut[] {
  if (retention === undefined) {
    const key = `materials.${machine.rotor.magnets.material}.density`;
    return [{ key, text: 'not given, so the centrifugal force on the magnets is left out' }];
  }
  if (retention.atOverspeed) return [];
  const text = `not given; the centrifugal force on the magnets is told at the operating speed, ${figure(retention.speedRpm)} rpm`;
  return [{ key: 'operation.overspeed', text }];
}

function assumptions({ rotor }: Machine, discs: readonly BentDisc[]): readonly string[] {
  const { disc, interpoles, magnets } = rotor;
  const notes = [
    ...new Set(
      discs.map(
        ({ plate, elasticity }) =>
          `E = ${figure(plate.young / 1e9)} GPa, Poisson's ratio ${plate.poisson}: ${elasticity.source}`,
      ),
    ),
  ];
  if (disc?.clampRadius !== undefined && disc.clampRadius < disc.innerRadius && discs.length > 0) {
    notes.push(
      `the disc begins at ${millimetres(disc.innerRadius)} and is held at ${millimetres(disc.clampRadius)}; it bends as if the plate ` +
        'went on between, as thick as it is',
    );
  }
  if (interpoles !== undefined && interpoles.depth > magnets.thickness && discs.some(({ part }) => part === 'disc')) {
    notes.push('the disc bends as if all of it were as thin as behind its interpoles: the safe side');
  }
  return notes;
}

function findWarnings(
  machine: Machine,
  discs: readonly BentDisc[],
  clearance: Clearance | undefined,
  turning: DiscTurning | undefined,
): readonly Warning[] {
  const warnings: Warning[] = [];
  for (const bent of discs) {
    warnings.push(...bendingWarnings(machine, bent, clearance));
    const { hole = 0 } = bent.part === 'disc' ? (turning?.bare ?? {}) : {};
    const stress = bent.stress + hole + (bent.part === 'disc' ? (turning?.magnets ?? 0) : 0);
    if (stress <= BEARABLE * bent.elasticity.strength) continue;
    const text =
      `bending and turning put up to ${figure(stress / 1e6)} MPa on the ${bent.part}, of the ` +
      `${figure(bent.elasticity.strength / 1e6)} MPa that it may stand (${bent.elasticity.source})`;
    warnings.push({ key: `rotor.${bent.part}.thickness`, text });
  }
  return warnings;
}

function bendingWarnings(
  machine: Machine,
  { part, edge, plate }: BentDisc,
  clearance: Clearance | undefined,
): readonly Warning[] {
  const key = `rotor.${part}.thickness`;
  const growth = clearance?.growth ?? 1;
  const flat = clearance?.flat ?? (machine.rotor.gap - machine.winding.thickness) / 2;
  const warnings: Warning[] = [];
  if (growth === Infinity) {
    warnings.push({ key, text: 'the pull grows faster than the discs stiffen: they bend until they touch' });
  } else if (growth * edge >= flat) {
    const text = `the ${part}'s rim bends by ${millimetres(growth * edge)} and rubs: the clearance is ${millimetres(flat)}`;
    warnings.push({ key, text });
  } else if (growth * edge > NOTICEABLE * flat) {
    const text = `the ${part}'s rim bends by ${millimetres(growth * edge)}, more than a tenth of the clearance of ${millimetres(flat)}`;
    warnings.push({ key, text });
  }
  if (edge > LARGE * plate.thickness) {
    const text =
      `the ${part} bends by more than half its thickness of ${millimetres(plate.thickness)}: small-deflection theory ends there, ` +
      'the true figure is smaller';
    warnings.push({ key, text });
  }
  return warnings;
}
