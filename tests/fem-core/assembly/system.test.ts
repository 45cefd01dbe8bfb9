import type { EdgeCondition, Material, Setup } from '@gapwright/fem-core';
import { InputError, MU0 } from '@gapwright/fem-core';
import type { Unknowns } from '@gapwright/fem-core/equations';
import { assemble, buildSystem, numberUnknowns } from '@gapwright/fem-core/equations';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection, nodeCount, nodePoint, triangleNodes } from '@gapwright/fem-core/mesh';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { gatherToUnknowns } from '../../../packages/fem-core/src/assembly/unknowns.js';
import { AIR, STEEL } from '../../laws/sections.js';
import {
  functionalAt,
  largest,
  naturalSides,
  potentialAt,
  residualAt,
  sources,
  squareOf,
  systemOf,
  tangentAt,
  tile,
  unevenField,
  withEdges,
} from './tile.js';

const mesh = meshSection(tile);
const nodes = nodeCount(mesh);

/** All nodes unknown: what the equations are before any side is bound. */
const freeOf = (of: Mesh): Unknowns => ({
  order: 2,
  count: nodeCount(of),
  unknownOf: Int32Array.from({ length: nodeCount(of) }, (_, i) => i),
  sign: new Int8Array(nodeCount(of)).fill(1),
  fixed: new Float64Array(nodeCount(of)),
  edges: of.edges,
});
const allFree = freeOf(mesh);

/** Eigenvalues of a symmetric matrix, rising. */
function spectrum(square: Float64Array): number[] {
  const n = Math.sqrt(square.length);
  const matrix = Matrix.from1DArray(n, n, square);
  return new EigenvalueDecomposition(matrix, { assumeSymmetric: true }).realEigenvalues.sort((a, b) => a - b);
}

const conditions: readonly (readonly [string, Readonly<Record<string, EdgeCondition>>])[] = [
  ['closed all round', {}],
  ['repeating left to right', { left: { kind: 'repeating' }, right: { kind: 'repeating' } }],
  ['reversing both ways', Object.fromEntries(mesh.sideNames.map((side) => [side, { kind: 'reversing' }]))],
  [
    'held at values other than 0',
    {
      left: { kind: 'applied', field: [0.2, 1.4] },
      right: { kind: 'potential', value: (_, y) => 0.03 * Math.sin(90 * y) },
      top: { kind: 'crossing' },
    },
  ],
];

const linear: Setup = { ...sources, materials: { ...sources.materials, steel: { kind: 'linear', muR: 700 } } };

describe('the stiffness of constant reluctivity', () => {
  const system = buildSystem(mesh, linear, allFree);
  const square = squareOf(system, system.linearValues);

  test('a uniform potential carries no current: rows sum to zero', () => {
    for (let i = 0; i < nodes; i++) {
      const row = square.subarray(nodes * i, nodes * (i + 1));
      expect(Math.abs(row.reduce((a, b) => a + b))).toBeLessThan(1e-12 * largest(row));
    }
  });

  test('its energy is that of the field: u K u/2 = B^2/(2 mu0) x area for a uniform field in air', () => {
    const materials = { air: AIR, steel: AIR, magnet: AIR, bar: AIR };
    const air = buildSystem(mesh, { materials }, allFree);
    const u = Float64Array.from({ length: nodes }, (_, node) => {
      const [x, y] = nodePoint(mesh, node);
      return 0.3 * y - 0.4 * x;
    });
    const residual = residualAt(air, u);
    const energy = 0.5 * u.reduce((sum, a, i) => sum + a * residual[i], 0);
    expect(Math.abs(energy / ((0.25 / (2 * MU0)) * 0.06 * 0.04) - 1)).toBeLessThan(1e-12);
    // And inside, where no outline takes it up, the residual of a uniform field is zero.
    const inside = numberUnknowns(mesh, { materials });
    residual.forEach((value, node) => {
      if (inside.unknownOf[node] >= 0) expect(Math.abs(value)).toBeLessThan(1e-12 * largest(residual));
    });
  });

  test('once a side is held it is positive definite; before, the uniform potential is its only null', () => {
    const small = meshSection({ ...tile, regions: tile.regions.slice(0, 2) });
    const n = nodeCount(small);
    const free = buildSystem(small, linear, freeOf(small));
    const [loose, bound] = [free, systemOf(small, linear)].map((one) => spectrum(squareOf(one, one.linearValues)));
    const top = loose[n - 1];
    expect(Math.abs(loose[0])).toBeLessThan(1e-12 * top);
    expect(loose[1]).toBeGreaterThan(1e-9 * top);
    expect(bound[0]).toBeGreaterThan(1e-9 * top);
  });

  test('the sources of a magnet sum to zero, those of a current to the current', () => {
    const sum = system.source.reduce((a, b) => a + b);
    // The bar is a circle of quadratic edges: its area is that of the disc to the fourth order.
    expect(Math.abs(sum / (2e6 * Math.PI * 0.007 ** 2) - 1)).toBeLessThan(2e-3);
    const magnet = buildSystem(mesh, { ...linear, currentDensity: {} }, allFree).source;
    expect(Math.abs(magnet.reduce((a, b) => a + b))).toBeLessThan(1e-12 * magnet.reduce((a, b) => a + Math.abs(b)));
  });
});

