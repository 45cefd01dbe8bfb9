import { fundamentalOf, gapField } from '../end-effect/gap-field.js';
import { gapModel } from '../end-effect/gap-model.js';
import { COARSE, stationsFor } from '../end-effect/linkage.js';
import { planeFundamental, planeSources } from '../end-effect/plane-field.js';
import { poleFaces } from '../end-effect/pole-faces.js';
import type { Machine } from '../machine.js';
import { gaussPoints } from '../rotor/gauss-points.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import type { CoilWindow } from '../winding/coil-window.js';
import { coilWindow } from '../winding/coil-window.js';
import { legConductor, legWidthAt } from './leg-conductor.js';

/**
 * What the third dimension makes of the strands' eddy loss: the square of the fundamental of By over all copper of a coil,
 * end turns and all, in three dimensions, over the same of the slices (legs over the magnets' radial length, field of the
 * unrolled machine), both under the assumptions of the end factor (recoil 1, endless permeability):
 *
 *   share = integral of B1^2 c dr over the coil / integral of b1^2 c' dr over the magnets,
 *
 * c and c' the length of conductor per length of radius, a turn. The field falls towards the magnets' ends, which lessens the
 * loss; the ends' turns, slanting or lying along the circumference, are more copper per radius, which adds to it. All
 * orders, and the field along the circumference, take the same share. The radial component of the field, some of it where the
 * magnets end, is left out. Derived here.
 */
export function endShare(machine: Machine): number {
  const { rotor } = machine;
  const model = gapModel(machine);
  const { inner, outer } = magnetReach(rotor.magnets);
  const window = coilWindow(machine);
  const limits = [...new Set([inner, outer, ...window.radii])].sort((a, b) => a - b);
  const field = gapField(poleFaces(machine, model, COARSE.chord), model, limits[limits.length - 1]);
  const stations = Math.ceil(COARSE.stations * stationsFor(model, rotor.magnets.meanRadius));
  const whole = integrate(limits, STEP * rotor.gap, (radius) => {
    const turns = conductorAt(machine, window, radius);
    return turns === 0 ? 0 : turns * fundamentalOf(field, radius, stations) ** 2;
  });
  // Round magnets have no width at their ends: the square of b1 falls there like the radius itself, so stretches will do.
  const plane = integrate([inner, outer], STEP * rotor.gap, (radius) => {
    const b = planeFundamental(planeSources(machine, model, radius), model, rotor.poles / (2 * radius));
    return b * b * legConductor(machine, radius);
  });
  return plane === 0 ? 1 : whole / plane;
}

/** Gauss points every so many gaps of the radius. */
const STEP = 0.5;

/** Integral over the stretches between the limits, rising; 3 points and one more a step. */
function integrate(limits: readonly number[], step: number, value: (radius: number) => number): number {
  let sum = 0;
  for (let i = 0; i + 1 < limits.length; i++) {
    const half = (limits[i + 1] - limits[i]) / 2;
    const { at, weight } = gaussPoints(3 + Math.floor((2 * half) / step));
    at.forEach((x, j) => {
      sum += weight[j] * half * value(limits[i] + half * (1 + x));
    });
  }
  return sum;
}

/**
 * Length of conductor per length of radius, a turn: where turns lie, they lie one leg's width to all, whichever way they go,
 * so it is the arc on which some but not all go round, over the leg's width.
 */
export function conductorAt(machine: Machine, { profile }: CoilWindow, radius: number): number {
  const { angle, share } = profile(radius);
  let arc = 0;
  for (let i = 0; i + 1 < angle.length; i++) {
    const [from, to] = [share[i], share[i + 1]];
    if (from > 0 && from + to < 2) arc += angle[i + 1] - angle[i];
  }
  if (share[0] < 1) arc += angle[0]; // W holds its first value up to there
  return (2 * radius * arc) / legWidthAt(machine, radius);
}
