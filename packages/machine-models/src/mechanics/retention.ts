import { figure } from '../input/format-figure.js';
import type { Machine, Rotor } from '../machine.js';
import { interpoleFace } from '../rotor/interpole-shape.js';
import { magnetFace, magnetReach, segmentCount } from '../rotor/magnet-shape.js';

/** What keeps the magnets from flying off. */
export interface Retention {
  /** The highest speed the machine tells of, rpm: overspeed, or the operating speed where that is faster or alone given. */
  readonly speedRpm: number;
  /** The machine gives an overspeed. */
  readonly atOverspeed: boolean;
  /** kg, of one magnet; of a Halbach array, of one piece. */
  readonly mass: number;
  /** Centrifugal force on one magnet, m w^2 r, N. */
  readonly force: number;
  /** The same of one interpole, where there are some whose material tells its density. */
  readonly interpoleForce?: number;
  /** Shear stress if glue over the magnet's whole face alone held it, Pa. */
  readonly glueShear: number;
  /** Of all magnets and interpoles of one disc, N. */
  readonly discForce: number;
  /** Tension of a band round all magnets of one disc that alone held them, without its own weight:  discForce/(2 pi),  N. */
  readonly bandTension: number;
  readonly texts: readonly string[];
}

/** Glue that holds many times this in a catalogue test is worn by heat, damp and shock down to it, Pa; common practice. */
const GLUE_TRUSTED = 1e6;

/**
 * Centrifugal forces on the magnets. Undefined where the magnets' density is not known.
 *
 * A magnet's mass acts at its centre of mass: the mean radius of blocks and round magnets; of a sector of the angle phi
 * between r1 and r2  (2/3) (r2^3 - r1^3)/(r2^2 - r1^2) sin(phi/2)/(phi/2).
 */
export function describeRetention({ rotor, materials, operation }: Machine): Retention | undefined {
  const { magnets, poles, interpoles } = rotor;
  const density = materials[magnets.material]?.density;
  if (density === undefined) return undefined;
  const { speedRpm: speed, overspeedRpm } = operation;
  const fastest = Math.max(speed, overspeedRpm ?? 0);
  const w = (2 * Math.PI * fastest) / 60;
  const pieces = segmentCount(magnets);
  const face = magnetFace(magnets, poles) / pieces;
  const mass = face * magnets.thickness * density;
  const force = mass * w * w * magnetCentre(rotor);
  const interpoleForce = forceOfInterpole(rotor, materials[interpoles?.material ?? '']?.density, w);
  const discForce = poles * (pieces * force + (interpoleForce ?? 0));
  const glueShear = force / face;
  return {
    speedRpm: fastest,
    atOverspeed: overspeedRpm !== undefined,
    mass,
    force,
    ...(interpoleForce !== undefined && { interpoleForce }),
    glueShear,
    discForce,
    bandTension: discForce / (2 * Math.PI),
    texts: tell(force, glueShear, discForce, fastest),
  };
}

/** Radius of a magnet's centre of mass, m. */
function magnetCentre({ magnets, poles }: Rotor): number {
  if (magnets.shape !== 'sector') return magnets.meanRadius;
  const { inner, outer } = magnetReach(magnets);
  const half = (Math.PI * magnets.arc) / (poles * magnets.segments);
  return ((2 / 3) * (outer ** 3 - inner ** 3) * Math.sin(half)) / ((outer ** 2 - inner ** 2) * half);
}

/** An interpole lies along the main magnets; its centre is taken at their mean radius. */
function forceOfInterpole(
  { interpoles, magnets, poles }: Rotor,
  density: number | undefined,
  w: number,
): number | undefined {
  if (interpoles === undefined || density === undefined) return undefined;
  return density * interpoleFace(interpoles, magnets, poles) * interpoles.depth * w * w * magnets.meanRadius;
}

function tell(force: number, glueShear: number, discForce: number, rpm: number): readonly string[] {
  const worn =
    glueShear > GLUE_TRUSTED ? `, more than the ${GLUE_TRUSTED / 1e6} MPa that worn glue can be trusted with` : '';
  return [
    `at ${figure(rpm)} rpm each magnet pulls outwards with ${figure(force)} N. Glue alone is no retention (it would bear ` +
      `${figure(glueShear / 1e6)} MPa in shear over the magnet's face${worn}); a band round a disc's magnets that held them alone would ` +
      `stand under ${figure(discForce / (2 * Math.PI))} N`,
  ];
}
