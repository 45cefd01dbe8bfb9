import type { System } from '../assembly/system.js';
import { assemble } from '../assembly/system.js';
import { potentialOf } from '../assembly/unknowns.js';
import type { Steps } from '../base/steps.js';
import { finish } from '../base/steps.js';
import type { Analysis } from '../sparse/analysis.js';
import type { Factor } from '../sparse/cholesky.js';
import type { SymmetricPattern } from '../sparse/pattern.js';
import { multiply } from '../sparse/pattern.js';
import type { Tangent } from './tangent.js';
import { analyseSystem, buildTangent, NoSolution, solveTangent } from './tangent.js';

/** How far a solve goes, and from where. */
export interface NewtonOptions {
  /** Wanted ratio of the residual to that at A = 0 (with the held values), 2-norms; 1e-8 if absent. */
  readonly tolerance?: number;
  /** Steps after which it gives up; 60 if absent. */
  readonly maxSteps?: number;
  /** Float64Array(n): unknowns to start from, for example from a coarser mesh; zero if absent. */
  readonly start?: Float64Array;
  /** The pattern's analysis, where it is known from an earlier solve. */
  readonly analysis?: Analysis;
  /** Bytes a factor may work in; conjugate gradients take its place where it would need more. 3.9e9 if absent. */
  readonly memory?: number;
}

/** Told after each step. */
export interface NewtonProgress {
  /** Its number, from 1. */
  readonly step: number;
  /** Residual over that at A = 0, 2-norms. */
  readonly residual: number;
}

/** How a solve went; failure is a report, not an exception. */
export interface SolveReport {
  /** The wanted ratio was reached, or all that rounding allows. */
  readonly converged: boolean;
  /** Newton steps taken (a linear problem takes one). */
  readonly steps: number;
  /** Residual over that at A = 0 before the first step and after each step. */
  readonly residuals: readonly number[];
  /** Share of the full step the line search took, per step. */
  readonly stepLengths: readonly number[];
  /** Their number, n. */
  readonly unknowns: number;
  /** Numbers the factor of the tangent holds (or would hold), explicit zeros included. */
  readonly factorEntries: number;
  /** Why it stopped short; undefined where it converged. */
  readonly failure?: string;
}

/** What Newton's method came to. */
export interface Solution {
  /** Float64Array(n): the unknowns, Wb/m. */
  readonly u: Float64Array;
  /** Float64Array(nodes): A at the nodes, Wb/m. */
  readonly potential: Float64Array;
  /** Whether it converged, and how. */
  readonly report: SolveReport;
  /** Of the last step but for the very last change: serves adjoint problems. */
  readonly tangent: Tangent | undefined;
  /** The same where it is a factor. */
  readonly factor: Factor | undefined;
}

/** Rounding errors of a residual, in units of 2^-52 |K| |u|: its sums are some ten terms long. */
const ROUNDING = 4 * Number.EPSILON;
/** Residuals above this are not of rounding. */
const NEAR_ROUNDING = 1e-5;

/**
 * Newton's method with the exact tangent on the convex energy functional, and a line search on its slope along the step:
 * the slope d . residual(u + s d) rises with s, so that a step is long enough and not too long once the slope has shrunk to
 * half its start in size; where it has turned positive beyond that, its zero is sought by regula falsi (Illinois).
 * Ortega, Rheinboldt, Iterative Solution of Nonlinear Equations in Several Variables, 1970, sections 8.2 and 14.4.
 * Told after each step; throws nothing of its own: `report` tells of failures.
 */
