import type { Machine, Winding } from '../machine.js';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { freeResponse, plates, reactionOfPlates } from './current-layer.js';
import type { CurrentWave } from './current-waves.js';
import { currentWaves } from './current-waves.js';
import { rotorReactions } from './rotor-reaction.js';

/** A figure and its estimated error from the mesh and from what was left out of sums, in its unit. */
export interface Estimated {
  readonly value: number;
  readonly error: number;
}

/** Inductances of one slice, mean over the rotor's position. */
export interface SliceInductance {
  /** m. */
  readonly radius: number;
  /** Of one phase with itself, H per metre of depth, all turns, paths in parallel taken into account. */
  readonly self: Estimated;
  /** Of two phases of one star, mean over the pairs. */
  readonly mutual: Estimated;
  /** self - mutual. */
  readonly phase: Estimated;
  /** Share of `phase` that the current layer has in free space; the rest is what the rotor adds. */
  readonly freeShare: number;
  /**
   * Overlapped windings: linkage of one leg of one turn, H per metre of depth (mean of A over the leg, times its sense), with
   * all legs of a phase at 1 A in alternating sense: its own, and the next of its star (negative for three phases).
   */
  readonly leg?: { readonly self: Estimated; readonly mutual: Estimated };
}

/** A wave whose reaction may bring no more than this share of the self-inductance is taken to have none. */
const NEGLIGIBLE = 5e-5;

/**
 * Inductance of the straight legs where the cylinder of one radius cuts them, from the slice's solved field.
 *
 * The linkage of a phase b by a phase a, per ampere and metre of depth, is the sum over the waves of the currents
 *
 *   (P/t) sum over m of conj(c_bm) c_am G(m/r),   P the circumference, t the winding's thickness,
 *
 * G the mean of A over the winding of a layer of 1 A/m^2: in free space (`freeResponse`) and the rotor's reaction
 * (`rotorReactions`), the magnets without remanence, steel as saturated as the slice's own field leaves it. Turns are spread
 * evenly over the leg's width and the winding's thickness.
 */
export function sliceInductance(machine: Machine, solved: SolvedSlice): SliceInductance {
  const { winding, rotor } = machine;
  const { radius } = solved.answer;
  const thickness = winding.thickness;
  const waves = currentWaves(machine, radius);
  const free = waves.map(({ order }) => freeResponse(order / radius, thickness));
  const bound = waves.map(({ order }) => reactionBound(machine, order / radius));
  const whole = waves.reduce((sum, { self }, i) => sum + self * free[i], 0);
  const wanted = waves.flatMap(({ self }, i) => (self * bound[i] > NEGLIGIBLE * whole ? [i] : []));
  const found = rotorReactions(
    solved,
    wanted.map((i) => waves[i].order),
    rotor.poles,
  );
  const reaction: Estimated[] = bound.map((error) => ({ value: 0, error }));
  wanted.forEach((i, k) => {
    reaction[i] = found[k];
  });
  const perTurn = (2 * Math.PI * radius) / thickness;
  const sumOf = (weight: (wave: CurrentWave) => number, scale: number): Estimated => {
    let [value, error] = [0, 0];
    waves.forEach((wave, i) => {
      value += weight(wave) * (free[i] + reaction[i].value);
      error += Math.abs(weight(wave)) * reaction[i].error;
    });
    return { value: scale * value, error: scale * error };
  };
  const scale = perTurn * turnsSquared(winding);
  const phase = sumOf(({ self, mutual }) => self - mutual, scale);
  const inAir = waves.reduce((sum, { self, mutual }, i) => sum + (self - mutual) * free[i], 0);
  return {
    radius,
    self: sumOf(({ self }) => self, scale),
    mutual: sumOf(({ mutual }) => mutual, scale),
    phase,
    freeShare: (scale * inAir) / phase.value,
    ...(winding.layout === 'overlapped' && {
      leg: {
        self: sumOf(({ self }) => self, perTurn / rotor.poles),
        mutual: sumOf(({ next }) => next, perTurn / rotor.poles),
      },
    }),
  };
}

/** From one turn a leg to all: paths share the current, and each links what its own coils do. */
export const turnsSquared = ({ turns, paths }: Winding): number => (turns / paths) ** 2;

/**
 * What magnets and steel can add to a wave at most: endlessly permeable plates where steel begins, and where magnets do their
 * share (m - 1)/(m + 1) of such plates, m the recoil permeability.
 */
function reactionBound(machine: Machine, k: number): number {
  const { rotor, winding, materials } = machine;
  const { gap, magnets, interpoles } = rotor;
  const names = [magnets.material, ...(interpoles === undefined ? [] : [interpoles.material])];
  const shares = names.map((name) => {
    const material = materials[name];
    return material.kind === 'magnet' ? Math.abs(material.recoil - 1) / (material.recoil + 1) : 0;
  });
  const { up, down } = plates(machine);
  const { thickness } = winding;
  return (
    reactionOfPlates(k, thickness, up, down) + Math.max(...shares) * reactionOfPlates(k, thickness, gap / 2, gap / 2)
  );
}
