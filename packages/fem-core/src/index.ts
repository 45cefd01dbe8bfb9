/**
 * Plane magnetostatic fields by finite elements. Data flows one way: section -> mesh -> system -> field -> answer.
 *
 * This is the main entry: draw a section, fill it, solve it, read the field. What lies below has entries of its own, by
 * subject: `@gapwright/fem-core/materials`, `/mesh`, `/field`, `/goals`, `/equations`, `/sparse`, `/text`, `/verify`.
 *
 * SI units throughout; B = (dA/dy, -dA/dx), z out of the page.
 *
 * @module @gapwright/fem-core
 */

// A section: what is drawn.

export type { Point, Region, Section, Shape, SideChain, SizeAt } from './geometry/section.js';

// Its setup: what fills the regions and binds the sides.

export type { EdgeCondition, Setup } from './assembly/setup.js';
export { MU0 } from './base/constants.js';
export type { BHCurve } from './materials/bh-curve.js';
export { buildBHCurve } from './materials/bh-curve.js';
export type { DemagnetisationCurve } from './materials/demagnetisation.js';
export { buildDemagnetisationCurve } from './materials/demagnetisation.js';
export type { Direction } from './materials/direction.js';
export type { Material } from './materials/material.js';

// Solving: at once, or step by step with progress and an end on demand.

export type { Cancel, DriveOptions, Steps } from './base/steps.js';
export { drive, finish } from './base/steps.js';
export type { MeshProgress, SolveProgress } from './pipeline.js';
export { solveSection } from './pipeline.js';
export type { Answer, PlaceError, Probe } from './probes/probe.js';
export type { ProbeOptions, SectionAnswer } from './probes/solve-probes.js';
export { checkProblem, probeSteps, solveProbes } from './probes/solve-probes.js';
export type { NewtonOptions, SolveReport } from './solve/newton.js';

// What a solved field tells.

export type { Field } from './field/field.js';
export type { Force } from './field/force.js';
export { forceOn } from './field/force.js';
export type { LineHarmonics } from './field/harmonics.js';
export { lineHarmonics } from './field/harmonics.js';
export type { Energies, RegionMeans, TriangleMeans } from './field/integrals.js';
export { energiesOf, meanOver, triangleMeans } from './field/integrals.js';
export type { Locator } from './field/locate.js';
export { buildLocator } from './field/locate.js';
export { fieldBuffers } from './field/transfer.js';
export type { FieldValue } from './field/values.js';
export { fluxBetween, valueAt, valuesAlong } from './field/values.js';
export type { Coil, InductanceMatrix, Inductances } from './probes/inductance.js';
export { inductancesAt } from './probes/inductance.js';

// Pictures and files, as text.

export type { VtuArray, VtuGrid } from './io/read-vtu.js';
export { readVtu } from './io/read-vtu.js';
export type { PictureCopy, PictureData, PictureOptions } from './io/svg-picture.js';
export { drawField } from './io/svg-picture.js';
export type { VtuData } from './io/vtu.js';
export { writeVtu } from './io/vtu.js';

// Errors: bad input throws one InputError with every fault found.

export type { Fault, Place } from './base/fault.js';
export { formatFault, InputError } from './base/fault.js';
