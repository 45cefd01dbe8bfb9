import { incompleteCholesky, incompletePreconditioner } from './incomplete-cholesky.js';
import type { SymmetricPattern } from './pattern.js';
import { multiply } from './pattern.js';
import type { Preconditioner } from './preconditioner.js';
import type { CoarseLevel } from './two-level.js';
import { twoLevelPreconditioner } from './two-level.js';

/** How far conjugate gradients go, and by what preconditioner. */
export interface GradientOptions {
  /** |b - A x| / |b| to reach, Euclidean; 1e-10 if absent. */
  readonly tolerance?: number;
  /** 2000 if absent. */
  readonly mostSteps?: number;
  /** Of quadratic elements, by `buildCoarseLevel`; serves any number of matrices with the pattern. */
  readonly level?: CoarseLevel;
}

/** How conjugate gradients ended. */
export interface GradientReport {
  /**
   * 'too-many-steps': `mostSteps` was not enough; 'stalled': rounding keeps the residual above the tolerance;
   * 'not-positive': the matrix is not positive definite, or some value is not a finite number.
   */
  readonly outcome: 'converged' | 'too-many-steps' | 'stalled' | 'not-positive';
  /** Iterations taken. */
  readonly steps: number;
  /** |b - A x| / |b| of the x returned, computed from it. */
  readonly residual: number;
  /** 'none' where b is 0. */
  readonly preconditioner: 'two-level' | 'incomplete' | 'none';
}

/**
 * Solves A x = b by preconditioned conjugate gradients (Hestenes, Stiefel, Methods of conjugate gradients for solving linear
 * systems, 1952), for systems whose factor would not fit memory. With a coarse level the preconditioner has two: its one factor
 * is that of the corners alone, some fifth of the whole one's size. Else it is an incomplete factor, and the steps grow as
 * the square root of the number of unknowns. When the residual carried along has come down, the true one is computed; the iteration starts
 * again from it if it is still too large, and ends when that no longer helps.
 *
 * @param values  Float64Array(z): the lower triangle in the order of the pattern
 * @param b       Float64Array(n)
 * @param x       Float64Array(n): where to start, for instance 0; overwritten by the best solution found
 */
export function solveByConjugateGradients(
  pattern: SymmetricPattern,
  values: Float64Array,
  b: Float64Array,
  x: Float64Array,
  options: GradientOptions = {},
): GradientReport {
  const { tolerance = 1e-10, mostSteps = 2000, level } = options;
  const scale = Math.sqrt(dot(b, b));
  if (scale === 0) {
    x.fill(0);
    return { outcome: 'converged', steps: 0, residual: 0, preconditioner: 'none' };
  }
  const kind = level === undefined ? 'incomplete' : 'two-level';
  const preconditioner = preconditionerOf(pattern, values, level);
  const r = new Float64Array(pattern.n);
  let steps = 0;
  let residual = trueResidual(pattern, values, b, x, r) / scale;
  const report = (outcome: GradientReport['outcome']): GradientReport => ({
    outcome,
    steps,
    residual,
    preconditioner: preconditioner === undefined ? 'none' : kind,
  });
  if (preconditioner === undefined || !Number.isFinite(residual)) return report('not-positive');
  while (residual > tolerance) {
    if (steps >= mostSteps) return report('too-many-steps');
    const before = residual;
    const run = iterate(pattern, values, preconditioner, x, r, tolerance * scale, mostSteps - steps);
    steps += run.steps;
    residual = trueResidual(pattern, values, b, x, r) / scale;
    if (!run.positive) return report('not-positive');
    if (residual > tolerance && residual > 0.5 * before && steps < mostSteps) return report('stalled');
  }
  return report('converged');
}

function preconditionerOf(
  pattern: SymmetricPattern,
  values: Float64Array,
  level: CoarseLevel | undefined,
): Preconditioner | undefined {
  if (level !== undefined) return twoLevelPreconditioner(pattern, values, level);
  const factored = incompleteCholesky(pattern, values);
  return factored && incompletePreconditioner(pattern, factored.lower);
}

/** r = b - A x; returns its length. */
function trueResidual(
  pattern: SymmetricPattern,
  values: Float64Array,
  b: Float64Array,
  x: Float64Array,
  r: Float64Array,
): number {
  multiply(pattern, values, x, r);
  for (let i = 0; i < r.length; i++) r[i] = b[i] - r[i];
  return Math.sqrt(dot(r, r));
}

/** Steps from the residual r until it is no longer than the goal; x and r are carried along. */
function iterate(
  pattern: SymmetricPattern,
  values: Float64Array,
  precondition: Preconditioner,
  x: Float64Array,
  r: Float64Array,
  goal: number,
  most: number,
): { readonly steps: number; readonly positive: boolean } {
  const z = new Float64Array(pattern.n);
  const q = new Float64Array(pattern.n);
  precondition(r, z);
  const p = z.slice();
  let rz = dot(r, z);
  for (let steps = 1; ; steps++) {
    multiply(pattern, values, p, q);
    const curvature = dot(p, q);
    if (!(curvature > 0 && rz > 0 && curvature < Number.POSITIVE_INFINITY)) return { steps, positive: false };
    if (descend(x, r, p, q, rz / curvature) <= goal * goal || steps === most) return { steps, positive: true };
    precondition(r, z);
    const next = dot(r, z);
    const keep = next / rz;
    for (let i = 0; i < p.length; i++) p[i] = z[i] + keep * p[i];
    rz = next;
  }
}

/** x += length p, r -= length q; returns |r|^2. */
function descend(x: Float64Array, r: Float64Array, p: Float64Array, q: Float64Array, length: number): number {
  let square = 0;
  for (let i = 0; i < x.length; i++) {
    x[i] += length * p[i];
    const left = r[i] - length * q[i];
    r[i] = left;
    square += left * left;
  }
  return square;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
