/**
 * A closer look at a solved field: samples for integrals of one's own, statistics by region (peak, mean square, what is
 * exceeded in a share of the area), magnets past their knee, field lines at equal flux steps. Values at places, means,
 * energies and forces are in the main entry.
 *
 * @module @gapwright/fem-core/field
 */

export type { FieldSample } from '../field/integrals.js';
export { forEachSample } from '../field/integrals.js';
export type { Spot } from '../field/locate.js';
export type { KneeReport } from '../field/past-knee.js';
export { pastKnee } from '../field/past-knee.js';
export type { FieldStatistics } from '../field/statistics.js';
export { exceededIn, fieldStatistics } from '../field/statistics.js';
export type { Trace } from '../io/contours.js';
export type { FieldLines } from '../io/field-lines.js';
export { fieldLines } from '../io/field-lines.js';
export { colourScaleEnd } from '../io/svg-picture.js';
