import { materialOf, own } from '../assembly/setup.js';
import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { newHeap, popHeap, pushHeap } from '../base/heap.js';
import { globalNode } from '../elements/six-node.js';
import { SNAP } from '../geometry/limits.js';
import { BEYOND_REGION } from '../geometry/unbounded.js';
import type { Mesh } from '../mesh/mesh.js';
import { cornerCount, edgeCount, nodeCount, nodePoint, triangleCount } from '../mesh/mesh.js';
import type { Field } from './field.js';

/** A mesh with what fills it, solved or not. */
type Filled = Pick<Field, 'mesh' | 'setup'>;

/** Regions of air: where Maxwell's stress has no divergence. */
export function airRegions({ mesh, setup }: Filled): string[] {
  return mesh.regionNames.filter((name) => {
    if (name === BEYOND_REGION) return false; // an image: distances there are not those of space
    const material = materialOf(setup, name);
    const current = (own(setup.currentDensity, name) ?? 0) !== 0 || (own(setup.current, name) ?? 0) !== 0;
    return material?.kind === 'linear' && material.muR === 1 && !current;
  });
}

/**
 * A function of the air that is 1 on the named regions and 0 on all else that is not air, and on the outline: a smooth step of
 * d0/(d1 + d0), with d1 and d0 the distances from either, so that it changes midway, away from the singular corners of both, and
 * is the same whatever the mesh.
 *
 * @returns Float64Array(nodes): its value at every node; quadratic in between
 * @throws InputError where the body is not surrounded by air (linear, mu_r = 1, no current) or touches another body
 */
export function airLayer(field: Field, regions: readonly string[]): Float64Array {
  const { mesh } = field;
  const place = placesOf(field, regions);
  const surroundings = surroundingsOf(field);
  const fromBody = distancesFrom(mesh, surroundings, place, BODY);
  const fromOther = distancesFrom(mesh, surroundings, place, OTHER);
  return fromBody.map((d1, node) =>
    d1 === 0 ? 1 : fromOther[node] === Infinity ? 1 : smoothStep(fromOther[node] / (d1 + fromOther[node])),
  );
}

/** 0 up to a tenth, 1 from nine tenths on, with two continuous derivatives between. */
function smoothStep(w: number): number {
  const s = Math.min(1, Math.max(0, 1.25 * w - 0.125));
  return s * s * s * (10 + s * (6 * s - 15));
}

const AIR = 0;
const BODY = 1;
const OTHER = 2;

/** Why there is no force on the regions; undefined where it is defined. */
export function forceFault(
  filled: Filled,
  regions: readonly string[],
  { place, other } = touchedBy(filled, regions),
): Fault | undefined {
  if (!place.includes(BODY)) {
    return fault('names no region with area', `regions here are: ${filled.mesh.regionNames.join(', ')}`);
  }
  if (!place.some((at, node) => at === BODY && other[node] === 1)) return undefined;
  return fault(
    'touches another body',
    'a force is defined on a body with air all round it; name all parts that move together',
  );

  function fault(wrong: string, remedy: string): Fault {
    return { code: 'no-force', key: regions.join(', '), wrong, remedy };
  }
}

/** By node: BODY where it lies on the body, else AIR; and 1 where it lies on things that are neither. */
function touchedBy(filled: Filled, regions: readonly string[]) {
  const { mesh } = filled;
  const air = airRegions(filled);
  const kind = mesh.regionNames.map((name) => (regions.includes(name) ? BODY : air.includes(name) ? AIR : OTHER));
  const place = new Uint8Array(nodeCount(mesh));
  const other = new Uint8Array(nodeCount(mesh));
  for (let t = 0; t < triangleCount(mesh); t++) {
    const k = kind[mesh.triangleToRegion[t]];
    for (let i = 0; i < 6; i++) {
      if (k === BODY) place[globalNode(mesh, t, i)] = BODY;
      else if (k === OTHER) other[globalNode(mesh, t, i)] = 1;
    }
  }
  return { place, other };
}

/** What each node lies on: the body, other things (the outline too, where it is not bound), or air alone. */
function placesOf(field: Field, regions: readonly string[]): Uint8Array {
  const { mesh } = field;
  const touched = touchedBy(field, regions);
  const none = forceFault(field, regions, touched);
  if (none !== undefined) throw new InputError([none]);
  const { place, other } = touched;
  // Stress on the outline pushes whatever lies beyond; on bound sides what leaves by the one comes in by the other, and a
  // side that cuts the body is a plane of symmetry, along which there is no stress.
  const cut = sidesWith(mesh, place);
  for (let e = 0; e < edgeCount(mesh); e++) {
    const side = mesh.edgeToSide[e];
    if (side < 0 || cut.has(side) || isBound(field, side)) continue;
    for (const node of nodesOfEdge(mesh, e)) other[node] = 1;
  }
  return place.map((at, node) => (at === AIR && other[node] === 1 ? OTHER : at));
}

/** Sides of the outline that the body touches. */
function sidesWith(mesh: Mesh, place: Uint8Array): Set<number> {
  const sides = new Set<number>();
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (mesh.edgeToSide[e] >= 0 && nodesOfEdge(mesh, e).some((node) => place[node] === BODY))
      sides.add(mesh.edgeToSide[e]);
  }
  return sides;
}

/**
 * Whether a side of the outline that is not bound cuts the body, and across which axes: there the body goes on as its mirror
 * image, and the stress in the cut is not known.
 */
