import { checkProblem, type ProbeOptions } from '@gapwright/fem-core';
import type { Warning } from '../machine.js';
import { drawingWarnings } from './drawing-warnings.js';
import type { SectionProblem } from './read-section.js';

/**
 * Judges what only the drawing shows, as the solver would, without solving: lines that cross, regions outside, sides that do
 * not match, currents without return, forces on bodies without air round them, meshes beyond the limit.
 * @returns what is doubtful
 * @throws InputError with the solver's names as keys, which the reader's `place` turns into places
 */
export function checkSection(problem: SectionProblem): readonly Warning[] {
  const { section, setup, probes } = problem;
  return drawingWarnings(problem, checkProblem(section, setup, probes, solverOptions(problem)));
}

/** What a section asks of the solver beside its probes. */
export function solverOptions({ accuracy, elements, maxTriangles, maxMeshes }: SectionProblem): ProbeOptions {
  return {
    accuracy,
    order: elements === 'linear' ? 1 : 2,
    ...(maxTriangles === undefined ? {} : { maxTriangles }),
    ...(maxMeshes === undefined ? {} : { maxMeshes }),
  };
}
