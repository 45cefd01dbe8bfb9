import type { Analysis } from './analysis.js';
import { analyse } from './analysis.js';
import { factor, solve } from './cholesky.js';
import { chooseOrder } from './choose-order.js';
import type { Placement } from './nested-dissection.js';
import type { SymmetricPattern } from './pattern.js';
import { multiply, solveLower, solveUpper } from './pattern.js';
import type { Preconditioner } from './preconditioner.js';

/** The corners of quadratic elements as a coarse level: what depends on the pattern alone and serves all matrices on it. */
export interface CoarseLevel {
  /** Which unknowns are corners, and between which corners the others lie. */
  readonly spread: Spread;
  /** Of the matrix of the corners alone. */
  readonly analysis: Analysis;
}

/**
 * The coarse level of a pattern of quadratic elements.
 * @param placement  with `ends`; the coarse order makes use of the points
 */
export function buildCoarseLevel(pattern: SymmetricPattern, placement: Placement): CoarseLevel {
  const spread = spreadOf(pattern.n, placement);
  const coarse = coarsePattern(pattern, spread);
  const points = new Float64Array(2 * coarse.n);
  for (let i = 0; i < pattern.n; i++) {
    if (spread.corner[i] === 1) points.set(placement.points.subarray(2 * i, 2 * i + 2), 2 * spread.ends[2 * i]);
  }
  return { spread, analysis: analyse(coarse, chooseOrder(coarse, { points })) };
}

/**
 * Two-level preconditioner for quadratic elements, symmetric: a sweep of Gauss and Seidel forward, an exact solve for the
 * fields that are linear in each triangle, a sweep backward.
 *
 *   z = S r,  z += P (P^T A P)^-1 P^T (r - A z),  z += S^T (r - A z),   S = (D + L)^-1,  A = L + D + L^T
 *
 * P: a corner keeps its value, a middle takes the mean of its ends. What is quadratic and vanishes at the corners couples
 * over a triangle or two only, whatever the mesh or the materials: so the number of steps depends on the shapes of the
 * triangles, not on their number nor on the contrast (Yserentant, On the multi-level splitting of finite element spaces,
 * 1986; Xu, Iterative methods by space decomposition and subspace correction, 1992).
 *
 * @returns undefined where the matrix is found not positive definite
 */
export function twoLevelPreconditioner(
  pattern: SymmetricPattern,
  values: Float64Array,
  { spread, analysis }: CoarseLevel,
): Preconditioner | undefined {
  const { n, start } = pattern;
  for (let j = 0; j < n; j++) if (!(values[start[j]] > 0)) return undefined;
  const coarse = analysis.pattern;
  const factored = factor(analysis, coarseValues(pattern, values, spread, coarse));
  if ('pivot' in factored) return undefined;
  const residual = new Float64Array(n);
  const correction = new Float64Array(n);
  const product = new Float64Array(n);
  const coarseRight = new Float64Array(coarse.n);
  const coarseCorrection = new Float64Array(coarse.n);
  return (r, z) => {
    z.set(r);
    solveLower(pattern, values, z);
    timesStrictUpper(pattern, values, z, residual);
    for (let i = 0; i < n; i++) residual[i] = -residual[i]; // r - A z = -L^T z after the sweep
    restrict(spread, residual, coarseRight);
    solve(factored, coarseRight, coarseCorrection);
    prolong(spread, coarseCorrection, correction);
    multiply(pattern, values, correction, product);
    for (let i = 0; i < n; i++) residual[i] -= product[i];
    solveUpper(pattern, values, residual);
    for (let i = 0; i < n; i++) z[i] += correction[i] + residual[i];
  };
}

/** P by rows: unknown i has weights[2i] of coarse unknown ends[2i] and weights[2i + 1] of ends[2i + 1]; -1 for none. */
interface Spread {
  readonly coarseCount: number;
  readonly corner: Uint8Array;
  readonly ends: Int32Array;
  readonly weights: Float64Array;
}

