/**
 * Wanted quantities of one's own: linear functionals of A (a potential, fluxes, weighted integrals, stress), the
 * adaptive solution that makes them accurate, and the two parts of its error estimate, recovered gradients and dual-
 * weighted residuals. `solveProbes` of the main entry does this for the usual answers.
 *
 * @module @gapwright/fem-core/goals
 */

export type { ErrorEstimate } from '../estimate/goal-error.js';
export { estimateGoalErrors, smoothParts } from '../estimate/goal-error.js';
export type { RecoveredGradient } from '../estimate/recovery.js';
export { recoverGradients } from '../estimate/recovery.js';
export { stressFunctional, stressThrough } from '../field/force.js';
export type { Functional } from '../field/functionals.js';
export { applyFunctional, pointPotential, weightedFlux, weightedIntegral } from '../field/functionals.js';
export type { AdaptiveOptions, AdaptiveSolution, Goal, GoalAt } from '../pipeline.js';
export { adaptiveSteps, solveAdaptively } from '../pipeline.js';