describe.each(conditions)('sides %s', (_, edges) => {
  const setup = withEdges(edges);
  const system = systemOf(mesh, setup);
  const n = system.unknowns.count;

  test.each([0.05, 2.5])('the residual is the gradient of the functional, at about %f T', (density) => {
    const u = unevenField(system, density);
    const residual = residualAt(system, u);
    const step = 1e-6 * largest(u);
    for (let i = 0; i < n; i += 23) {
      const at = (s: number): number =>
        functionalAt(
          system,
          setup,
          u.map((value, k) => (k === i ? value + s : value)),
        );
      const slope = (at(step) - at(-step)) / (2 * step);
      // Rounding of the functional over the step bounds what the difference can tell.
      const rounding = (1e-14 * Math.abs(at(0))) / step;
      expect(Math.abs(slope - residual[i])).toBeLessThan(2e-5 * largest(residual) + rounding);
    }
  });

  test.each([0.05, 2.5])('the tangent is the derivative of the residual, and symmetric, at about %f T', (density) => {
    const u = unevenField(system, density);
    const tangent = tangentAt(system, u);
    const step = 1e-6 * largest(u);
    const scale = largest(tangent);
    let worst = 0;
    for (let j = 0; j < n; j += 11) {
      const at = (s: number): Float64Array =>
        residualAt(
          system,
          u.map((value, k) => (k === j ? value + s : value)),
        );
      const [low, high] = [at(-step), at(step)];
      worst = Math.max(worst, largest(high.map((value, i) => (value - low[i]) / (2 * step) - tangent[n * i + j])));
    }
    expect(worst).toBeLessThan(1e-5 * scale);
  });

  test('bound sides take part of the equations of all nodes: summed with their signs, none changed', () => {
    const free = buildSystem(mesh, setup, allFree);
    const u = unevenField(system, 1.2);
    const potential = potentialAt(system, u);
    const whole = residualAt(free, potential);
    const expected = gatherToUnknowns(system.unknowns, whole, new Float64Array(n));
    const residual = residualAt(system, u);
    residual.forEach((value, i) => {
      expect(Math.abs(value - expected[i])).toBeLessThan(1e-12 * largest(whole));
    });
  });

  test('asking for the tangent changes nothing about the residual', () => {
    const u = unevenField(system, 1.2);
    const [alone, beside] = [new Float64Array(n), new Float64Array(n).fill(7)];
    assemble(system, potentialAt(system, u), alone);
    const tangent = new Float64Array(system.pattern.row.length).fill(Number.NaN);
    assemble(system, potentialAt(system, u), beside, tangent);
    expect(beside).toEqual(alone);
    expect(tangent.every(Number.isFinite)).toBe(true);
  });
});

describe('a strip one element wide, so that two nodes of a triangle are one unknown', () => {
  const strip = meshSection({
    outline: { kind: 'rectangle', from: [0, 0], to: [0.01, 0.04] },
    background: 'steel',
    regions: [],
    matched: [['left', 'right']],
  });

  test.each(['repeating', 'reversing'] as const)('%s', (kind) => {
    for (const steel of [STEEL, { kind: 'linear', muR: 50 } as const]) {
      const edges = { left: { kind }, right: { kind }, top: { kind: 'crossing' } } as const;
      const system = systemOf(strip, { materials: { steel }, edges });
      const n = system.unknowns.count;
      const shared = Array.from({ length: strip.triangles.length / 3 }, (_, t) => {
        const at = Array.from(triangleNodes(strip, t, new Int32Array(6)), (node) => system.unknowns.unknownOf[node]);
        return at.filter((i, k) => i >= 0 && at.indexOf(i) < k).length;
      });
      expect(largest(shared)).toBeGreaterThan(0);
      const u = unevenField(system, 0.6);
      const tangent = tangentAt(system, u);
      const step = 1e-6 * largest(u);
      for (let j = 0; j < n; j++) {
        const at = (s: number): Float64Array =>
          residualAt(
            system,
            u.map((value, k) => (k === j ? value + s : value)),
          );
        const [low, high] = [at(-step), at(step)];
        const wrong = largest(high.map((value, i) => (value - low[i]) / (2 * step) - tangent[n * i + j]));
        expect(wrong).toBeLessThan(1e-6 * largest(tangent));
      }
    }
  });
});

