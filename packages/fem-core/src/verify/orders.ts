import type { EdgeCondition } from '../assembly/setup.js';
import { buildSystem } from '../assembly/system.js';
import { numberUnknowns } from '../assembly/unknowns.js';
import { MU0 } from '../base/constants.js';
import { forEachSample } from '../field/integrals.js';
import type { Section } from '../geometry/section.js';
import { triangleCount } from '../mesh/mesh.js';
import { meshSection } from '../mesh/mesh-section.js';
import { solveNewton } from '../solve/newton.js';
import { AIR, allSides, held } from './drawing.js';

/** How fast the errors of one kind of element fall with its size. */
export interface MeasuredOrder {
  /** 'linear', 'quadratic' or 'curved quadratic'. */
  readonly elements: string;
  /** Exponent of the element size in the error of A in L2, by least squares. */
  readonly potential: number;
  /** The same of B in L2, which is the energy norm in air. */
  readonly field: number;
  /** What theory promises. */
  readonly expected: {
    /** Of A. */
    readonly potential: number;
    /** Of B. */
    readonly field: number;
  };
  /** Neither falls short of theory by more than 0.1. */
  readonly holds: boolean;
  /** What was measured, coarse to fine. */
  readonly runs: readonly {
    /** Mean element size, m. */
    readonly size: number;
    /** Error of A in L2. */
    readonly potential: number;
    /** Error of B in L2. */
    readonly field: number;
  }[];
}

/** A field in closed form: A in Wb/m, B = (dA/dy, -dA/dx) in T, and the current density behind it in A/m^2. */
export interface ExactField {
  readonly a: (x: number, y: number) => number;
  readonly b: (x: number, y: number) => readonly [bx: number, by: number];
  readonly density: number;
}

const K = 3;
/** A = exp(k x) cos(k y) - mu0 J r^2/4: a harmonic wave, and the field of a uniform current. */
export const waveField = (density: number): ExactField => ({
  a: (x, y) => Math.exp(K * x) * Math.cos(K * y) - (MU0 * density * (x * x + y * y)) / 4,
  b: (x, y) => [
    -K * Math.exp(K * x) * Math.sin(K * y) - (MU0 * density * y) / 2,
    -K * Math.exp(K * x) * Math.cos(K * y) + (MU0 * density * x) / 2,
  ],
  density,
});

const SIZES = [0.1, 0.05, 0.025];
const HALF = 0.5;
/** What an order measured on a few meshes may miss. */
const SHORT = 0.1;

/** Elements whose order is measured: on a square their edges are straight, on a disc those at the rim are arcs. */
const KINDS: readonly { readonly elements: string; readonly order: 1 | 2; readonly outline: 'square' | 'disc' }[] = [
  { elements: 'linear', order: 1, outline: 'square' },
  { elements: 'quadratic', order: 2, outline: 'square' },
  { elements: 'curved quadratic', order: 2, outline: 'disc' },
];

/**
 * Orders of convergence on a smooth field with a uniform current, the exact potential held on the outline: p + 1 for A and
 * p for B with elements of order p (Ciarlet, The Finite Element Method for Elliptic Problems, 1978, from memory).
 */
export function measureOrders(exact: ExactField = waveField(4 / MU0)): MeasuredOrder[] {
  return KINDS.map(({ elements, order, outline }) => {
    const runs = SIZES.map((maxEdge) => errorsOn(outline, maxEdge, order, exact));
    const sizes = runs.map(({ size }) => size);
    const [potential, field] = [runs.map((run) => run.potential), runs.map((run) => run.field)].map((errors) =>
      slopeOf(sizes, errors),
    );
    const expected = { potential: order + 1, field: order };
    const holds = potential > expected.potential - SHORT && field > expected.field - SHORT;
    return { elements, potential, field, expected, holds, runs };
  });
}

function errorsOn(
  outline: 'square' | 'disc',
  maxEdge: number,
  order: 1 | 2,
  exact: ExactField,
): MeasuredOrder['runs'][number] {
  const section: Section = {
    outline:
      outline === 'square'
        ? { kind: 'rectangle', from: [-HALF, -HALF], to: [HALF, HALF] }
        : { kind: 'circle', centre: [0, 0], radius: HALF },
    background: 'air',
    maxEdge,
    regions: [],
  };
  const side = held(exact.a);
  const edges: Readonly<Record<string, EdgeCondition>> = outline === 'square' ? allSides(side) : { rim: side };
  const setup = { materials: { air: AIR }, currentDensity: { air: exact.density }, edges };
  const mesh = meshSection(section);
  const { potential, report } = solveNewton(buildSystem(mesh, setup, numberUnknowns(mesh, setup, order)));
  let [a, b, area] = [0, 0, 0];
  forEachSample({ mesh, setup, potential, report }, 'all', (s) => {
    const [bx, by] = exact.b(s.x, s.y);
    a += s.area * (s.a - exact.a(s.x, s.y)) ** 2;
    b += s.area * ((s.bx - bx) ** 2 + (s.by - by) ** 2);
    area += s.area;
  });
  return { size: Math.sqrt(area / triangleCount(mesh)), potential: Math.sqrt(a), field: Math.sqrt(b) };
}

/** Slope of log error over log size by least squares. */
function slopeOf(sizes: readonly number[], errors: readonly number[]): number {
  const [x, y] = [sizes.map(Math.log), errors.map(Math.log)];
  const mean = (v: readonly number[]): number => v.reduce((sum, value) => sum + value, 0) / v.length;
  const [mx, my] = [mean(x), mean(y)];
  const rise = x.reduce((sum, value, i) => sum + (value - mx) * (y[i] - my), 0);
  return rise / x.reduce((sum, value) => sum + (value - mx) ** 2, 0);
}
