/** Data for the comparisons: sections, their meshes and systems at a wished size, and the files other processes read them from. */
import { writeFileSync } from 'node:fs';
import type { Section, Setup } from '@gapwright/fem-core';
import { buildBHCurve, MU0 } from '@gapwright/fem-core';
import type { Unknowns } from '@gapwright/fem-core/equations';
import { buildSystem, numberUnknowns } from '@gapwright/fem-core/equations';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection } from '@gapwright/fem-core/mesh';
import type { SymmetricPattern } from '@gapwright/fem-core/sparse';

export interface LinearProblem {
  readonly section: Section;
  readonly mesh: Mesh;
  readonly unknowns: Unknowns;
  readonly pattern: SymmetricPattern;
  /** Float64Array(z): the lower triangle in the order of the pattern. */
  readonly values: Float64Array;
  readonly right: Float64Array;
}

export interface FieldProblem {
  readonly section: Section;
  readonly mesh: Mesh;
  readonly setup: Setup;
  /** Unknowns of the quadratic elements. */
  readonly count: number;
}

const box = (from: readonly [number, number], to: readonly [number, number]) =>
  ({ kind: 'rectangle', from, to }) as const;

/** The unit square; a slanted patch of the same stuff keeps the mesh from falling into a regular pattern. */
const square = (maxEdge: number): Section => ({
  outline: box([0, 0], [1, 1]),
  background: 'rest',
  maxEdge,
  regions: [
    {
      name: 'patch',
      shape: {
        kind: 'polygon',
        corners: [
          [0.21, 0.33],
          [0.74, 0.13],
          [0.62, 0.81],
        ],
      },
      maxEdge,
    },
  ],
});

/** The Laplacian of quadratic elements with a uniform source on the unit square, 0 all round. */
export function laplacian(wished: number): LinearProblem {
  const unit = { kind: 'linear', muR: 1 / MU0 } as const; // reluctivity 1
  const setup = { materials: { rest: unit, patch: unit }, currentDensity: { rest: 1, patch: 1 } };
  const { section, mesh } = meshOfSize(square, setup, wished);
  const unknowns = numberUnknowns(mesh, setup);
  const system = buildSystem(mesh, setup, unknowns);
  const right = new Float64Array(unknowns.count);
  unknowns.unknownOf.forEach((i, node) => {
    if (i >= 0) right[i] += system.source[node];
  });
  return { section, mesh, unknowns, pattern: system.pattern, values: system.linearValues, right };
}

/**
 * Steel by the closed form H = REST B + RISE B^9, which a peer takes as it is and we by a table so fine that the cubics
 * between its rows leave a relative 1e-6. Up to LAST_B; there its slope reaches that of vacuum.
 */
export const REST = 200;
export const RISE = 30;
const LAST_B = 2.65;
const ROWS = 400;
const curve = buildBHCurve(
  Array.from({ length: ROWS }, (_, i) => (LAST_B * (i + 1)) / ROWS).map((b) => [REST * b + RISE * b ** 9, b] as const),
);
const steel = { kind: 'curve', curve } as const;
const air = { kind: 'linear', muR: 1 } as const;

/** A square of steel through and through, so that every triangle has a field-dependent reluctivity: for assembly. */
export function steelBlock(wished: number): FieldProblem {
  const setup: Setup = { materials: { rest: steel, patch: steel }, currentDensity: { rest: 1e4, patch: 1e4 } };
  return fieldProblem(square, setup, wished);
}

/** A steel ring core with an air gap, and a coil round one of its limbs, saturated at the inner corners. */
export function gappedCore(wished: number): FieldProblem {
  const section = (maxEdge: number): Section => ({
    outline: box([0, 0], [0.1, 0.1]),
    background: 'air',
    maxEdge,
    regions: [
      { name: 'core', shape: box([0.02, 0.015], [0.08, 0.085]), maxEdge },
      { name: 'window', shape: box([0.035, 0.03], [0.065, 0.07]), maxEdge },
      { name: 'gap', shape: box([0.065, 0.049], [0.08, 0.051]), maxEdge },
      { name: 'go', shape: box([0.036, 0.032], [0.046, 0.068]), maxEdge },
      { name: 'return', shape: box([0.009, 0.032], [0.019, 0.068]), maxEdge },
    ],
  });
  const setup: Setup = {
    materials: { air, core: steel, window: air, gap: air, go: air, return: air },
    currentDensity: { go: 7e6, return: -7e6 },
  };
  return fieldProblem(section, setup, wished);
}

function fieldProblem(draw: (maxEdge: number) => Section, setup: Setup, wished: number): FieldProblem {
  const { section, mesh } = meshOfSize(draw, setup, wished);
  return { section, mesh, setup, count: numberUnknowns(mesh, setup).count };
}

