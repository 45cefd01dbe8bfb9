import type { Winding } from '../machine.js';

type Phases = Winding['phases'];

/**
 * Where a coil stands and what it belongs to.
 *
 * A coil of sense +1 adds (right leg - left leg) to its phase, right being the leg at the larger angle: its turns run
 * outwards in the left leg and inwards in the right one, and its EMF is -d/dt of the flux that crosses it along +y.
 */
export interface CoilPlace {
  /** 1, 2, ...: each lags phase 1 as `phaseLags` tells when the rotor turns towards larger angles. */
  readonly phase: number;
  readonly sense: 1 | -1;
  /** Mechanical angle of the coil's axis in radians. */
  readonly axis: number;
}

/**
 * By how much each phase lags phase 1, in belts of 180/phases electrical degrees.
 *
 * 3 and 5 phases are 360/phases degrees apart, phase k + 1 next behind phase k. Phase 2 of two is 90 degrees behind.
 * Six phases are two three-phase stars, each with its own neutral: phases 1, 2, 3 make one, phases 4, 5, 6 the other, 30
 * degrees behind.
 */
const LAGS: Readonly<Record<Phases, readonly number[]>> = {
  2: [0, 1],
  3: [0, 2, 4],
  5: [0, 2, 4, 6, 8],
  6: [0, 4, 8, 1, 5, 9],
};

/** By how much each phase lags phase 1, electrical radians. */
export function phaseLags(phases: Phases): readonly number[] {
  return LAGS[phases].map((belts) => (belts * Math.PI) / phases);
}

/** The phases that are joined in one neutral, star by star, in sequence, as indices of `phaseLags`. */
export const STARS: Readonly<Record<Phases, readonly (readonly number[])[]>> = {
  2: [[0, 1]],
  3: [[0, 1, 2]],
  5: [[0, 1, 2, 3, 4]],
  6: [
    [0, 1, 2],
    [3, 4, 5],
  ],
};

type Belt = Pick<CoilPlace, 'phase' | 'sense'>;

/**
 * What each belt of 180/phases electrical degrees belongs to, from the one centred on 0: the phase that lags by that
 * angle, or the one half a turn from it, reversed. Three phases, capital for sense +1: A c B a C b.
 */
function belts(phases: Phases): readonly Belt[] {
  const count = 2 * phases;
  return Array.from({ length: count }, (_, belt): Belt => {
    const ahead = LAGS[phases].indexOf(belt);
    return ahead >= 0
      ? { phase: ahead + 1, sense: 1 }
      : { phase: LAGS[phases].indexOf((belt + phases) % count) + 1, sense: -1 };
  });
}

/**
 * Coils of a machine in order round the shaft, by layout.
 *
 * @param poles even
 */
export function coilPlaces(
  { layout, coils, phases }: Pick<Winding, 'layout' | 'coils' | 'phases'>,
  poles: number,
): readonly CoilPlace[] {
  return layout === 'concentrated' ? starOfSlots(coils, poles, phases) : overlappedCoils(poles, phases);
}

/**
 * Star of slots for coils that stand side by side, each used once in full.
 *
 * Coil k stands at the electrical angle 2 pi (poles/2) k / coils and takes the belt of 180/phases degrees it falls into;
 * belts are half open, (-90/phases, +90/phases] degrees about their centre, decided in whole numbers so that no rounding
 * moves a coil that stands on the border.
 *
 * Method: N. Bianchi and M. Dai Pre, "Use of the star of slots in designing fractional-slot single-layer synchronous
 * motors", IEE Proc. Electr. Power Appl., 2006.
 */
export function starOfSlots(coils: number, poles: number, phases: Phases): readonly CoilPlace[] {
  const belt = belts(phases);
  return Array.from({ length: coils }, (_, k) => {
    const turnOverCoils = ((poles / 2) * k) % coils; // electrical angle / 360 deg x coils
    const index = Math.ceil((4 * phases * turnOverCoils - coils) / (2 * coils));
    return { ...belt[index % belt.length], axis: (2 * Math.PI * k) / coils };
  });
}

