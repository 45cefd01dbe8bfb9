import type { EdgeCondition, Field, Section, Setup } from '@gapwright/fem-core';
import { MU0 } from '@gapwright/fem-core';
import { buildSystem, numberUnknowns, solveNewton } from '@gapwright/fem-core/equations';
import { forEachSample } from '@gapwright/fem-core/field';
import { cornerCount, edgeCount, meshSection, nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { gatherToUnknowns, potentialOf } from '../../../packages/fem-core/src/assembly/unknowns.js';
import { AIR, box } from '../../laws/sections.js';
import { functionalAt, largest, residualAt, sources, tangentAt, tile, unevenField, withEdges } from './tile.js';

const linearSystem = (section: Section, setup: Setup) => {
  const mesh = meshSection(section);
  return buildSystem(mesh, setup, numberUnknowns(mesh, setup, 1));
};

function solveLinear(section: Section, setup: Setup): Field {
  const system = linearSystem(section, setup);
  const { potential, report } = solveNewton(system, { tolerance: 1e-12 });
  expect(report.converged).toBe(true);
  return { mesh: system.mesh, setup, potential, report };
}

const round = (maxEdge: number): Section => ({
  outline: { kind: 'circle', centre: [0, 0], radius: 0.5 },
  background: 'air',
  maxEdge,
  regions: [],
});
const square = (maxEdge: number): Section => ({
  outline: { kind: 'rectangle', from: [-0.5, -0.5], to: [0.5, 0.5] },
  background: 'air',
  maxEdge,
  regions: [],
});

/** exp(k x) cos(k y) - mu0 J r^2/4, the field of a uniform current in a harmonic one; as in the tests of order 2. */
const k = 3;
const density = 4 / MU0;
const exact = {
  a: (x: number, y: number) => Math.exp(k * x) * Math.cos(k * y) - (MU0 * density * (x * x + y * y)) / 4,
  b: (x: number, y: number) =>
    [
      -k * Math.exp(k * x) * Math.sin(k * y) - (MU0 * density * y) / 2,
      -k * Math.exp(k * x) * Math.cos(k * y) + (MU0 * density * x) / 2,
    ] as const,
};

const sideNames = (section: Section): readonly string[] => meshSection(section).sideNames;
const holding = (section: Section, a: (x: number, y: number) => number): Record<string, EdgeCondition> =>
  Object.fromEntries(sideNames(section).map((side) => [side, { kind: 'potential', value: a }]));

/** L2 norms of the errors of A and B. */
function errorsOf(section: Section): { a: number; b: number } {
  const field = solveLinear(section, {
    materials: { air: AIR },
    currentDensity: { air: density },
    edges: holding(section, exact.a),
  });
  let [a, b] = [0, 0];
  forEachSample(field, 'all', (s) => {
    const [bx, by] = exact.b(s.x, s.y);
    a += s.area * (s.a - exact.a(s.x, s.y)) ** 2;
    b += s.area * ((s.bx - bx) ** 2 + (s.by - by) ** 2);
  });
  return { a: Math.sqrt(a), b: Math.sqrt(b) };
}

/** Slope of log error over log size by least squares. */
function orderOf(sizes: readonly number[], errors: readonly number[]): number {
  const [x, y] = [sizes.map(Math.log), errors.map(Math.log)];
  const mean = (v: readonly number[]): number => v.reduce((sum, value) => sum + value, 0) / v.length;
  const [mx, my] = [mean(x), mean(y)];
  const rise = x.reduce((sum, value, i) => sum + (value - mx) * (y[i] - my), 0);
  return rise / x.reduce((sum, value) => sum + (value - mx) ** 2, 0);
}

// Ciarlet, The Finite Element Method for Elliptic Problems, 1978: h^2 in L2, h in the norm of the energy.
test.each([
  ['a square', square],
  ['a circle with curved elements', round],
])('order of convergence: 2 in A, 1 in B, in %s', (_, draw) => {
  const sizes = [0.1, 0.05, 0.025, 0.0125]; // as wished: how near the mesh comes to them varies little with the size
  const runs = sizes.map((maxEdge) => errorsOf(draw(maxEdge)));
  const inA = orderOf(
    sizes,
    runs.map(({ a }) => a),
  );
  const inB = orderOf(
    sizes,
    runs.map(({ b }) => b),
  );
  expect(Math.abs(inA - 2)).toBeLessThan(0.15);
  expect(Math.abs(inB - 1)).toBeLessThan(0.12);
});

test('patch test: every uniform field is reproduced to rounding, in straight elements of several regions', () => {
  const section = { ...square(0.15), regions: [box('patch', -0.31, -0.22, 0.5, 0.4)] };
  for (const angle of [0, 0.7, 2]) {
    const a = (x: number, y: number): number => Math.cos(angle) * y - Math.sin(angle) * x + 0.4;
    const field = solveLinear(section, { materials: { air: AIR, patch: AIR }, edges: holding(section, a) });
    const wrong = field.potential.map((value, node) => value - a(...nodePoint(field.mesh, node)));
    expect(largest(wrong)).toBeLessThan(1e-12);
  }
});

test('on the rim of a circle A at the middle of an edge is the mean of its ends, not the held function', () => {
  const field = solveLinear(round(0.3), { materials: { air: AIR }, edges: holding(round(0.3), (_, y) => y * y) });
  const { mesh, potential } = field;
  for (let e = 0; e < edgeCount(mesh); e++) {
    const mean = 0.5 * (potential[mesh.edges[2 * e]] + potential[mesh.edges[2 * e + 1]]);
    expect(potential[cornerCount(mesh) + e]).toBe(mean);
  }
});

const sides: readonly (readonly [string, Readonly<Record<string, EdgeCondition>>])[] = [
  ['closed all round', {}],
  ['repeating', { left: { kind: 'repeating' }, right: { kind: 'repeating' } }],
  ['reversing', { left: { kind: 'reversing' }, right: { kind: 'reversing' }, top: { kind: 'crossing' } }],
  ['applied', Object.fromEntries(sideNames(tile).map((side) => [side, { kind: 'applied', field: [0.3, -0.6] }]))],
];

describe.each(sides)('sides %s', (_, edges) => {
  const setup = withEdges(edges);
  const system = linearSystem(tile, setup);
  const { unknowns, mesh } = system;
  const n = unknowns.count;

  test('corners alone have unknowns', () => {
    expect(new Set(unknowns.unknownOf.subarray(0, cornerCount(mesh)).filter((i) => i >= 0)).size).toBe(n);
    expect(unknowns.unknownOf.subarray(cornerCount(mesh)).every((i) => i < 0)).toBe(true);
  });

  test('gathering is the transpose of spreading: the work of any nodal vector is the same', () => {
    const u = unevenField(system, 1);
    const nodal = Float64Array.from({ length: nodeCount(mesh) }, (_, i) => Math.cos(2.3 * i * i));
    const homogeneous = { ...unknowns, fixed: new Float64Array(nodal.length) };
    const potential = potentialOf(homogeneous, u, new Float64Array(nodal.length));
    const gathered = gatherToUnknowns(unknowns, nodal, new Float64Array(n));
    const work = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i], 0);
    expect(Math.abs(work(nodal, potential) - work(gathered, u))).toBeLessThan(1e-13 * nodal.length * largest(u));
  });

  test.each([0.05, 2.5])('the residual is the gradient of the functional, the tangent its own, at about %f T', (b) => {
    const u = unevenField(system, b);
    const residual = residualAt(system, u);
    const tangent = tangentAt(system, u);
    const step = 1e-6 * largest(u);
    const moved = (i: number, s: number): Float64Array => u.map((value, j) => (j === i ? value + s : value));
    let worst = 0;
    for (let i = 0; i < n; i += 5) {
      const value = (s: number): number => functionalAt(system, setup, moved(i, s));
      const slope = (value(step) - value(-step)) / (2 * step);
      const rounding = (1e-14 * Math.abs(value(0))) / step;
      expect(Math.abs(slope - residual[i])).toBeLessThan(2e-5 * largest(residual) + rounding);
      const [low, high] = [residualAt(system, moved(i, -step)), residualAt(system, moved(i, step))];
      worst = Math.max(worst, largest(high.map((v, j) => (v - low[j]) / (2 * step) - tangent[n * j + i])));
    }
    expect(worst).toBeLessThan(1e-5 * largest(tangent));
  });
});