function spreadOf(n: number, { ends, weights }: Placement): Spread {
  if (ends === undefined) throw new Error('buildCoarseLevel: which unknowns are corners is not told');
  const corner = new Uint8Array(n);
  const numberOf = new Int32Array(n).fill(-1);
  let coarseCount = 0;
  for (let i = 0; i < n; i++) {
    if (ends[2 * i] !== i || ends[2 * i + 1] !== i) continue;
    corner[i] = 1;
    numberOf[i] = coarseCount++;
  }
  const coarseEnds = new Int32Array(2 * n).fill(-1);
  const shares = new Float64Array(2 * n);
  for (let i = 0; i < n; i++) {
    for (let k = 2 * i; k < 2 * i + 2; k++) {
      if (corner[i] === 1 && k > 2 * i) continue;
      coarseEnds[k] = ends[k] < 0 ? -1 : numberOf[ends[k]];
      shares[k] = corner[i] === 1 ? 1 : (weights?.[k] ?? 0.5);
    }
  }
  return { coarseCount, corner, ends: coarseEnds, weights: shares };
}

/** Couplings between corners: whatever is coupled with a middle is so with its ends, being of one triangle. */
function coarsePattern({ n, start, row }: SymmetricPattern, { coarseCount, corner, ends }: Spread): SymmetricPattern {
  const coarseStart = new Int32Array(coarseCount + 1);
  const coarseRow = new Int32Array(row.length);
  let at = 0;
  for (let j = 0; j < n; j++) {
    if (corner[j] === 0) continue;
    for (let p = start[j]; p < start[j + 1]; p++) if (corner[row[p]] === 1) coarseRow[at++] = ends[2 * row[p]];
    coarseStart[ends[2 * j] + 1] = at;
  }
  return { n: coarseCount, start: coarseStart, row: coarseRow.slice(0, at) };
}

/** P^T A P. */
function coarseValues(
  { n, start, row }: SymmetricPattern,
  values: Float64Array,
  { ends, weights }: Spread,
  coarse: SymmetricPattern,
): Float64Array {
  const sums = new Float64Array(coarse.row.length);
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      const i = row[p];
      for (let a = 2 * j; a < 2 * j + 2; a++) {
        const c = ends[a];
        if (c < 0) continue;
        for (let b = 2 * i; b < 2 * i + 2; b++) {
          const d = ends[b];
          if (d < 0) continue;
          const value = values[p] * weights[a] * weights[b];
          if (c === d) sums[coarse.start[c]] += i === j ? value : 2 * value;
          else if (i !== j || c < d) sums[entryOf(coarse, c, d)] += value;
        }
      }
    }
  }
  return sums;
}

function entryOf({ start, row }: SymmetricPattern, c: number, d: number): number {
  const column = Math.min(c, d);
  const wanted = Math.max(c, d);
  for (let p = start[column] + 1; p < start[column + 1]; p++) if (row[p] === wanted) return p;
  throw new Error('twoLevelPreconditioner: a middle is coupled with what its ends are not');
}

/** y = L^T x, L the strict lower triangle. */
function timesStrictUpper(
  { n, start, row }: SymmetricPattern,
  values: Float64Array,
  x: Float64Array,
  y: Float64Array,
): void {
  for (let j = 0; j < n; j++) {
    const end = start[j + 1];
    let sum = 0;
    for (let p = start[j] + 1; p < end; p++) sum += values[p] * x[row[p]];
    y[j] = sum;
  }
}

/** y = P^T x. */
function restrict({ ends, weights }: Spread, x: Float64Array, y: Float64Array): void {
  y.fill(0);
  for (let i = 0; i < x.length; i++) {
    const a = ends[2 * i];
    const b = ends[2 * i + 1];
    if (a >= 0) y[a] += weights[2 * i] * x[i];
    if (b >= 0) y[b] += weights[2 * i + 1] * x[i];
  }
}

/** y = P x. */
function prolong({ ends, weights }: Spread, x: Float64Array, y: Float64Array): void {
  for (let i = 0; i < y.length; i++) {
    const a = ends[2 * i];
    const b = ends[2 * i + 1];
    y[i] = (a >= 0 ? weights[2 * i] * x[a] : 0) + (b >= 0 ? weights[2 * i + 1] * x[b] : 0);
  }
}
