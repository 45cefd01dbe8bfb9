import { drive, type MeshProgress, probeSteps, type SectionAnswer } from '@gapwright/fem-core';
import {
  checkSection,
  type ReadOptions,
  readSection,
  type SectionProblem,
  type SectionReadResult,
  solverOptions,
  type Warning,
} from '@gapwright/machine-models';
import { stopIfInterrupted } from './surroundings.js';

export interface SectionSolveOptions {
  readonly signal: AbortSignal;
  /** Called after each mesh. */
  readonly onMesh: (progress: MeshProgress) => void;
}

/** What the commands ask of the section models. */
export interface SectionEngine {
  readonly read: (text: string, options: ReadOptions) => SectionReadResult;
  /** Throws what only the drawing shows, without solving, and returns what is doubtful. */
  readonly check: (problem: SectionProblem) => readonly Warning[];
  readonly solve: (problem: SectionProblem, options: SectionSolveOptions) => Promise<SectionAnswer>;
}

export const sectionEngine: SectionEngine = {
  read: readSection,
  check: checkSection,

  solve(problem, { signal, onMesh }) {
    const { section, setup, probes } = problem;
    const steps = probeSteps(section, setup, probes, { ...solverOptions(problem), onMesh });
    const pause = async (): Promise<void> => {
      await new Promise((resolve) => setImmediate(resolve)); // lets an interruption be heard
      stopIfInterrupted(signal);
    };
    return drive(steps, { pause });
  },
};