test('the whole problem is the quadratic one held to linear potentials: its equations are those of order 2, gathered', () => {
  const mesh = meshSection(tile);
  const setup = withEdges({ left: { kind: 'reversing' }, right: { kind: 'reversing' } }, { ...sources });
  const [one, two] = ([1, 2] as const).map((order) => buildSystem(mesh, setup, numberUnknowns(mesh, setup, order)));
  const u = unevenField(one, 1);
  const potential = potentialOf(one.unknowns, u, new Float64Array(nodeCount(mesh)));
  // What order 2 has where all nodes are free, gathered to the corners.
  const free = {
    order: 2,
    count: nodeCount(mesh),
    unknownOf: Int32Array.from({ length: nodeCount(mesh) }, (_, node) => node),
    sign: new Int8Array(nodeCount(mesh)).fill(1),
    fixed: new Float64Array(nodeCount(mesh)),
    edges: mesh.edges,
  } as const;
  const nodal = residualAt(buildSystem(mesh, setup, free), potential);
  const expected = gatherToUnknowns(one.unknowns, nodal, new Float64Array(one.unknowns.count));
  const residual = residualAt(one, u);
  expect(largest(residual.map((value, i) => value - expected[i]))).toBeLessThan(1e-12 * largest(nodal));
  expect(two.unknowns.count).toBeGreaterThan(3 * one.unknowns.count);
});
