/** The one place where the comparisons touch the library's solver: what is timed of ours, by public names. */
import type { Analysis, Factor, SymmetricPattern } from '@gapwright/fem-core';
import * as library from '@gapwright/fem-core';
import {
  analyse,
  assemble,
  buildSystem,
  cornerCount,
  energiesOf,
  factor,
  minimumDegreeOrder,
  multiply,
  nodeCount,
  nodePoint,
  numberUnknowns,
  solve,
  solveNewton,
} from '@gapwright/fem-core';
import type { FieldProblem, LinearProblem } from './systems.js';

/** What a linear solve needs to know, wherever it was made or read. */
export type LinearSystem = Pick<LinearProblem, 'pattern' | 'values' | 'right'>;

export const orderByDegree = ({ pattern }: LinearSystem): Int32Array => minimumDegreeOrder(pattern);

/** Where the unknowns lie, and between which unknowns those of the edges' middles; as the dissection wants it. */
interface Placement {
  readonly points: Float64Array;
  readonly ends: Int32Array;
}
/** Not among the public names yet: the rows that need it say so until it is. */
const { dissectionOrder } = library as unknown as {
  readonly dissectionOrder?: (pattern: SymmetricPattern, placement: Placement) => Int32Array;
};

/** Nested dissection by the geometry of the quadratic elements; undefined as long as the library offers none. */
export function orderByDissection(problem: LinearProblem): Int32Array | undefined {
  return dissectionOrder?.(problem.pattern, placementOf(problem));
}

function placementOf({ mesh, unknowns }: LinearProblem): Placement {
  const corners = cornerCount(mesh);
  const { count, unknownOf } = unknowns;
  const points = new Float64Array(2 * count);
  const ends = new Int32Array(2 * count);
  for (let node = 0; node < nodeCount(mesh); node++) {
    const i = unknownOf[node];
    if (i < 0) continue;
    points.set(nodePoint(mesh, node), 2 * i);
    for (const k of [0, 1]) ends[2 * i + k] = node < corners ? i : unknownOf[mesh.edges[2 * (node - corners) + k]];
  }
  return { points, ends };
}

/** The ordering for a pattern that serves several factorisations; undefined leaves the choice to the library. */
export const orderForReuse = (problem: LinearProblem): Int32Array | undefined =>
  problem.pattern.n < DISSECTION_PAYS ? undefined : orderByDissection(problem);
const DISSECTION_PAYS = 20_000;

export const analyseOrdered = ({ pattern }: LinearSystem, order?: Int32Array): Analysis => analyse(pattern, order);

/** Factorisation and solution with memory that is used again and again. */
export interface Solver {
  readonly factor: () => void;
  readonly solve: () => void;
  readonly x: Float64Array;
}

export function solverOf({ values, right }: LinearSystem, analysis: Analysis): Solver {
  const x = new Float64Array(right.length);
  let last: Factor | undefined;
  const refactor = (): Factor => {
    const factored = factor(analysis, values, { reuse: last });
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
