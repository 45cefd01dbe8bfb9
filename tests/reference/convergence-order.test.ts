import type { Section, Setup } from '@gapwright/fem-core';
import { forEachSample, MU0, solveSection, triangleCount } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { check } from './table.js';

/** A field known in closed form: A in Wb/m and B = (dA/dy, -dA/dx) in T. */
interface Exact {
  readonly a: (x: number, y: number) => number;
  readonly b: (x: number, y: number) => readonly [bx: number, by: number];
}

const SOURCE =
  'interpolation theory of quadratic elements (Ciarlet, The Finite Element Method for Elliptic Problems, 1978, from memory)';

/** exp(k x) cos(k y), harmonic, and its field. */
const k = 3;
const wave: Exact = {
  a: (x, y) => Math.exp(k * x) * Math.cos(k * y),
  b: (x, y) => [-k * Math.exp(k * x) * Math.sin(k * y), -k * Math.exp(k * x) * Math.cos(k * y)],
};

/** The wave with a uniform current over the whole section: -mu0 J r^2/4 more. */
const density = 4 / MU0;
const driven: Exact = {
  a: (x, y) => wave.a(x, y) - (MU0 * density * (x * x + y * y)) / 4,
  b: (x, y) => {
    const [bx, by] = wave.b(x, y);
    return [bx - (MU0 * density * y) / 2, by + (MU0 * density * x) / 2];
  },
};

const square = (maxEdge: number): Section => ({
  outline: { kind: 'rectangle', from: [-0.5, -0.5], to: [0.5, 0.5] },
  background: 'air',
  maxEdge,
  regions: [],
});
const round = (maxEdge: number): Section => ({
  outline: { kind: 'circle', centre: [0, 0], radius: 0.5 },
  background: 'air',
  maxEdge,
  regions: [],
});

/** L2 norms of the errors of A and B on one mesh, and its mean element size. */
function errorsOf(section: Section, setup: Setup, exact: Exact): { h: number; a: number; b: number } {
  const field = solveSection(section, setup);
  expect(field.report.converged).toBe(true);
  let [a, b, area] = [0, 0, 0];
  forEachSample(field, 'all', (s) => {
    const [bx, by] = exact.b(s.x, s.y);
    a += s.area * (s.a - exact.a(s.x, s.y)) ** 2;
    b += s.area * ((s.bx - bx) ** 2 + (s.by - by) ** 2);
    area += s.area;
  });
  return { h: Math.sqrt(area / triangleCount(field.mesh)), a: Math.sqrt(a), b: Math.sqrt(b) };
}

/** Slope of log error over log size by least squares. */
function orderOf(sizes: readonly number[], errors: readonly number[]): number {
  const [x, y] = [sizes.map(Math.log), errors.map(Math.log)];
  const mean = (v: readonly number[]): number => v.reduce((sum, value) => sum + value, 0) / v.length;
  const [mx, my] = [mean(x), mean(y)];
  const rise = x.reduce((sum, value, i) => sum + (value - mx) * (y[i] - my), 0);
  return rise / x.reduce((sum, value) => sum + (value - mx) ** 2, 0);
}

test.each([
  ['square, no current', square, wave, 0],
  ['square, uniform current', square, driven, density],
  ['circle with curved elements, no current', round, wave, 0],
  ['circle with curved elements, uniform current', round, driven, density],
] as const)('order of convergence: 3 in A, 2 in B; %s', (name, draw, exact, current) => {
  const side = { kind: 'potential', value: exact.a } as const;
  const sides = draw === round ? { rim: side } : { left: side, right: side, top: side, bottom: side };
  const runs = [0.2, 0.1, 0.05, 0.025].map((maxEdge) =>
    errorsOf(
      draw(maxEdge),
      { materials: { air: { kind: 'linear', muR: 1 } }, currentDensity: { air: current }, edges: sides },
      exact,
    ),
  );
  const sizes = runs.map(({ h }) => h);
  const given = { case: `order of convergence, ${name}`, source: SOURCE };
  const [inA, inB] = [runs.map(({ a }) => a), runs.map(({ b }) => b)];
  check({ ...given, quantity: 'of A in L2', expected: 3, got: orderOf(sizes, inA) }, 0.07);
  check({ ...given, quantity: 'of B in L2', expected: 2, got: orderOf(sizes, inB) }, 0.07);
});

test('a quadratic potential is reproduced to rounding on straight elements', () => {
  const exact = (x: number, y: number): number => 0.3 * x * x - 0.7 * y * y + 0.2 * x * y + x - 2 * y;
  const side = { kind: 'potential', value: exact } as const;
  const field = solveSection(square(0.2), {
    materials: { air: { kind: 'linear', muR: 1 } },
    currentDensity: { air: 0.8 / MU0 }, // -div grad A = 0.8
    edges: { left: side, right: side, top: side, bottom: side },
  });
  let worst = 0;
  forEachSample(field, 'all', (s) => {
    worst = Math.max(worst, Math.abs(s.a - exact(s.x, s.y)));
  });
  const given = { case: 'quadratic potential', quantity: 'largest error of A', source: 'the elements contain it' };
  check({ ...given, expected: 0, got: worst, scale: 1 }, 1e-12);
});
