/** The one place where the comparisons touch the library's solver: what is timed of ours, by public names. */

import { energiesOf } from '@gapwright/fem-core';
import { assemble, buildSystem, numberUnknowns, placementOf, solveNewton } from '@gapwright/fem-core/equations';
import { nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import type { Analysis, CompiledKernels, Factor } from '@gapwright/fem-core/sparse';
import {
  analyse,
  chooseOrder,
  dissectionOrder,
  factor,
  minimumDegreeOrder,
  multiply,
  solve,
} from '@gapwright/fem-core/sparse';
import type { FieldProblem, LinearProblem } from './systems.js';

/** What a linear solve needs to know, wherever it was made or read. */
export type LinearSystem = Pick<LinearProblem, 'pattern' | 'values' | 'right'>;

export const orderByDegree = ({ pattern }: LinearSystem): Int32Array => minimumDegreeOrder(pattern);

/** Nested dissection by the geometry of the quadratic elements. */
export const orderByDissection = ({ pattern, mesh, unknowns }: LinearProblem): Int32Array =>
  dissectionOrder(pattern, placementOf(mesh, unknowns));

/** The order the library takes for solves of its own. */
export const usualOrder = ({ pattern, mesh, unknowns }: LinearProblem): Int32Array =>
  chooseOrder(pattern, placementOf(mesh, unknowns));

export const analyseOrdered = ({ pattern }: LinearSystem, order?: Int32Array): Analysis => analyse(pattern, order);

/** Factorisation and solution with memory that is used again and again. */
export interface Solver {
  readonly factor: () => void;
  readonly solve: () => void;
  readonly x: Float64Array;
}

export function solverOf({ values, right }: LinearSystem, analysis: Analysis, kernels?: CompiledKernels): Solver {
  const x = new Float64Array(right.length);
  let last: Factor | undefined;
  const refactor = (): Factor => {
    const factored = factor(analysis, values, { reuse: last, kernels });
    if (!('blocks' in factored)) throw new Error(`not positive definite at ${factored.unknown}`);
    last = factored;
    return factored;
  };
  return {
    factor: refactor,
    solve: () => {
      solve(last ?? refactor(), right, x);
    },
    x,
  };
}

/** One analysis, ordering included, then so many factorisations and solutions; returns the solution. */
export function solveTimes(system: LinearSystem, times: number, order?: Int32Array): Float64Array {
  const solver = solverOf(system, analyseOrdered(system, order));
  for (let i = 0; i < times; i++) {
    solver.factor();
    solver.solve();
  }
  return solver.x;
}

/** |b - A x| / |b|, 2-norms. */
export function residualOf({ pattern, values, right }: LinearSystem, x: Float64Array): number {
  const product = multiply(pattern, values, x, new Float64Array(pattern.n));
  return Math.sqrt(product.reduce((sum, value, i) => sum + (right[i] - value) ** 2, 0) / norm2(right));
}

const norm2 = (a: Float64Array): number => a.reduce((sum, value) => sum + value * value, 0);

/** Degree of the quadrature of the reluctivity in the library's elements, for peers to use the same. */
export const LAW_DEGREE = 5;
/** Jacobian and residual at A = height sin(pi x) sin(pi y), on the unit square; the check gives their size. */
export function assemblyOf({ mesh, setup }: FieldProblem, height: number) {
  const system = buildSystem(mesh, setup, numberUnknowns(mesh, setup));
  const { pattern, unknowns } = system;
  const potential = Float64Array.from({ length: nodeCount(mesh) }, (_, node) => {
    const [x, y] = nodePoint(mesh, node);
    return unknowns.unknownOf[node] < 0 ? 0 : height * Math.sin(Math.PI * x) * Math.sin(Math.PI * y);
  });
  const residual = new Float64Array(pattern.n);
  const tangent = new Float64Array(pattern.row.length);
  return {
    run: (): void => assemble(system, potential, residual, tangent),
    /** 2-norm of the residual, and u . K u. */
    check: () => {
      const u = new Float64Array(pattern.n);
      unknowns.unknownOf.forEach((i, node) => {
        if (i >= 0) u[i] = potential[node];
      });
      const product = multiply(pattern, tangent, u, new Float64Array(pattern.n));
      return {
        residual: Math.sqrt(norm2(residual)),
        quadratic: u.reduce((sum, value, i) => sum + value * product[i], 0),
      };
    },
  };
}

/** From the mesh to the potential: unknowns, pattern, ordering, Newton's method. */
export function solveField({ mesh, setup }: FieldProblem, tolerance: number) {
  const system = buildSystem(mesh, setup, numberUnknowns(mesh, setup));
  const { potential, report } = solveNewton(system, { tolerance });
  if (!report.converged) throw new Error(`Newton's method: ${report.failure}`);
  return {
    report,
    energy: (): number => energiesOf({ mesh, setup, potential, report }).energy,
  };
}
