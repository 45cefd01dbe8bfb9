import type { Setup } from '../assembly/setup.js';
import type { Section } from '../geometry/section.js';
import { nodeCount } from '../mesh/mesh.js';
import type { Probe } from '../probes/probe.js';
import { solveProbes } from '../probes/solve-probes.js';
import type { Reading } from './readings.js';

/** A section whose field is known in closed form, with the answers held against it. */
export interface VerificationCase {
  readonly name: string;
  /** What the expected figures follow from, in plain characters. */
  readonly formula: string;
  /** Who gave the formula, and how its figures were come by. */
  readonly source: string;
  readonly section: Section;
  readonly setup: Setup;
  readonly probes: readonly Probe[];
  /** Wanted relative error of what the solver binds, see `ProbeOptions`. */
  readonly accuracy: number;
  readonly figures: readonly Figure[];
}

/** One answer of a case. */
export interface Figure {
  /** With its unit, unless it has none. */
  readonly quantity: string;
  /** By the formula. */
  readonly expected: number;
  readonly read: Reading;
  /** What errors are shares of; |expected| where absent. */
  readonly scale?: number;
  /** How far off it may be, share of the scale; the case's accuracy where absent. */
  readonly bound?: number;
  /** Share of the scale by which the section itself differs from what the formula describes; 0 where absent. */
  readonly slack?: number;
}

/** A figure as it was found; errors are shares of the figure's scale. */
export interface FigureResult {
  /** Of the case. */
  readonly name: string;
  /** With its unit, unless it has none. */
  readonly quantity: string;
  /** What the expected figure follows from, in plain characters. */
  readonly formula: string;
  /** Who gave the formula, and how its figures were come by. */
  readonly source: string;
  /** By the formula. */
  readonly expected: number;
  /** By the solver. */
  readonly got: number;
  /** |got - expected|. */
  readonly relativeError: number;
  /** The error the solver itself reports. */
  readonly estimatedError: number;
  /** How far off it may be. */
  readonly bound: number;
  /** By how much the section itself differs from what the formula describes. */
  readonly slack: number;
  /** Nodes of the last mesh. */
  readonly nodes: number;
  /** Of the whole case, ms; 0 without a clock. */
  readonly ms: number;
  /** The error is within the bound. */
  readonly holds: boolean;
}

export interface RunOptions {
  /** In place of the case's own. */
  readonly accuracy?: number;
  /** Of the elements: 1 linear, 2 quadratic (if absent). */
  readonly order?: 1 | 2;
  /** Milliseconds since any moment; the library reads no clock of its own. */
  readonly now?: () => number;
}

/** Closed forms prove nothing more by meshes finer than this. */
const MOST_TRIANGLES = 30_000;

/**
 * Solves a case and holds each of its figures against the closed form, in their order. A case that does not
 * converge holds nothing.
 */
export function runCase(given: VerificationCase, options: RunOptions = {}): FigureResult[] {
  const { now = () => 0 } = options;
  const begun = now();
  const { accuracy = given.accuracy, order = 2 } = options;
  const limits = { accuracy, order, maxTriangles: MOST_TRIANGLES };
  const answer = solveProbes(given.section, given.setup, given.probes, limits);
  const ms = now() - begun;
  return given.figures.map((figure) => {
    const { quantity, expected, scale = Math.abs(expected), bound = given.accuracy, slack = 0 } = figure;
    const { value, error } = figure.read(answer);
    const relativeError = Math.abs(value - expected) / scale;
    return {
      name: given.name,
      quantity,
      formula: given.formula,
      source: given.source,
      expected,
      got: value,
      relativeError,
      estimatedError: error / scale,
      bound,
      slack,
      nodes: nodeCount(answer.field.mesh),
      ms,
      holds: answer.field.report.converged && relativeError <= bound,
    };
  });
}
