/**
 * The solver held against closed forms, case by case, each with formula, source and bound; orders of convergence; how
 * honest the reported errors are. `gapwright verify` prints it, the tests hold it.
 *
 * @module @gapwright/fem-core/verify
 */

export type { Honesty } from '../verify/honesty.js';
export type { MeasuredOrder } from '../verify/orders.js';
export type { Verification } from '../verify/verification.js';
export { buildVerification } from '../verify/verification.js';
export type { FigureResult } from '../verify/verification-case.js';
