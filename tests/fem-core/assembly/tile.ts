import type { EdgeCondition, Section, Setup } from '@gapwright/fem-core';
import type { System } from '@gapwright/fem-core/equations';
import { assemble, buildSystem, numberUnknowns } from '@gapwright/fem-core/equations';
import { forEachSample } from '@gapwright/fem-core/field';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { cornerCount, edgeCount, triangleCount } from '@gapwright/fem-core/mesh';
import { potentialOf } from '../../../packages/fem-core/src/assembly/unknowns.js';
import { AIR, box, STEEL } from '../../laws/sections.js';

/** A rectangle with a saturable block, a slanted magnet and a round bar: every kind of material, straight and curved. */
export const tile: Section = {
  outline: { kind: 'rectangle', from: [0, 0], to: [0.06, 0.04] },
  background: 'air',
  maxEdge: 0.03,
  regions: [
    box('steel', 0, 0, 0.06, 0.01),
    {
      name: 'magnet',
      shape: {
        kind: 'polygon',
        corners: [
          [0.008, 0.013],
          [0.028, 0.015],
          [0.025, 0.025],
          [0.009, 0.024],
        ],
      },
    },
    { name: 'bar', shape: { kind: 'circle', centre: [0.045, 0.026], radius: 0.007 } },
  ],
  matched: [
    ['left', 'right'],
    ['bottom', 'top'],
  ],
};

export const sources: Setup = {
  materials: { air: AIR, steel: STEEL, magnet: { kind: 'magnet', recoil: 1.08, remanence: [0.4, 1.1] }, bar: AIR },
  currentDensity: { bar: 2e6 },
};

/** All of the tile, sources and iron, with the conditions of its sides. */
export const withEdges = (edges: Readonly<Record<string, EdgeCondition>>, setup: Setup = sources): Setup => ({
  ...setup,
  edges,
});

export const naturalSides: Readonly<Record<string, EdgeCondition>> = {
  left: { kind: 'crossing' },
  right: { kind: 'crossing' },
  bottom: { kind: 'crossing' },
  top: { kind: 'crossing' },
};

export const systemOf = (mesh: Mesh, setup: Setup): System => buildSystem(mesh, setup, numberUnknowns(mesh, setup));

export const potentialAt = (system: System, u: Float64Array): Float64Array =>
  potentialOf(system.unknowns, u, new Float64Array(system.source.length));

export function residualAt(system: System, u: Float64Array): Float64Array {
  const residual = new Float64Array(system.unknowns.count);
  assemble(system, potentialAt(system, u), residual);
  return residual;
}

/** The tangent as a full square, rows after one another. */
export function tangentAt(system: System, u: Float64Array): Float64Array {
  const lower = new Float64Array(system.pattern.row.length);
  assemble(system, potentialAt(system, u), new Float64Array(system.pattern.n), lower);
  return squareOf(system, lower);
}

export function squareOf({ pattern: { n, start, row } }: System, lower: Float64Array): Float64Array {
  const square = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      square[n * row[p] + j] = lower[p];
      square[n * j + row[p]] = lower[p];
    }
  }
  return square;
}

/** The functional whose least value the solution is: the stored energy less the integral of J A, J/m. */
export function functionalAt(system: System, setup: Setup, u: Float64Array): number {
  const { mesh } = system;
  const potential = potentialAt(system, u);
  const report = { converged: true, steps: 0, residuals: [], stepLengths: [], unknowns: 0, factorEntries: 0 };
  let sum = 0;
  forEachSample({ mesh, setup, potential, report }, 'all', (s) => {
    const density = setup.currentDensity?.[mesh.regionNames[mesh.triangleToRegion[s.triangle]]] ?? 0;
    sum += s.area * (s.energy - density * s.a);
  });
  return sum;
}

/** Unknowns of a field of about the given flux density in tesla, with nothing regular about it. */
export const unevenField = (system: System, density: number): Float64Array =>
  Float64Array.from({ length: system.unknowns.count }, (_, i) => 0.008 * density * Math.sin(3 + 1.7 * i * i));

export const largest = (v: ArrayLike<number>): number =>
  Array.from(v).reduce((most, value) => Math.max(most, Math.abs(value)), 0);

/**
 * The mesh and its copy shifted to the right by its width, joined where the left and right sides meet; regions of the
 * copy bear a prime. Corners and edges of the first keep their numbers, those of the copy follow.
 *
 * @returns the joined mesh, and where each node of the given one went in the copy
 */
