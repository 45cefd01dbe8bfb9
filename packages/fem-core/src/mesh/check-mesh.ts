import { inCircle, orientation } from '../geometry/predicates.js';
import { isUnfolded } from './jacobian.js';
import type { Mesh } from './mesh.js';
import { cornerCount, edgeCount, nodePoint, triangleCount, triangleNodes } from './mesh.js';
import { smallestAngles } from './mesh-angles.js';
import { roundAreas } from './round-areas.js';

/** What a mesh is like, by numbers. */
export interface MeshQuality {
  /** Smallest angle between straight sides, degrees. */
  readonly minAngleDeg: number;
  /** The same away from sharp corners of the drawing (two lines under 60 degrees): what refinement promises. */
  readonly minFreeAngleDeg: number;
  /** Corner area covered by each region, m^2, in the order of regionNames. */
  readonly regionArea: readonly number[];
  /** The same with arcs taken as arcs, m^2: the area drawn, but for rounding. */
  readonly roundArea: readonly number[];
  /** Edges inside a region whose opposite corner lies inside the circle of the neighbour: 0 in a Delaunay mesh. */
  readonly notDelaunay: number;
}

/** Angles, areas and Delaunay property of a mesh; changes and throws nothing. */
export function measureMesh(mesh: Mesh): MeshQuality {
  const { xy, triangles, triangleToRegion } = mesh;
  const regionArea = mesh.regionNames.map(() => 0);
  for (let t = 0; t < triangleCount(mesh); t++) {
    const [a, b, c] = [2 * triangles[3 * t], 2 * triangles[3 * t + 1], 2 * triangles[3 * t + 2]];
    regionArea[triangleToRegion[t]] +=
      0.5 * ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]));
  }
  let notDelaunay = 0;
  for (const _ of edgesNotDelaunay(mesh)) notDelaunay++;
  const { all, free } = smallestAngles(mesh);
  const degrees = (angle: number): number => (angle * 180) / Math.PI;
  return {
    minAngleDeg: degrees(all),
    minFreeAngleDeg: degrees(free),
    regionArea,
    roundArea: roundAreas(mesh),
    notDelaunay,
  };
}

/** Undrawn edges between a triangle and a corner, across the edge, that lies inside the triangle's circle; exact. */
function* edgesNotDelaunay(mesh: Mesh): Generator<{ readonly edge: number; readonly excess: number }> {
  const { xy, triangles, neighbours, triangleToEdge, edgeToCurve } = mesh;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const [a, b, c] = [2 * triangles[3 * t], 2 * triangles[3 * t + 1], 2 * triangles[3 * t + 2]];
    for (let k = 0; k < 3; k++) {
      const u = neighbours[3 * t + k];
      const edge = triangleToEdge[3 * t + k];
      if (u < t || edgeToCurve[edge] >= 0) continue;
      const far = [0, 1, 2].findIndex((i) => neighbours[3 * u + i] === t);
      const d = 2 * triangles[3 * u + far];
      if (!(inCircle(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1], xy[d], xy[d + 1]) > 0)) continue;
      yield { edge, excess: angleOf(mesh, t, k) + angleOf(mesh, u, far) - Math.PI };
    }
  }
}

function angleOf({ xy, triangles }: Mesh, t: number, k: number): number {
  const [p, q, r] = [0, 1, 2].map((i) => 2 * triangles[3 * t + ((k + i) % 3)]);
  const [ux, uy, vx, vy] = [xy[q] - xy[p], xy[q + 1] - xy[p + 1], xy[r] - xy[p], xy[r + 1] - xy[p + 1]];
  return Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy);
}

/** What is known of a mesh beside that it is one. */
export interface MeshExpectation {
  /** All of it, m^2. */
  readonly area?: number;
  /** Of each region, m^2. */
  readonly regionAreas?: readonly number[];
  /** No angle below this away from sharp corners of the drawing, degrees. */
  readonly minFreeAngleDeg?: number;
}

/** Two opposite angles sum up to pi and no more than this, radians: rounding near the end of a cusp. */
export const DELAUNAY_SLACK = 1e-6;

/** Areas and offsets agree to this share of the whole. */
const AREA_SLACK = 1e-8;
const OFFSET_SLACK = 1e-9;

type Broken = (what: string) => never;

/**
 * Proves the promises of `Mesh`:
 * triangles counter-clockwise, with a map that is nowhere turned over where they are curved; edges and neighbours that
 * agree from both sides; Euler's formula; region borders on drawn lines; sides on the outline alone; no corner inside the
 * circle of a triangle across an undrawn edge, by more than `DELAUNAY_SLACK`; matched sides that correspond edge by edge by
 * one translation; the two discs of an open section, pi R^2 each; and what is expected of areas and angles.
 * @throws Error naming the first broken promise, with its triangle or edge
 */
