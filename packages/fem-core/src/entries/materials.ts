/**
 * Closer dealings with materials: H(B) of a curve with its slope and energy, stacks of insulated sheets, and what is
 * wrong with a table before a curve is built of it. What fills a region (`Material`) and how curves are built
 * (`buildBHCurve`) is in the main entry.
 *
 * @module @gapwright/fem-core/materials
 */

export { evaluateCurve, findTableFaults } from '../materials/bh-curve.js';
export { findDemagnetisationFaults } from '../materials/demagnetisation.js';
export type { CurvePoint } from '../materials/monotone-cubic.js';
export { stackedPermeability, stackedTable } from '../materials/stacking.js';
