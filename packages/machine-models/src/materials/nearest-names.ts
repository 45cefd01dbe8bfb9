import { editDistance } from '@gapwright/fem-core/text';

/** A longer name is not compared in full, and longer candidates not at all: the work grows with the length. */
const LONGEST = 40;
/** Nor are candidates beyond this number. */
const MOST = 1000;

/** The three of the known names that `name` was most likely meant to be: those that hold it first, then by slips. */
export function nearestNames(name: string, known: readonly string[]): readonly string[] {
  const wanted = name.slice(0, LONGEST);
  const holds = (candidate: string): number =>
    wanted !== '' && candidate.toLowerCase().includes(wanted.toLowerCase()) ? 0 : 1;
  return known
    .filter((candidate) => candidate.length <= LONGEST)
    .slice(0, MOST)
    .map((candidate) => ({ candidate, holds: holds(candidate), slips: editDistance(wanted, candidate) }))
    .sort((a, b) => a.holds - b.holds || a.slips - b.slips)
    .slice(0, 3)
    .map(({ candidate }) => candidate);
}