export function checkMesh(mesh: Mesh, expected: MeshExpectation = {}): void {
  const broken: Broken = (what) => {
    throw new Error(`checkMesh: ${what}`);
  };
  checkTriangles(mesh, broken);
  checkEdges(mesh, broken);
  checkWhole(mesh, broken);
  for (const { edge, excess } of edgesNotDelaunay(mesh)) {
    if (excess > DELAUNAY_SLACK) broken(`edge ${edge} is not Delaunay: its opposite angles pass pi by ${excess}`);
  }
  checkMatches(mesh, broken);
  checkBeyond(mesh, broken);
  checkExpected(mesh, expected, broken);
}

function checkTriangles(mesh: Mesh, broken: Broken): void {
  const { xy, triangles, neighbours, triangleToEdge, triangleToRegion, edges, edgeToCurve, edgeToSide } = mesh;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const [a, b, c] = [2 * triangles[3 * t], 2 * triangles[3 * t + 1], 2 * triangles[3 * t + 2]];
    if (!(orientation(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1]) > 0))
      broken(`triangle ${t} is not counter-clockwise`);
    if (!(triangleToRegion[t] >= 0 && triangleToRegion[t] < mesh.regionNames.length))
      broken(`triangle ${t} lies in no region`);
    for (let k = 0; k < 3; k++) {
      const e = triangleToEdge[3 * t + k];
      const ends = [triangles[3 * t + ((k + 1) % 3)], triangles[3 * t + ((k + 2) % 3)]];
      if (edges[2 * e] === edges[2 * e + 1] || !ends.includes(edges[2 * e]) || !ends.includes(edges[2 * e + 1]))
        broken(`edge ${e} does not join corners of triangle ${t}`);
      const u = neighbours[3 * t + k];
      if (u < 0) {
        if (edgeToSide[e] < 0) broken(`edge ${e} of the outline lies on no side`);
        continue;
      }
      if (edgeToSide[e] >= 0) broken(`edge ${e} is on a side and inside`);
      if (![0, 1, 2].some((i) => neighbours[3 * u + i] === t && triangleToEdge[3 * u + i] === e))
        broken(`triangles ${t} and ${u} disagree`);
      if (triangleToRegion[u] !== triangleToRegion[t] && edgeToCurve[e] < 0)
        broken(`edge ${e} parts two regions off any drawn line`);
    }
  }
}

function checkEdges(mesh: Mesh, broken: Broken): void {
  const { xy, edges, middles, edgeToCurve, edgeToSide, triangleToEdge, curved } = mesh;
  const seen = new Uint8Array(edgeCount(mesh));
  for (const e of triangleToEdge) seen[e]++;
  const isArc = (e: number): boolean => edgeToCurve[e] >= 0 && mesh.curves[edgeToCurve[e]].kind === 'arc';
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (seen[e] !== (edgeToSide[e] < 0 ? 2 : 1)) broken(`edge ${e} belongs to ${seen[e]} triangles`);
    if (edgeToSide[e] >= 0 && edgeToCurve[e] < 0) broken(`edge ${e} is on a side and on no drawn line`);
    const [a, b] = [2 * edges[2 * e], 2 * edges[2 * e + 1]];
    for (const i of [0, 1]) {
      const off = Math.abs(middles[2 * e + i] - 0.5 * (xy[a + i] + xy[b + i]));
      if (!isArc(e) && off !== 0) broken(`the middle of straight edge ${e} is not half-way`);
    }
  }
  for (let t = 0; t < triangleCount(mesh); t++) {
    if (curved[t] !== ([0, 1, 2].some((k) => isArc(triangleToEdge[3 * t + k])) ? 1 : 0))
      broken(`triangle ${t} is curved and not said to be, or the other way round`);
    if (curved[t] === 1 && !isUnfolded(...nodesOf(mesh, t))) broken(`the map of curved triangle ${t} turns over`);
  }
}

function nodesOf(mesh: Mesh, t: number): [number[], number[]] {
  const nodes = triangleNodes(mesh, t, new Int32Array(6));
  const points = Array.from(nodes, (node) => nodePoint(mesh, node));
  return [points.map((point) => point[0]), points.map((point) => point[1])];
}

