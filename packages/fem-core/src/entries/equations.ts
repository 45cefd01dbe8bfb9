/**
 * The discrete equations, for methods of one's own: unknowns numbered over a mesh, the system with its residual and
 * tangent, Newton's method step by step, and solves with the tangent such as adjoint problems want.
 *
 * @module @gapwright/fem-core/equations
 */

export type { Derivative } from '../assembly/local-equations.js';
export { placementOf } from '../assembly/placement.js';
export type { System } from '../assembly/system.js';
export { assemble, assembleFrozen, buildSystem } from '../assembly/system.js';
export type { Unknowns } from '../assembly/unknowns.js';
export { numberUnknowns, potentialOf } from '../assembly/unknowns.js';
export type { GoalsProgress, SystemProgress } from '../pipeline.js';
export type { NewtonProgress, Solution } from '../solve/newton.js';
export { newtonSteps, solveNewton } from '../solve/newton.js';
export type { IterativeTangent, Tangent } from '../solve/tangent.js';
export { analyseSystem, buildTangent, NoSolution, solveTangent } from '../solve/tangent.js';
