/**
 * Sparse symmetric positive definite systems, without any notion of meshes and fields: order, analyse, factor, solve,
 * any number of matrices by one analysis; conjugate gradients where a factor would not fit memory.
 *
 * @module @gapwright/fem-core/sparse
 */

export type { CompiledKernels } from '../kernels/instantiate.js';
export type { Analysis } from '../sparse/analysis.js';
export { analyse } from '../sparse/analysis.js';
export type { Factor, FactorOptions, NotPositive } from '../sparse/cholesky.js';
export { factor, solve, solveMany, unfusedKernels } from '../sparse/cholesky.js';
export { chooseOrder } from '../sparse/choose-order.js';
export type { GradientOptions, GradientReport } from '../sparse/conjugate-gradients.js';
export { solveByConjugateGradients } from '../sparse/conjugate-gradients.js';
export { minimumDegreeOrder } from '../sparse/minimum-degree.js';
export type { Placement } from '../sparse/nested-dissection.js';
export { dissectionOrder } from '../sparse/nested-dissection.js';
export type { SymmetricPattern } from '../sparse/pattern.js';
export { multiply } from '../sparse/pattern.js';
export type { CoarseLevel } from '../sparse/two-level.js';
export { buildCoarseLevel } from '../sparse/two-level.js';