/** In one piece, or two where the section is open, without holes, and no corner idle. */
function checkWhole(mesh: Mesh, broken: Broken): void {
  const count = triangleCount(mesh);
  const done = new Uint8Array(count);
  let pieces = 0;
  for (let seed = 0; seed < count; seed++) {
    if (done[seed] === 1) continue;
    pieces++;
    const stack = [seed];
    done[seed] = 1;
    for (let t = stack.pop(); t !== undefined; t = stack.pop()) {
      for (let k = 0; k < 3; k++) {
        const u = mesh.neighbours[3 * t + k];
        if (u < 0 || done[u] === 1) continue;
        done[u] = 1;
        stack.push(u);
      }
    }
  }
  const wanted = mesh.beyond === undefined ? 1 : 2;
  if (pieces !== wanted) broken(`the mesh is in ${pieces} pieces, not ${wanted}`);
  if (cornerCount(mesh) - edgeCount(mesh) + count !== pieces)
    broken(`Euler: corners - edges + triangles is not ${pieces}`);
  const used = new Uint8Array(cornerCount(mesh));
  for (const v of mesh.triangles) used[v] = 1;
  if (used.includes(0)) broken(`corner ${used.indexOf(0)} belongs to no triangle`);
}

/** Edges of matched sides all have their match, by one translation from chain to chain. */
function checkMatches(mesh: Mesh, broken: Broken): void {
  const { xy, middles, edges, edgeToMatch, edgeToSide } = mesh;
  const bound = new Set<number>();
  const shifts = new Map<string, readonly number[]>();
  let size = 0;
  for (const value of xy) size = Math.max(size, Math.abs(value - xy[0]));
  edgeToMatch.forEach((mate, e) => {
    if (mate < 0) return;
    if (edgeToMatch[mate] !== e) broken(`edge ${e} is not the match of its match`);
    bound.add(edgeToSide[e]);
    const between = (list: Float64Array, p: number, q: number): number[] =>
      [0, 1].map((i) => list[2 * q + i] - list[2 * p + i]);
    const offsets = [
      between(xy, edges[2 * e], edges[2 * mate]),
      between(xy, edges[2 * e + 1], edges[2 * mate + 1]),
      between(middles, e, mate),
    ];
    const pair = `${edgeToSide[e]},${edgeToSide[mate]}`;
    const shift = shifts.get(pair) ?? offsets[0];
    shifts.set(pair, shift);
    for (const [x, y] of offsets) {
      if (Math.hypot(x - shift[0], y - shift[1]) > OFFSET_SLACK * size)
        broken(`edges ${e} and ${mate} do not correspond`);
    }
  });
  edgeToSide.forEach((side, e) => {
    if (bound.has(side) && edgeToMatch[e] < 0) broken(`edge ${e} of a matched side has no match`);
  });
}

function checkBeyond(mesh: Mesh, broken: Broken): void {
  const { beyond, xy } = mesh;
  if (beyond === undefined) return;
  const { infinity, imageCentre, radius, region } = beyond;
  if (xy[2 * infinity] !== imageCentre[0] || xy[2 * infinity + 1] !== imageCentre[1])
    broken(`corner ${infinity} does not stand at the centre of the image`);
  if (mesh.edgeToSide.some((side, e) => side >= 0 && mesh.edgeToMatch[e] < 0)) broken('a rim edge has no match');
  const areas = roundAreas(mesh);
  const disc = Math.PI * radius * radius;
  const near = areas.reduce((sum, area, i) => (i === region ? sum : sum + area), 0);
  for (const [name, area] of [
    ['far', areas[region]],
    ['near', near],
  ] as const) {
    if (Math.abs(area - disc) > AREA_SLACK * disc) broken(`the ${name} disc has ${area} m^2, not ${disc} m^2`);
  }
}

function checkExpected(mesh: Mesh, expected: MeshExpectation, broken: Broken): void {
  const areas = roundAreas(mesh);
  const whole = areas.reduce((sum, area) => sum + area, 0);
  const { area = whole, regionAreas = areas, minFreeAngleDeg = 0 } = expected;
  if (Math.abs(whole - area) > AREA_SLACK * area) broken(`the mesh covers ${whole} m^2, not ${area} m^2`);
  areas.forEach((found, i) => {
    if (!(Math.abs(found - regionAreas[i]) <= AREA_SLACK * whole))
      broken(`region '${mesh.regionNames[i]}' covers ${found} m^2, not ${regionAreas[i]} m^2`);
  });
  const least = minFreeAngleDeg > 0 ? (smallestAngles(mesh).free * 180) / Math.PI : Infinity;
  if (least < minFreeAngleDeg - 1e-9) broken(`an angle is ${least} degrees, away from sharp corners`);
}
