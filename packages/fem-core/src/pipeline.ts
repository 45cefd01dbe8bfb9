import type { Setup } from './assembly/setup.js';
import type { System } from './assembly/system.js';
import { buildSystem } from './assembly/system.js';
import type { Unknowns } from './assembly/unknowns.js';
import { numberUnknowns } from './assembly/unknowns.js';
import { globalNode, shapeValues } from './elements/six-node.js';
import type { ErrorEstimate } from './estimate/goal-error.js';
import { estimateGoalErrors } from './estimate/goal-error.js';
import { wantedSizes } from './estimate/wanted-sizes.js';
import type { Field } from './field/field.js';
import type { Functional } from './field/functionals.js';
import { applyFunctional } from './field/functionals.js';
import { buildLocator } from './field/locate.js';
import type { Section } from './geometry/section.js';
import type { Mesh } from './mesh/mesh.js';
import { nodeCount, nodePoint, triangleCount } from './mesh/mesh.js';
import { meshSection, refineMesh } from './mesh/mesh-section.js';
import { DEFAULT_LIMITS } from './mesh/refine.js';
import type { NewtonOptions } from './solve/newton.js';
import { solveNewton } from './solve/newton.js';
import type { Factor } from './sparse/cholesky.js';

/** A field with what is needed to go on from it. */
export interface SolvedField {
  readonly field: Field;
  readonly system: System;
  /** Factor of the tangent at the solution; undefined where the solve failed before the first. */
  readonly factor: Factor | undefined;
}

/**
 * From mesh to field. `setup` says what fills each region and binds each side, by the names the section gave them.
 * @throws InputError for setups that do not fit the section; a solve that does not converge is told in `field.report`
 */
export function solveOnMesh(mesh: Mesh, setup: Setup, options: NewtonOptions = {}): SolvedField {
  return solveFrom(undefined, mesh, setup, options);
}

/** The same, Newton's method starting from the field on an earlier mesh where there is one. */
function solveFrom(before: Field | undefined, mesh: Mesh, setup: Setup, options: NewtonOptions): SolvedField {
  const unknowns = numberUnknowns(mesh, setup);
  const system = buildSystem(mesh, setup, unknowns);
  const start = before === undefined ? {} : { start: carryOver(before, mesh, unknowns) };
  const { potential, report, factor } = solveNewton(system, { ...options, ...start });
  return { field: { mesh, setup, potential, report }, system, factor };
}

/** From section to field on one mesh, as fine as the section's `maxEdge` wishes ask. */
export function solveSection(section: Section, setup: Setup, options: NewtonOptions = {}): Field {
  return solveOnMesh(meshSection(section), setup, options).field;
}

/** An answer that is wanted accurate: a functional of A, linear, or linearised about the field at hand. */
export interface Goal {
  readonly name: string;
  readonly functional: (field: Field) => Functional;
  /** The answer itself; the functional applied to A where absent. */
  readonly value?: (field: Field) => number;
}

export interface AdaptiveOptions {
  readonly goals: readonly Goal[];
  /**
   * Weight of each goal's error bound in the relative error that steers the mesh, from the goals' values. The usual choice
   * is 1/|value|; of several harmonics, 1/|the first|.
   */
  readonly weights: (values: readonly number[]) => readonly number[];
  /** Wanted sum of weight x bound. */
  readonly accuracy: number;
  readonly maxMeshes?: number;
  readonly maxTriangles?: number;
  readonly newton?: NewtonOptions;
  /** Called after each mesh is solved. */
  readonly onMesh?: (progress: { readonly mesh: number; readonly triangles: number; readonly error: number }) => void;
}

export interface AdaptiveSolution {
  readonly field: Field;
  readonly estimate: ErrorEstimate;
  readonly values: readonly number[];
  /** Estimated bound of each value's error, in its unit. */
  readonly bounds: readonly number[];
  /** Sum of weight x bound. */
  readonly error: number;
  /** The wanted accuracy was met. */
  readonly accurate: boolean;
  readonly meshes: number;
  /** Newton steps over all meshes. */
  readonly newtonSteps: number;
}