test('held values act as the field they belong to: a uniform applied field is a solution of air', () => {
  const materials = { air: AIR, steel: AIR, magnet: AIR, bar: AIR };
  const applied: EdgeCondition = { kind: 'applied', field: [0.7, -0.2] };
  const setup = { materials, edges: Object.fromEntries(mesh.sideNames.map((side) => [side, applied])) };
  const system = systemOf(mesh, setup);
  const exact = Float64Array.from(system.nodeOf, (node) => {
    const [x, y] = nodePoint(mesh, node);
    return 0.7 * y + 0.2 * x;
  });
  const start = residualAt(system, new Float64Array(system.unknowns.count));
  expect(largest(start)).toBeGreaterThan(0);
  expect(largest(residualAt(system, exact))).toBeLessThan(1e-13 * largest(start));
});

test('a curve that is a straight line gives the equations of linear steel', () => {
  const muR = 700;
  const straight: Material = {
    kind: 'curve',
    curve: {
      b: Float64Array.of(0, 5),
      h: Float64Array.of(0, 5 / (muR * MU0)),
      slope: Float64Array.of(1 / (muR * MU0), 1 / (muR * MU0)),
      energy: Float64Array.of(0, 12.5 / (muR * MU0)),
    },
  };
  const curved = systemOf(mesh, { ...sources, materials: { ...sources.materials, steel: straight } });
  const plain = systemOf(mesh, linear);
  const u = unevenField(plain, 0.4);
  const [a, b] = [residualAt(curved, u), residualAt(plain, u)];
  expect(largest(a.map((value, i) => value - b[i]))).toBeLessThan(1e-11 * largest(b));
  const [s, t] = [tangentAt(curved, u), tangentAt(plain, u)];
  expect(largest(s.map((value, i) => value - t[i]))).toBeLessThan(1e-11 * largest(t));
});

test('the tile is met in every scale alike: sizes times s leave the tangent, and the residual at A times s', () => {
  // K has the unit of a reluctivity; J times 1/s keeps the field.
  const small = 1e-4;
  const shrunk = meshScaled(small);
  const [a, b] = [systemOf(mesh, sources), systemOf(shrunk, { ...sources, currentDensity: { bar: 2e6 / small } })];
  const u = unevenField(a, 1.1);
  const [ra, rb] = [
    residualAt(a, u),
    residualAt(
      b,
      u.map((value) => small * value),
    ),
  ];
  expect(largest(ra.map((value, i) => value - rb[i] / small))).toBeLessThan(1e-10 * largest(ra));
  const [ta, tb] = [
    tangentAt(a, u),
    tangentAt(
      b,
      u.map((value) => small * value),
    ),
  ];
  expect(largest(ta.map((value, i) => value - tb[i]))).toBeLessThan(1e-9 * largest(ta));
});

const meshScaled = (s: number): typeof mesh => ({
  ...mesh,
  xy: mesh.xy.map((value) => s * value),
  middles: mesh.middles.map((value) => s * value),
});

describe('materials', () => {
  const without = (...names: string[]): Setup => ({
    ...sources,
    materials: Object.fromEntries(Object.entries(sources.materials).filter(([name]) => !names.includes(name))),
  });

  test('every region that covers any area needs one; all that lack it are told', () => {
    const build = () => systemOf(mesh, without('bar', 'air'));
    expect(build).toThrow(InputError);
    expect(build).toThrow(/air: has no material[\s\S]*bar: has no material/);
  });

  test('a region that is covered by later ones needs none', () => {
    const hidden = meshSection({
      ...tile,
      regions: [{ name: 'hidden', shape: { kind: 'circle', centre: [0.045, 0.026], radius: 0.003 } }, ...tile.regions],
    });
    expect(hidden.regionNames).toContain('hidden');
    expect(() => systemOf(hidden, sources)).not.toThrow();
  });
});

test('natural sides: the pinned node is all that holds the potential; rows that do not meet it sum to zero', () => {
  const setup = withEdges(naturalSides, { ...linear, currentDensity: {} });
  const system = systemOf(mesh, setup);
  const { count, unknownOf } = system.unknowns;
  const square = squareOf(system, system.linearValues);
  const unbound = buildSystem(mesh, setup, allFree);
  const free = squareOf(unbound, unbound.linearValues);
  const pin = unknownOf.indexOf(-1);
  const scale = largest(square);
  for (let i = 0; i < count; i++) {
    const sum = square.subarray(count * i, count * (i + 1)).reduce((a, b) => a + b);
    expect(Math.abs(sum + free[nodes * system.nodeOf[i] + pin])).toBeLessThan(1e-12 * scale);
  }
});