/**
 * Coils one pole pitch wide, one leg per pole and phase: phases x poles legs, leg j at 180 j/phases electrical degrees,
 * in the sequence of the belts (three phases: A c B a C b, capital: outwards). With m phases, legs j and j + m with
 * j = 0 ... m - 1, 2m ... 3m - 1, ... are the left and right leg of a coil.
 */
export function overlappedCoils(poles: number, phases: Phases): readonly CoilPlace[] {
  const belt = belts(phases);
  const legPitch = (2 * Math.PI) / (phases * poles);
  return Array.from({ length: (phases * poles) / 2 }, (_, i) => {
    const leftLeg = i + phases * Math.floor(i / phases);
    return { ...belt[leftLeg % belt.length], axis: (leftLeg + phases / 2) * legPitch };
  });
}

/**
 * Whether single coils side by side give equal EMFs at the right angles: they stand in N = coils / gcd(coils, poles/2)
 * electrical directions, and N / `directionsNeeded` is whole. (Three phases: Bianchi and Dai Pre, as above.)
 *
 * Enough, for turning the star by one phase (even phases: by one belt) then turns directions into directions and belts
 * into belts. Needed by any way of sharing out the coils: the phases' sums are sums of N-th roots of unity, so where
 * one turned by 360/phases degrees (90, 30) is another, that turn lies among the rational combinations of these roots;
 * and a root of unity of odd order m lies there only if m divides N, one of order 4 or 12 only if that divides N.
 */
export function isBalanced(coils: number, poles: number, phases: Phases): boolean {
  return coils % (directionsNeeded(phases) * greatestCommonDivisor(coils, poles / 2)) === 0;
}

/** Balanced coils stand in a multiple of so many electrical directions: phases if odd, 2 phases if even. */
function directionsNeeded(phases: Phases): number {
  return phases % 2 === 0 ? 2 * phases : phases;
}

/** The numbers of coils next below and above that are balanced on these poles; of them, those there are. */
export function nearestCoils(coils: number, poles: number, phases: Phases): readonly number[] {
  // every multiple of this is balanced: the search ends
  const step = directionsNeeded(phases) * (poles / 2);
  return nearest(coils, 1, step, (count) => isBalanced(count, poles, phases));
}

/** The numbers of poles next below and above on which these coils are balanced; of them, those there are. */
export function nearestPoles(coils: number, poles: number, phases: Phases): readonly number[] {
  // coils more pole pairs turn every coil by whole turns more: the search ends
  return nearest(poles, 2, 2 * coils, (count) => isBalanced(coils, count, phases));
}

/** What fits next below and above `from`, in steps of `step`, no farther up than `reach`. */
function nearest(from: number, step: number, reach: number, fits: (value: number) => boolean): readonly number[] {
  const found: number[] = [];
  for (let value = from - step; value > 0 && found.length === 0; value -= step) if (fits(value)) found.push(value);
  const below = found.length;
  for (let value = from + step; value <= from + reach && found.length === below; value += step) {
    if (fits(value)) found.push(value);
  }
  return found;
}

/**
 * Whether the coils of every phase can be shared among `paths` parallel paths of equal EMF, size and phase, so that no
 * current circulates between them with the load open.
 */
export function pathsAreAlike(places: readonly CoilPlace[], poles: number, paths: number): boolean {
  const grid = 12 * places.length; // every electrical angle of either layout is a whole number of 1/grid turns
  const inStep = new Map<string, number>();
  for (const { phase, sense, axis } of places) {
    const turns = (axis * poles) / (4 * Math.PI) + (sense < 0 ? 0.5 : 0);
    const key = `${phase}:${Math.round(turns * grid) % grid}`;
    inStep.set(key, (inStep.get(key) ?? 0) + 1);
  }
  return [...inStep.values()].every((count) => count % paths === 0);
}

function greatestCommonDivisor(a: number, b: number): number {
  return b === 0 ? a : greatestCommonDivisor(b, a % b);
}
