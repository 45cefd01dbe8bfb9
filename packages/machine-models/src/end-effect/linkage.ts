import type { Machine } from '../machine.js';
import { gaussPoints } from '../rotor/gauss-points.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import type { CoilWindow } from '../winding/coil-window.js';
import { coilWindow, legsFundamental, windowFundamental } from '../winding/coil-window.js';
import { fundamentalOf, gapField } from './gap-field.js';
import type { GapModel } from './gap-model.js';
import { planeFundamental, planeSources } from './plane-field.js';
import { CHORD, poleFaces } from './pole-faces.js';

/** How finely the linkage is worked out. */
export interface Resolution {
  /** Points along a quarter period of the field, as a share of what `stationsFor` takes. */
  readonly stations: number;
  /** Gauss points on a stretch of the radius: `least`, and one more for every `step` gaps of its length. */
  readonly least: number;
  readonly step: number;
  /** Chords of the magnets' arcs, rad. */
  readonly chord: number;
}

/** Within 1e-4 on machines of ordinary proportions; and one that tells how good that is, some 4e-4. */
export const FINE: Resolution = { stations: 1, least: 3, step: 0.5, chord: CHORD };
export const COARSE: Resolution = { stations: 0.75, least: 3, step: 0.8, chord: 1.5 * CHORD };

/** Flux per turn of one coil, the fundamental at its peak, Wb. */
export interface Linkage {
  /** In three dimensions: the whole coil; the slices' straight legs over the magnets' radial length. */
  readonly whole: number;
  readonly legs: number;
  /** By the slices: the legs, the field of the unrolled machine at each radius. */
  readonly plane: number;
}

/**
 * Linkage of one coil with the fundamental of the gap field, both ways:
 *
 *   whole = integral of r B1 S dr over the coil,      B1 in three dimensions, S of all its turns
 *   legs  = integral of r B1 S' dr over the magnets,  S' of the slices' legs
 *   plane = integral of r b1 S' dr over the magnets,  b1 of the machine unrolled at r
 *
 * The last one in u of r = mean + half sin u, which suits round magnets too: their width goes as cos u.
 */
export function measureLinkage(
  machine: Machine,
  model: GapModel,
  { stations, least, step, chord }: Resolution,
): Linkage {
  const { magnets, gap } = machine.rotor;
  const { inner, outer } = magnetReach(magnets);
  const window = coilWindow(machine);
  const ends = stretches(window, inner, outer, gap);
  const field = gapField(poleFaces(machine, model, chord), model, ends[ends.length - 1]);
  const count = Math.ceil(stations * stationsFor(model, magnets.meanRadius));
  let whole = 0;
  let legs = 0;
  for (let i = 0; i + 1 < ends.length; i++) {
    const half = (ends[i + 1] - ends[i]) / 2;
    const { at, weight } = gaussPoints(least + Math.floor((2 * half) / (step * gap)));
    for (let j = 0; j < at.length; j++) {
      const radius = ends[i] + half * (1 + at[j]);
      const onMagnets = radius > inner && radius < outer;
      const turns = windowFundamental(window, machine.rotor.poles, radius);
      if (turns === 0 && !onMagnets) continue;
      const flux = weight[j] * half * radius * fundamentalOf(field, radius, count);
      whole += flux * turns;
      if (onMagnets) legs += flux * legsFundamental(machine, radius);
    }
  }
  return { whole, legs, plane: planeLinkage(machine, model) };
}

/**
 * Points along a quarter period: 8 to 48. Harmonic n falls off by exp(-n k c) over the clearance c between magnets and
 * winding, k = pi/polePitch; the first that the points mistake for the fundamental is 4 points - 1, past exp(-3) then.
 * A winding that nearly fills the gap takes the mean over harmonics at all distances: a twentieth of the gap will do.
 */
export function stationsFor({ poles, face, windingTo }: GapModel, radius: number): number {
  const fall = (poles / (2 * radius)) * Math.max(face - windingTo, face / 10);
  return Math.ceil(Math.min(Math.max(1 / fall, 8), 48) - 1e-9);
}

/** Gauss points in u; the integrand is smooth. */
const PLANE_POINTS = 24;

function planeLinkage(machine: Machine, model: GapModel): number {
  const { inner, outer } = magnetReach(machine.rotor.magnets);
  const { at, weight } = gaussPoints(PLANE_POINTS);
  let sum = 0;
  for (let i = 0; i < at.length; i++) {
    const u = (Math.PI / 2) * at[i];
    const radius = (inner + outer) / 2 + ((outer - inner) / 2) * Math.sin(u);
    const field = planeFundamental(planeSources(machine, model, radius), model, model.poles / (2 * radius));
    sum += weight[i] * Math.cos(u) * radius * field * legsFundamental(machine, radius);
  }
  return (Math.PI / 2) * ((outer - inner) / 2) * sum;
}

/** Stretches shorter than this share of the gap are joined to their neighbours. */
const SHORT = 0.05;

/** Radii between which the integrands are smooth, rising; the ends of the magnets and of the coil are among them. */
function stretches(window: CoilWindow, inner: number, outer: number, gap: number): readonly number[] {
  const { radii } = window;
  const kept = [...new Set([inner, outer, Math.min(inner, radii[0]), Math.max(outer, radii[radii.length - 1])])];
  for (const radius of radii) {
    if (kept.every((one) => Math.abs(one - radius) > SHORT * gap)) kept.push(radius);
  }
  return kept.sort((a, b) => a - b);
}
