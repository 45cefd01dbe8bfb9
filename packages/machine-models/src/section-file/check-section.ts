import { meshSection, numberUnknowns } from '@gapwright/fem-core';
import type { SectionProblem } from './read-section.js';

/**
 * Judges what only the drawing shows, without solving: lines that cross, regions outside, sides that do not match, currents
 * without return.
 * @throws InputError with the solver's names as keys, which the reader's `place` turns into places
 */
export function checkSection({ section, setup }: SectionProblem): void {
  numberUnknowns(meshSection(section), setup);
}
