import { placementOf } from '../assembly/placement.js';
import type { System } from '../assembly/system.js';
import type { Analysis } from '../sparse/analysis.js';
import { analyse } from '../sparse/analysis.js';
import type { Factor } from '../sparse/cholesky.js';
import { factor, solve, solveMany } from '../sparse/cholesky.js';
import { chooseOrder } from '../sparse/choose-order.js';
import { solveByConjugateGradients } from '../sparse/conjugate-gradients.js';
import type { SymmetricPattern } from '../sparse/pattern.js';
import type { CoarseLevel } from '../sparse/two-level.js';
import { buildCoarseLevel } from '../sparse/two-level.js';

/** What solves systems with a tangent matrix: its factor, or conjugate gradients where the factor would not fit memory. */
export type Tangent = Factor | IterativeTangent;

/** A tangent matrix for conjugate gradients. */
export interface IterativeTangent {
  /** Of the system. */
  readonly pattern: SymmetricPattern;
  /** Float64Array(entries): lower triangle in the order of the pattern, m/H. */
  readonly values: Float64Array;
  /** Of quadratic elements; undefined of linear ones. */
  readonly level: CoarseLevel | undefined;
}

/** Memory a factorisation may take unless told otherwise, bytes: what 32-bit addresses reach, nearly. */
const MOST_BYTES = 3.9e9;

/**
 * The order that serves this system best, and everything about its factors that depends on the pattern alone: serves all its
 * tangents.
 */
export function analyseSystem(system: System): Analysis {
  return analyse(system.pattern, chooseOrder(system.pattern, placementOf(system.mesh, system.unknowns)));
}

/**
 * Prepares solves with a matrix of the system's pattern.
 *
 * @param values  Float64Array(entries), m/H
 * @param before  a tangent of the same system that is no longer needed: its memory serves this one
 * @param memory  bytes a factor may work in; beyond them conjugate gradients take its place
 * @returns what solves, or why there is nothing to solve with
 */
export function buildTangent(
  system: System,
  analysis: Analysis,
  values: Float64Array,
  before: Tangent | undefined,
  memory = MOST_BYTES,
): Tangent | { readonly failure: string } {
  if (analysis.peakBytes > memory || (before !== undefined && 'level' in before)) {
    return iterative(system, values, before);
  }
  try {
    const reuse = before !== undefined && 'blocks' in before ? before : undefined;
    const factored = factor(analysis, values, { reuse });
    if ('blocks' in factored) return factored;
    return { failure: `the tangent is not positive definite (pivot ${factored.pivot})` };
  } catch (error) {
    if (error instanceof RangeError) return iterative(system, values, undefined); // the host has less memory than asked for
    throw error;
  }
}

function iterative(system: System, values: Float64Array, before: Tangent | undefined): IterativeTangent {
  const { pattern, unknowns, mesh } = system;
  const known = before !== undefined && 'level' in before ? before.level : undefined;
  const level = unknowns.order === 1 ? undefined : (known ?? buildCoarseLevel(pattern, placementOf(mesh, unknowns)));
  return { pattern, values: values.slice(), level };
}

/** Residual to which conjugate gradients bring each system: Newton's method and the error estimates need no more. */
const TOLERANCE = 1e-11;

/** Thrown where a system has no solution to be had. */
export class NoSolution extends Error {
  /** `NoSolution`, also where `instanceof` fails between two copies of the library. */
  override readonly name = 'NoSolution';
}

/** Solves with the tangent for `count` right-hand sides one after another, Float64Array(count n); see `solveTangent`. */
export function solveTangents(tangent: Tangent, b: Float64Array, x: Float64Array, count: number): Float64Array {
  if ('blocks' in tangent) return solveMany(tangent, b, x, count);
  const n = b.length / Math.max(1, count);
  for (let k = 0; k < count; k++) solveTangent(tangent, b.subarray(k * n, (k + 1) * n), x.subarray(k * n, (k + 1) * n));
  return x;
}

/**
 * Solves with the tangent; `b` and `x`, Float64Array(n), may be the same array; `x` is overwritten and returned.
 * @throws NoSolution where conjugate gradients fail, which they do for matrices that are not positive definite
 */
export function solveTangent(tangent: Tangent, b: Float64Array, x: Float64Array): Float64Array {
  if ('blocks' in tangent) return solve(tangent, b, x);
  const { pattern, values, level } = tangent;
  const found = new Float64Array(pattern.n);
  const options = { tolerance: TOLERANCE, ...(level === undefined ? {} : { level }) };
  const { outcome, residual } = solveByConjugateGradients(pattern, values, b, found, options);
  if (outcome !== 'converged' && !(outcome === 'stalled' && residual < ACCEPTABLE)) {
    throw new NoSolution(`conjugate gradients ended ${outcome} at a residual of ${residual}`);
  }
  x.set(found);
  return x;
}

/** Where rounding stops the iteration before, this will do. */
const ACCEPTABLE = 1e-8;
