import type { Machine } from '../machine.js';
import { copperResistivity } from '../winding/copper.js';
import type { Strand } from './strand-loss.js';
import { strandLossDensity, strandOf } from './strand-loss.js';
import type { EddyState } from './winding-eddies.js';
import { copperInField } from './winding-eddies.js';
import type { WindingField } from './winding-field.js';
import { waveSquares } from './winding-field.js';

/** Strands in hand to try, over those there are now; one solid wire besides. */
const TIMES = [0.25, 0.5, 1, 2, 4];

/** Round wire is looked for within this of the section wanted; metric sizes lie some 12 % apart. */
const SECTION_TOLERANCE = 0.08;

/** A turn made up in another way of about the same copper. */
export interface StrandChoice {
  readonly strands: number;
  readonly strand: Strand;
  readonly present: boolean;
  /** Copper section over the present one; the resistance goes as one over it. */
  readonly section: number;
  /** At the same currents and temperature, W. */
  readonly copperLoss: number;
  readonly eddyLoss: number;
}

/**
 * What fewer or more strands would do, by rising number of strands, the present one among them. Thinner wire has more enamel
 * on it: whether it still fits is not looked at.
 *
 * @param copperLoss of the present winding in the same state, W
 * @param sold       bare diameters of round wire to choose from, m
 */
export function strandChoices(
  machine: Pick<Machine, 'rotor' | 'winding'>,
  fields: readonly WindingField[],
  { speedRpm, temperature, endShare = 1 }: EddyState,
  copperLoss: number,
  sold: readonly number[],
): readonly StrandChoice[] {
  const { rotor, winding } = machine;
  const { wire } = winding;
  const w = (Math.PI * speedRpm * rotor.poles) / 60;
  const squares = fields.map(waveSquares);
  const choice = (strands: number, strand: Strand, section: number, present: boolean): StrandChoice => ({
    strands,
    strand,
    present,
    section,
    copperLoss: copperLoss / section,
    eddyLoss:
      section *
      endShare *
      copperInField(machine, fields, (i) => strandLossDensity(strand, squares[i], w, copperResistivity(temperature))),
  });
  const counts = new Set([1, ...TIMES.map((times) => Math.round(times * wire.strands))]);
  const others = [...counts].flatMap((strands) => {
    if (strands < 1 || (strands === wire.strands && wire.diameter !== undefined)) return [];
    const wanted = (wire.strands * wire.strandArea) / strands;
    const diameter = nearestRound(sold, wanted);
    const section = ((Math.PI / 4) * diameter ** 2) / wanted;
    if (!(Math.abs(section - 1) <= SECTION_TOLERANCE)) return [];
    return [choice(strands, { kind: 'round', diameter }, section, false)];
  });
  return [...others, choice(wire.strands, strandOf(wire), 1, true)].sort((a, b) => a.strands - b.strands);
}

/** The diameter (m) whose section is nearest to the wanted one, by ratio; NaN where there is none at all. */
function nearestRound(sold: readonly number[], section: number): number {
  const off = (diameter: number): number => Math.abs(Math.log(((Math.PI / 4) * diameter ** 2) / section));
  return sold.reduce((best, diameter) => (off(diameter) < off(best) ? diameter : best), sold[0] ?? Number.NaN);
}
