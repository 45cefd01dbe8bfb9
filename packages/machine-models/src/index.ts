/**
 * Axial-flux permanent-magnet machines: machine file -> slices -> fields -> voltage, winding and merit. And plane sections
 * of any kind: section file -> field -> answers.
 */

export { formatOf, MACHINE_FORMAT, SECTION_FORMAT } from './input/file-format.js';
export type { ReadOptions, ReadResult } from './input/read-machine.js';
export { readMachine } from './input/read-machine.js';
export type { MaterialsReadResult } from './input/read-materials.js';
export { readMaterials } from './input/read-materials.js';
export { pathCirculation, pathEmfs } from './losses/circulation.js';
export type { StrandChoice } from './losses/strand-choices.js';
export { strandChoices } from './losses/strand-choices.js';
export type { WindingField } from './losses/winding-field.js';
export { windingField } from './losses/winding-field.js';
export type { LibraryMaterial, Machine, Warning, Winding } from './machine.js';
export type { DemagnetisationRows, Magnet } from './materials/at-temperature.js';
export {
  coercivityAt,
  demagnetisationAt,
  kneeAt,
  lostAt,
  remanenceAt,
  temperatureWarning,
} from './materials/at-temperature.js';
export type { CurveColumns, MagnetAtResult, MaterialResult } from './materials/describe-material.js';
export { curveColumns, magnetFigures, materialFigures } from './materials/describe-material.js';
export type { MaterialGroup } from './materials/library.js';
export { MATERIAL_GROUPS } from './materials/library.js';
export { nearestNames } from './materials/nearest-names.js';
export { sampleCurve } from './materials/steel-figures.js';
export type { Findings, RunStamp } from './results/assemble.js';
export { describeMachine } from './results/assemble.js';
export type {
  EmfResult,
  HarmonicsResult,
  LoadResult,
  LoadRow,
  MachineResult,
  SliceResult,
  VoltageResult,
  WindingResult,
} from './results/result.js';
export { checkSection, solverOptions } from './section-file/check-section.js';
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
export type { SolvedSlices } from './solve-machine.js';
export { findAll, sliceSteps } from './solve-machine.js';
export type { Harmonics } from './waves/series.js';
export type { ChooserInput, WindingChoice } from './winding-chooser/chooser.js';
export { chooseWinding } from './winding-chooser/chooser.js';