/** A mesh with about so many unknowns: their number goes with the square of the edges' fineness. */
function meshOfSize(
  draw: (maxEdge: number) => Section,
  setup: Setup,
  wished: number,
): { section: Section; mesh: Mesh } {
  const { outline } = draw(1);
  let maxEdge = (outline.kind === 'rectangle' ? outline.to[0] - outline.from[0] : 1) / 20;
  for (let tries = 0; ; tries++) {
    const section = draw(maxEdge);
    const mesh = meshSection(section, LIMITS);
    const share = numberUnknowns(mesh, setup).count / wished;
    if (Math.abs(share - 1) < 0.05 || tries === 4) return { section, mesh };
    maxEdge *= Math.sqrt(share);
  }
}

/** Smallest angle the library's mesher keeps to unless told otherwise, radians, for peers to keep to the same. */
export const MIN_ANGLE = (25 * Math.PI) / 180;
export const LIMITS = { minAngle: MIN_ANGLE, maxTriangles: 10_000_000 };

/** The square with a bar and a polygon of 48 corners, as a drawing for us and as points and segments for a peer. */
export interface Drawing {
  readonly section: Section;
  /** Float64Array(2 points). */
  readonly xy: Float64Array;
  /** Int32Array(2 segments): ends. */
  readonly segments: Int32Array;
  readonly maxEdge: number;
}

export function drawing(maxEdge: number): Drawing {
  const round = Array.from({ length: 48 }, (_, k) => (k * Math.PI) / 24).map(
    (angle) => [0.35 + 0.2 * Math.cos(angle), 0.4 + 0.2 * Math.sin(angle)] as const,
  );
  const rectangle = ([x0, y0]: readonly [number, number], [x1, y1]: readonly [number, number]) =>
    [[x0, y0] as const, [x1, y0] as const, [x1, y1] as const, [x0, y1] as const] as const;
  const loops = [rectangle([0, 0], [1, 1]), round, rectangle([0.65, 0.2], [0.72, 0.85])];
  const [outline, ...inner] = loops.map((corners) => ({ kind: 'polygon', corners }) as const);
  const segments: number[] = [];
  let first = 0;
  for (const loop of loops) {
    loop.forEach((_, k) => {
      segments.push(first + k, first + ((k + 1) % loop.length));
    });
    first += loop.length;
  }
  return {
    section: {
      outline,
      background: 'air',
      maxEdge,
      regions: inner.map((shape, k) => ({ name: ['round', 'bar'][k], shape, maxEdge })),
    },
    xy: Float64Array.from(loops.flat(2)),
    segments: Int32Array.from(segments),
    maxEdge,
  };
}

type Arrays = readonly (Int32Array | Float64Array)[];

/** Arrays one after another, little-endian; the reader knows their order and finds the lengths in the first. */
function writeArrays(file: string, arrays: Arrays): void {
  writeFileSync(
    file,
    Buffer.concat(arrays.map((array) => Buffer.from(array.buffer, array.byteOffset, array.byteLength))),
  );
}

/** n and entries; start, rows, values, right-hand side. */
export function writeLinear(file: string, { pattern, values, right }: LinearProblem): void {
  const { n, start, row } = pattern;
  writeArrays(file, [Int32Array.of(n, row.length), start, row, values, right]);
}

export function writeOrder(file: string, order: Int32Array): void {
  writeArrays(file, [order]);
}

export function readOrder(bytes: Uint8Array): Int32Array {
  return new Int32Array(bytes.slice().buffer);
}

/** Points and segments; coordinates, ends; longest edge, smallest angle in radians. */
export function writeDrawing(file: string, { xy, segments, maxEdge }: Drawing, minAngle: number): void {
  const sizes = Int32Array.of(xy.length / 2, segments.length / 2);
  writeArrays(file, [sizes, xy, segments, Float64Array.of(maxEdge, minAngle)]);
}

/** Corners and triangles; coordinates, corners of triangles, 1 where steel, current density; the law's two figures. */
export function writeField(file: string, { mesh, setup }: FieldProblem): void {
  const names = Array.from(mesh.triangleToRegion, (region) => mesh.regionNames[region]);
  writeArrays(file, [
    Int32Array.of(mesh.xy.length / 2, names.length),
    mesh.xy,
    mesh.triangles,
    Int32Array.from(names, (name) => (setup.materials[name].kind === 'curve' ? 1 : 0)),
    Float64Array.from(names, (name) => setup.currentDensity?.[name] ?? 0),
    Float64Array.of(REST, RISE),
  ]);
}

/** What `writeLinear` wrote. */
export function readLinear(bytes: Uint8Array): Pick<LinearProblem, 'pattern' | 'values' | 'right'> {
  let at = 0;
  const take = (size: number): ArrayBuffer => {
    const part = new ArrayBuffer(size);
    new Uint8Array(part).set(bytes.subarray(at, at + size));
    at += size;
    return part;
  };
  const [n, entries] = new Int32Array(take(8));
  const pattern = { n, start: new Int32Array(take(4 * n + 4)), row: new Int32Array(take(4 * entries)) };
  return { pattern, values: new Float64Array(take(8 * entries)), right: new Float64Array(take(8 * n)) };
}
