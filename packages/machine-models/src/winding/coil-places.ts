import type { Winding } from '../machine.js';

/**
 * Where a coil stands and what it belongs to.
 *
 * A coil of sense +1 adds (right leg - left leg) to its phase, right being the leg at the larger angle: its turns run
 * outwards in the left leg and inwards in the right one, and its EMF is -d/dt of the flux that crosses it along +y.
 */
export interface CoilPlace {
  /** 1, 2, 3: phase 2 lags phase 1 by 120 electrical degrees when the rotor turns towards larger angles. */
  readonly phase: number;
  readonly sense: 1 | -1;
  /** Mechanical angle of the coil's axis in radians. */
  readonly axis: number;
}

/** What each belt of 60 electrical degrees belongs to, from the one centred on 0: A c B a C b. */
const BELTS: readonly { readonly phase: number; readonly sense: 1 | -1 }[] = [
  { phase: 1, sense: 1 },
  { phase: 3, sense: -1 },
  { phase: 2, sense: 1 },
  { phase: 1, sense: -1 },
  { phase: 3, sense: 1 },
  { phase: 2, sense: -1 },
];

/**
 * Coils of a machine in order round the shaft, by layout.
 *
 * @param poles even
 */
export function coilPlaces(winding: Pick<Winding, 'layout' | 'coils'>, poles: number): readonly CoilPlace[] {
  return winding.layout === 'concentrated' ? starOfSlots(winding.coils, poles) : overlappedCoils(poles);
}

/**
 * Three-phase star of slots for coils that stand side by side, each used once in full.
 *
 * Coil k stands at the electrical angle 2 pi (poles/2) k / coils and takes the belt of 60 degrees it falls into; belts
 * are half open, (-30, +30] degrees about their centre, decided in whole numbers so that no rounding moves a coil that
 * stands on the border.
 *
 * Method: N. Bianchi and M. Dai Pre, "Use of the star of slots in designing fractional-slot single-layer synchronous
 * motors", IEE Proc. Electr. Power Appl., 2006.
 */
export function starOfSlots(coils: number, poles: number): readonly CoilPlace[] {
  return Array.from({ length: coils }, (_, k) => {
    const turnOverCoils = ((poles / 2) * k) % coils; // electrical angle / 360 deg x coils
    const belt = Math.ceil((12 * turnOverCoils - coils) / (2 * coils));
    return { ...BELTS[belt % 6], axis: (2 * Math.PI * k) / coils };
  });
}

/**
 * Coils one pole pitch wide, one leg per pole and phase: 3 poles legs, leg j at 60 j electrical degrees, in the sequence
 * A c B a C b (capital: outwards). Legs j and j + 3 with j = 0, 1, 2, 6, 7, 8, ... are the left and right leg of a coil.
 */
export function overlappedCoils(poles: number): readonly CoilPlace[] {
  const legPitch = (2 * Math.PI) / (3 * poles);
  return Array.from({ length: (3 * poles) / 2 }, (_, i) => {
    const leftLeg = i + 3 * Math.floor(i / 3);
    return { ...BELTS[leftLeg % 6], axis: (leftLeg + 1.5) * legPitch };
  });
}

/**
 * Whether single coils side by side give three equal EMFs 120 degrees apart: coils / (3 gcd(coils, poles/2)) is whole.
 * (Bianchi and Dai Pre, as above.)
 */
export function isBalanced(coils: number, poles: number): boolean {
  return coils % (3 * greatestCommonDivisor(coils, poles / 2)) === 0;
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