export function* newtonSteps(system: System, options: NewtonOptions = {}): Steps<NewtonProgress, Solution> {
  const { tolerance = 1e-8, maxSteps = 60 } = options;
  const { n } = system.pattern;
  const nodes = system.source.length;
  const analysis = options.analysis ?? analyseSystem(system);
  const tangent = new Float64Array(system.pattern.row.length);
  const u = new Float64Array(n);
  const potential = new Float64Array(nodes);
  const residual = new Float64Array(n);
  const at = (v: Float64Array): void => {
    potentialOf(system.unknowns, v, potential);
    assemble(system, potential, residual, tangent);
  };
  const residuals: number[] = [];
  const stepLengths: number[] = [];
  let last: Tangent | undefined;
  const finish = (failure?: string): Solution => ({
    u,
    potential: potentialOf(system.unknowns, u, potential),
    report: {
      converged: failure === undefined,
      steps: stepLengths.length,
      residuals,
      stepLengths,
      unknowns: n,
      factorEntries: analysis.blockSize,
      ...(failure === undefined ? {} : { failure }),
    },
    tangent: last,
    factor: last !== undefined && 'blocks' in last ? last : undefined,
  });

  at(u);
  const scale = norm(residual);
  if (options.start !== undefined && scale > 0) {
    u.set(options.start);
    at(u);
  }
  const step = new Float64Array(n);
  const trial = new Float64Array(n);
  for (;;) {
    const size = scale === 0 ? 0 : norm(residual) / scale;
    residuals.push(size);
    if (Number.isNaN(size)) return finish('the residual is not a number');
    // What rounding leaves cannot be reduced further, whatever was asked; it is asked for only where it might decide.
    const floor = (): number => (ROUNDING * absoluteProduct(system.pattern, tangent, u)) / scale;
    const reached = size <= tolerance || (size < NEAR_ROUNDING && size <= floor());
    if (reached && last !== undefined) return finish();
    if (stepLengths.length >= maxSteps) return finish(`not converged in ${maxSteps} steps`);
    const built = buildTangent(system, analysis, tangent, last, options.memory);
    last = undefined; // its memory is the new one's
    if ('failure' in built) return finish(built.failure);
    last = built;
    if (reached) return finish(); // the start was the solution; adjoint problems need the factor all the same
    try {
      solveTangent(built, residual, step);
    } catch (error) {
      if (error instanceof NoSolution) return finish(error.message);
      throw error;
    }
    for (let i = 0; i < n; i++) step[i] = -step[i];
    stepLengths.push(searchLine(u, step, trial, residual, at));
    u.set(trial);
    yield { step: stepLengths.length, residual: scale === 0 ? 0 : norm(residual) / scale };
  }
}

/** `newtonSteps`, driven to the end; a failure is told in the report. */
export const solveNewton = (system: System, options: NewtonOptions = {}): Solution =>
  finish(newtonSteps(system, options));

/** Leaves the accepted point in `trial`, evaluated, and returns its share of the step. */
function searchLine(
  u: Float64Array,
  step: Float64Array,
  trial: Float64Array,
  residual: Float64Array,
  evaluate: (v: Float64Array) => void,
): number {
  const before = norm(residual);
  const slope0 = dot(residual, step);
  const slopeAt = (s: number): number => {
    for (let i = 0; i < u.length; i++) trial[i] = u[i] + s * step[i];
    evaluate(trial);
    return dot(residual, step);
  };
  let [low, lowSlope, high, highSlope] = [0, slope0, 1, slopeAt(1)];
  if (highSlope <= -0.5 * slope0 || norm(residual) < before) return 1;
  // Too far: the energy rises again. The zero of the slope lies between; half its start in size will do.
  for (let tries = 0; tries < 30; tries++) {
    let s = (low * highSlope - high * lowSlope) / (highSlope - lowSlope);
    if (!(s > low + 0.05 * (high - low) && s < high - 0.05 * (high - low))) s = 0.5 * (low + high);
    const slope = slopeAt(s);
    if (Math.abs(slope) <= 0.5 * Math.abs(slope0)) return s;
    if (slope > 0) [high, highSlope, lowSlope] = [s, slope, 0.5 * lowSlope];
    else [low, lowSlope, highSlope] = [s, slope, 0.5 * highSlope];
  }
  slopeAt(high);
  return high;
}

/** 2-norm of |K| |u|. */
function absoluteProduct(pattern: SymmetricPattern, values: Float64Array, u: Float64Array): number {
  const abs = (x: Float64Array): Float64Array => x.map(Math.abs);
  return norm(multiply(pattern, abs(values), abs(u), new Float64Array(u.length)));
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}

const norm = (a: Float64Array): number => Math.sqrt(dot(a, a));
