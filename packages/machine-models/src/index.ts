/**
 * Axial-flux permanent-magnet machines: machine file -> slices -> fields -> voltage, winding and merit. And plane sections
 * of any kind: section file -> field -> answers.
 */

export { formatOf, MACHINE_FORMAT, SECTION_FORMAT } from './input/file-format.js';
export type { ReadOptions, ReadResult } from './input/read-machine.js';
export { readMachine } from './input/read-machine.js';
export type { Machine, Warning, Winding } from './machine.js';
export type { RunStamp } from './results/assemble.js';
export { describeMachine } from './results/assemble.js';
export type {
  EmfResult,
  HarmonicsResult,
  MachineResult,
  SliceResult,
  VoltageResult,
  WindingResult,
} from './results/result.js';
export { checkSection } from './section-file/check-section.js';
export type { SectionStamp } from './section-file/describe-section.js';
export { describeSection } from './section-file/describe-section.js';
export type { SectionProblem, SectionReadResult } from './section-file/read-section.js';
export { readSection } from './section-file/read-section.js';
export type { LineResult, PointResult, ProbeResult, SectionResult } from './section-file/section-result.js';
export { imagesOfPolePair } from './slices/images.js';
export type { Cuts, PoleSection } from './slices/pole-section.js';
export { buildPoleSection, symmetryCuts } from './slices/pole-section.js';
export type { SliceAnswer } from './slices/slice-answer.js';
export type { SliceOptions, SolvedSlice } from './slices/solve-slice.js';
export { solveSlice } from './slices/solve-slice.js';
export type { Harmonics } from './waves/series.js';