export function doubleUp(mesh: Mesh, width: number): { mesh: Mesh; copyOf: Int32Array } {
  const [n, e, m] = [cornerCount(mesh), edgeCount(mesh), triangleCount(mesh)];
  const [left, right] = ['left', 'right'].map((name) => mesh.sideNames.indexOf(name));
  const cornerTo = new Int32Array(n).fill(-1);
  const edgeTo = new Int32Array(e).fill(-1);
  for (let k = 0; k < e; k++) {
    if (mesh.edgeToSide[k] !== left) continue;
    const mate = mesh.edgeToMatch[k]; // the left side of the copy is the right side of the first
    edgeTo[k] = mate;
    for (const end of [0, 1]) cornerTo[mesh.edges[2 * k + end]] = mesh.edges[2 * mate + end];
  }
  const [newCorners, newEdges] = [cornerTo, edgeTo].map((to, i) => {
    const kept: number[] = [];
    to.forEach((known, k) => {
      if (known >= 0) return;
      to[k] = (i === 0 ? n : e) + kept.length;
      kept.push(k);
    });
    return kept;
  });
  const shifted = (xy: Float64Array, k: number): number[] => [xy[2 * k] + width, xy[2 * k + 1]];
  const sideOf = (k: number, copy: boolean): number =>
    mesh.edgeToSide[k] === (copy ? left : right) ? -1 : mesh.edgeToSide[k];
  const matchOf = (k: number, copy: boolean): number => {
    const mate = mesh.edgeToMatch[k];
    if (mate < 0 || sideOf(k, copy) < 0) return -1;
    const across = mesh.edgeToSide[k] === left || mesh.edgeToSide[k] === right;
    return copy !== across ? edgeTo[mate] : mate;
  };
  const both = (of: (k: number, copy: boolean) => number): Int32Array =>
    Int32Array.from([...Array.from({ length: e }, (_, k) => of(k, false)), ...newEdges.map((k) => of(k, true))]);
  const around = (list: Int32Array, to: (value: number) => number): Int32Array =>
    Int32Array.from([...list, ...Array.from(list, to)]);
  const joined: Mesh = {
    ...mesh,
    xy: Float64Array.from([...mesh.xy, ...newCorners.flatMap((k) => shifted(mesh.xy, k))]),
    middles: Float64Array.from([...mesh.middles, ...newEdges.flatMap((k) => shifted(mesh.middles, k))]),
    triangles: around(mesh.triangles, (v) => cornerTo[v]),
    triangleToEdge: around(mesh.triangleToEdge, (k) => edgeTo[k]),
    neighbours: around(mesh.neighbours, (t) => (t < 0 ? -1 : t + m)),
    triangleToRegion: around(mesh.triangleToRegion, (region) => region + mesh.regionNames.length),
    regionNames: [...mesh.regionNames, ...mesh.regionNames.map((name) => `${name}'`)],
    edges: Int32Array.from([
      ...mesh.edges,
      ...newEdges.flatMap((k) => [cornerTo[mesh.edges[2 * k]], cornerTo[mesh.edges[2 * k + 1]]]),
    ]),
    edgeToCurve: both((k) => mesh.edgeToCurve[k]),
    edgeToSide: both(sideOf),
    edgeToMatch: both(matchOf),
    curved: Uint8Array.from([...mesh.curved, ...mesh.curved]),
  };
  joinNeighbours(joined, m);
  halveStraightEdges(joined);
  const copyOf = Int32Array.from([...cornerTo, ...Array.from(edgeTo, (k) => cornerCount(joined) + k)]);
  return { mesh: joined, copyOf };
}

/** Shifted middles are half-way but for rounding; a mesh promises them to the last bit. */
function halveStraightEdges({ xy, edges, middles, edgeToCurve, curves }: Mesh): void {
  edgeToCurve.forEach((curve, k) => {
    if (curve >= 0 && curves[curve].kind === 'arc') return;
    for (const i of [0, 1]) middles[2 * k + i] = 0.5 * (xy[2 * edges[2 * k] + i] + xy[2 * edges[2 * k + 1] + i]);
  });
}

/** Triangles of the first and of the copy that share an edge become neighbours. */
function joinNeighbours(mesh: Mesh, m: number): void {
  const slotOf = new Map<number, number>();
  for (let slot = 0; slot < 3 * m; slot++) if (mesh.neighbours[slot] < 0) slotOf.set(mesh.triangleToEdge[slot], slot);
  for (let slot = 3 * m; slot < 6 * m; slot++) {
    const across = mesh.neighbours[slot] < 0 ? slotOf.get(mesh.triangleToEdge[slot]) : undefined;
    if (across === undefined) continue;
    mesh.neighbours[slot] = Math.floor(across / 3);
    mesh.neighbours[across] = Math.floor(slot / 3);
  }
}