/**
 * Solves, estimates, refines where the goals' errors come from, until the wanted accuracy is met, or a limit is.
 * Where Newton's method does not converge it stops at once; `field.report` tells.
 */
export function solveAdaptively(section: Section, setup: Setup, options: AdaptiveOptions): AdaptiveSolution {
  const { maxMeshes = 12, maxTriangles = 200_000 } = options;
  const limits = { ...DEFAULT_LIMITS, maxTriangles: RUNAWAY * maxTriangles };
  let mesh = meshSection(section, limits);
  let newtonSteps = 0;
  let before: Field | undefined;
  for (let meshes = 1; ; meshes++) {
    const { field, system, factor } = solveFrom(before, mesh, setup, options.newton ?? {});
    newtonSteps += field.report.steps;
    const functionals = options.goals.map((goal) => goal.functional(field));
    const values = options.goals.map(
      (goal, k) => goal.value?.(field) ?? applyFunctional(functionals[k], field.potential),
    );
    if (factor === undefined) {
      const none = {
        goals: [],
        bounds: values.map(() => Infinity),
        energy: Infinity,
        recovered: new Float64Array(12 * triangleCount(mesh)),
      };
      return {
        field,
        estimate: none,
        values,
        bounds: none.bounds,
        error: Infinity,
        accurate: false,
        meshes,
        newtonSteps,
      };
    }
    const estimate = estimateGoalErrors(system, field, factor, functionals);
    const weights = options.weights(values);
    const error = estimate.bounds.reduce((sum, bound, k) => sum + weighed(weights[k], bound), 0);
    options.onMesh?.({ mesh: meshes, triangles: triangleCount(mesh), error });
    const accurate = field.report.converged && error <= options.accuracy; // the estimate is of a solved field
    const stuck = meshes >= maxMeshes || triangleCount(mesh) >= maxTriangles || !field.report.converged;
    if (accurate || stuck) {
      return { field, estimate, values, bounds: estimate.bounds, error, accurate, meshes, newtonSteps };
    }
    const shares = new Float64Array(triangleCount(mesh));
    estimate.goals.forEach((share, k) => {
      for (let t = 0; t < shares.length; t++) shares[t] += weighed(weights[k], share[t]);
    });
    const most = Math.min(maxTriangles, GROWTH * triangleCount(mesh));
    mesh = refineMesh(mesh, wantedSizes(mesh, shares, AIM * options.accuracy, most), limits);
    before = field;
  }
}

/** No error is none under any weight: 1/|value| is infinite where there are no sources and so no field. */
const weighed = (weight: number, error: number): number => (error === 0 ? 0 : weight * error);

/** Share of the wanted error the next mesh aims at: near singular corners errors fall slower than `wantedSizes` supposes. */
const AIM = 0.6;

/** A mesh this many times over the limit is not the outcome of refinement but of a drawing with details far too fine. */
const RUNAWAY = 2;

/** A mesh grows this many times at most: what a coarse mesh says of its errors is not to be followed much further. */
const GROWTH = 8;

/** Unknowns on a new mesh of the same section, from the potential on the old one. */
function carryOver(field: Field, mesh: Mesh, unknowns: Unknowns): Float64Array {
  const locator = buildLocator(field.mesh);
  const u = new Float64Array(unknowns.count);
  const shapes = new Float64Array(6);
  for (let node = 0; node < nodeCount(mesh); node++) {
    const i = unknowns.unknownOf[node];
    const spot = i < 0 ? undefined : locator.find(...nodePoint(mesh, node));
    if (spot === undefined) continue;
    shapeValues(spot.xi, spot.eta, shapes);
    let a = 0;
    for (let k = 0; k < 6; k++) a += shapes[k] * field.potential[globalNode(field.mesh, spot.triangle, k)];
    u[i] = unknowns.sign[node] * a;
  }
  return u;
}
