/** Axial-flux permanent-magnet machines: machine file -> slices -> fields -> voltage, winding and merit. */

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
export { imagesOfPolePair } from './slices/images.js';
export type { Cuts, PoleSection } from './slices/pole-section.js';
export { buildPoleSection, symmetryCuts } from './slices/pole-section.js';
export type { SliceAnswer } from './slices/slice-answer.js';
export type { SliceOptions, SolvedSlice } from './slices/solve-slice.js';
export { solveSlice } from './slices/solve-slice.js';
export type { Harmonics } from './waves/series.js';