export function cutsAcross(field: Field, regions: readonly string[]): { readonly x: boolean; readonly y: boolean } {
  const { mesh } = field;
  const cut = [...sidesWith(mesh, placesOf(field, regions))].filter((side) => !isBound(field, side));
  const across = (k: 0 | 1): boolean =>
    mesh.edgeToSide.some((side, e) => {
      if (!cut.includes(side)) return false;
      const [a, b] = [2 * mesh.edges[2 * e], 2 * mesh.edges[2 * e + 1]];
      const along = Math.abs(mesh.xy[b + 1 - k] - mesh.xy[a + 1 - k]);
      return along > 1e-9 * Math.abs(mesh.xy[b + k] - mesh.xy[a + k]); // it runs along the other axis, at least in part
    });
  return { x: across(0), y: across(1) };
}

const nodesOfEdge = (mesh: Mesh, e: number): readonly [number, number, number] => [
  mesh.edges[2 * e],
  mesh.edges[2 * e + 1],
  cornerCount(mesh) + e,
];

function isBound({ mesh, setup }: Field, side: number): boolean {
  const kind = own(setup.edges, mesh.sideNames[side])?.kind;
  return mesh.beyond === undefined && (kind === 'repeating' || kind === 'reversing');
}

/** Triangles round each node, and the node each is one with on a bound side, -1 where there is none. */
interface Surroundings {
  readonly start: Int32Array;
  readonly triangles: Int32Array;
  readonly mate: Int32Array;
}

function surroundingsOf(field: Field): Surroundings {
  const { mesh } = field;
  const nodes = nodeCount(mesh);
  const start = new Int32Array(nodes + 1);
  const m = triangleCount(mesh);
  for (let t = 0; t < m; t++) for (let i = 0; i < 6; i++) start[globalNode(mesh, t, i) + 1]++;
  for (let node = 0; node < nodes; node++) start[node + 1] += start[node];
  const next = start.slice();
  const triangles = new Int32Array(6 * m);
  for (let t = 0; t < m; t++) for (let i = 0; i < 6; i++) triangles[next[globalNode(mesh, t, i)]++] = t;
  const mate = new Int32Array(nodes).fill(-1);
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (mesh.edgeToMatch[e] < 0 || !isBound(field, mesh.edgeToSide[e])) continue;
    const mates = nodesOfEdge(mesh, mesh.edgeToMatch[e]);
    nodesOfEdge(mesh, e).forEach((node, k) => {
      mate[node] = mates[k];
    });
  }
  return { start, triangles, mate };
}

/**
 * Distance of every node from the edges that lie wholly on `kind`, through the mesh: each node hands the edge nearest to it on to
 * its neighbours, the nearest node first (Dijkstra, A note on two problems in connexion with graphs, 1959, with true distances
 * from the edge in place of lengths of the way). Over a bound side the edge is handed on shifted. An edge must be nearer by a
 * hair than the one before: shifts to and fro, rounded, may bring one nearer each time, for ever.
 */
function distancesFrom(
  mesh: Mesh,
  { start, triangles, mate }: Surroundings,
  place: Uint8Array,
  kind: number,
): Float64Array {
  const nodes = nodeCount(mesh);
  const distance = new Float64Array(nodes).fill(Infinity);
  const nearest = new Int32Array(nodes).fill(-1);
  const shift = new Float64Array(2 * nodes);
  const heap = newHeap();
  const hair = SNAP * extentOf(mesh);
  const offer = (node: number, e: number, dx: number, dy: number): void => {
    const d = place[node] === kind ? 0 : distanceToEdge(mesh, e, node, dx, dy);
    if (!(d < distance[node] - hair)) return;
    distance[node] = d;
    nearest[node] = e;
    shift[2 * node] = dx;
    shift[2 * node + 1] = dy;
    pushHeap(heap, node, d);
  };
  for (let e = 0; e < edgeCount(mesh); e++) {
    const ends = nodesOfEdge(mesh, e);
    if (ends.every((node) => place[node] === kind)) for (const node of ends) offer(node, e, 0, 0);
  }
  for (let node = popHeap(heap); node >= 0; node = popHeap(heap)) {
    const [dx, dy] = [shift[2 * node], shift[2 * node + 1]];
    if (mate[node] >= 0) {
      const [x, y] = nodePoint(mesh, node);
      const [mx, my] = nodePoint(mesh, mate[node]);
      offer(mate[node], nearest[node], dx + mx - x, dy + my - y);
    }
    for (let p = start[node]; p < start[node + 1]; p++) {
      for (let i = 0; i < 6; i++) {
        const other = globalNode(mesh, triangles[p], i);
        if (place[other] !== kind) offer(other, nearest[node], dx, dy);
      }
    }
  }
  return distance;
}

/** The longer of width and height, m. */
function extentOf(mesh: Mesh): number {
  const low = [Infinity, Infinity];
  const high = [-Infinity, -Infinity];
  for (let k = 0; k < mesh.xy.length; k++) {
    low[k % 2] = Math.min(low[k % 2], mesh.xy[k]);
    high[k % 2] = Math.max(high[k % 2], mesh.xy[k]);
  }
  return Math.max(high[0] - low[0], high[1] - low[1]);
}

/** Distance of a node from an edge, taken as straight, shifted by (dx, dy). */
function distanceToEdge(mesh: Mesh, e: number, node: number, dx: number, dy: number): number {
  const { xy, edges } = mesh;
  const [a, b] = [2 * edges[2 * e], 2 * edges[2 * e + 1]];
  const [x, y] = nodePoint(mesh, node);
  const [ux, uy] = [xy[b] - xy[a], xy[b + 1] - xy[a + 1]];
  const [px, py] = [x - dx - xy[a], y - dy - xy[a + 1]];
  const s = Math.min(1, Math.max(0, (px * ux + py * uy) / (ux * ux + uy * uy)));
  return Math.hypot(px - s * ux, py - s * uy);
}
