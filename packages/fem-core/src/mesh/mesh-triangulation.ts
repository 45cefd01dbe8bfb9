import type { Curve } from '../geometry/curve.js';
import type { Mesh } from './mesh.js';
import { cornerCount, triangleCount } from './mesh.js';
import { middleOnArc } from './middle-on-arc.js';
import type { Triangulation } from './triangulation.js';
import { addVertex, emptyTriangulation, inUse, nextHalf, takeSlot, triangleOf } from './triangulation.js';
import { zOrder } from './z-order.js';

/** The finished triangulation as a mesh: numbers without gaps, edges numbered, arcs given their middle nodes. */
export function meshOf(tri: Triangulation, regionNames: readonly string[], sideNames: readonly string[]): Mesh {
  const { segments, curves } = tri;
  const slots = orderedSlots(tri);
  const corners = numberCorners(tri, slots);
  const edges = numberEdges(tri, slots, corners.vertexToCorner);
  const { edgeToSegment } = edges;
  const edgeToCurve = listed(edgeToSegment, segments.curve);
  return {
    xy: corners.xy,
    triangles: corners.triangles,
    triangleToEdge: edges.triangleToEdge,
    neighbours: edges.neighbours,
    triangleToRegion: listed(slots, tri.region),
    regionNames,
    edges: edges.edges,
    middles: middlesOf(corners.xy, edges.edges, edgeToCurve, curves),
    edgeToCurve,
    curves,
    edgeToSide: listed(edgeToSegment, segments.side),
    sideNames,
    edgeToMatch: listed(listed(edgeToSegment, segments.match), edges.segmentToEdge),
    curved: curvedOf(edges.triangleToEdge, edgeToCurve, curves),
  };
}

/**
 * Slots in use, along Morton's curve through the middles of their triangles: what is worked on together then lies together
 * in memory, and in the matrix, whose corners and edges are numbered after the triangles.
 */
function orderedSlots(tri: Triangulation): Int32Array {
  const { xy, origin, slotCount } = tri;
  const slots = new Int32Array(slotCount);
  const middles = new Float64Array(2 * slotCount);
  let m = 0;
  for (let t = 0; t < slotCount; t++) {
    if (!inUse(tri, t)) continue;
    const a = 2 * origin[3 * t];
    const b = 2 * origin[3 * t + 1];
    const c = 2 * origin[3 * t + 2];
    middles[2 * m] = xy[a] + xy[b] + xy[c];
    middles[2 * m + 1] = xy[a + 1] + xy[b + 1] + xy[c + 1];
    slots[m++] = t;
  }
  return listed(zOrder(middles.subarray(0, 2 * m)), slots);
}

interface Corners {
  readonly xy: Float64Array;
  readonly triangles: Int32Array;
  readonly vertexToCorner: Int32Array;
}

/** Corners are numbered as the triangles come to them. */
function numberCorners(tri: Triangulation, slots: Int32Array): Corners {
  const { origin } = tri;
  const m = slots.length;
  const triangles = new Int32Array(3 * m);
  const vertexToCorner = new Int32Array(tri.vertexCount).fill(-1);
  const xy = new Float64Array(2 * tri.vertexCount);
  let n = 0;
  for (let i = 0; i < m; i++) {
    for (let k = 0; k < 3; k++) {
      const v = origin[3 * slots[i] + k];
      if (vertexToCorner[v] < 0) {
        vertexToCorner[v] = n;
        xy[2 * n] = tri.xy[2 * v];
        xy[2 * n + 1] = tri.xy[2 * v + 1];
        n++;
      }
      triangles[3 * i + k] = vertexToCorner[v];
    }
  }
  return { xy: xy.slice(0, 2 * n), triangles, vertexToCorner };
}

interface Edges {
  readonly edges: Int32Array;
  readonly triangleToEdge: Int32Array;
  readonly neighbours: Int32Array;
  readonly edgeToSegment: Int32Array;
  readonly segmentToEdge: Int32Array;
}

/** Edges are numbered as the triangles come to them, and stored as their segments run, so that matched ends correspond. */
function numberEdges(tri: Triangulation, slots: Int32Array, vertexToCorner: Int32Array): Edges {
  const { origin, twin, segment, segments } = tri;
  const m = slots.length;
  const slotTo = new Int32Array(tri.slotCount).fill(-1);
  for (let i = 0; i < m; i++) slotTo[slots[i]] = i;
  const triangleToEdge = new Int32Array(3 * m);
  const neighbours = new Int32Array(3 * m);
  const edges = new Int32Array(6 * m);
  const edgeToSegment = new Int32Array(3 * m);
  const segmentToEdge = new Int32Array(segments.from.length).fill(-1);
  let count = 0;
  for (let i = 0; i < m; i++) {
    for (let k = 0; k < 3; k++) {
      const h = 3 * slots[i] + (k === 2 ? 0 : k + 1); // the half-edge opposite corner k
      const g = twin[h];
      const u = g < 0 ? -1 : slotTo[triangleOf(g)];
      neighbours[3 * i + k] = u;
      if (u >= 0 && u < i) {
        triangleToEdge[3 * i + k] = triangleToEdge[3 * u + ((g + 2) % 3)];
        continue;
      }
      const s = segment[h];
      const forward = s < 0 || segments.from[s] === origin[h];
      edges[2 * count + (forward ? 0 : 1)] = vertexToCorner[origin[h]];
      edges[2 * count + (forward ? 1 : 0)] = vertexToCorner[origin[nextHalf(h)]];
      edgeToSegment[count] = s;
      if (s >= 0) segmentToEdge[s] = count;
      triangleToEdge[3 * i + k] = count++;
    }
  }
  return {
    edges: edges.slice(0, 2 * count),
    triangleToEdge,
    neighbours,
    edgeToSegment: edgeToSegment.slice(0, count),
    segmentToEdge,
  };
}

/** What the list says of each of those named, -1 for those named -1. */
function listed(named: Int32Array, list: ArrayLike<number>): Int32Array {
  const told = new Int32Array(named.length).fill(-1);
  for (let i = 0; i < told.length; i++) if (named[i] >= 0) told[i] = list[named[i]];
  return told;
}

function middlesOf(
  xy: Float64Array,
  edges: Int32Array,
  edgeToCurve: Int32Array,
  curves: readonly Curve[],
): Float64Array {
  const middles = new Float64Array(edges.length);
  for (let e = 0; e < edgeToCurve.length; e++) {
    const a = 2 * edges[2 * e];
    const b = 2 * edges[2 * e + 1];
    middles[2 * e] = 0.5 * (xy[a] + xy[b]);
    middles[2 * e + 1] = 0.5 * (xy[a + 1] + xy[b + 1]);
    if (edgeToCurve[e] < 0) continue;
    const curve = curves[edgeToCurve[e]];
    if (curve.kind === 'arc') middles.set(middleOnArc(curve, xy[a], xy[a + 1], xy[b], xy[b + 1]), 2 * e);
  }
  return middles;
}

/** 1 for triangles with an edge on an arc. */
function curvedOf(triangleToEdge: Int32Array, edgeToCurve: Int32Array, curves: readonly Curve[]): Uint8Array {
  const curved = new Uint8Array(triangleToEdge.length / 3);
  for (let i = 0; i < triangleToEdge.length; i++) {
    const curve = edgeToCurve[triangleToEdge[i]];
    if (curve >= 0 && curves[curve].kind === 'arc') curved[(i / 3) | 0] = 1;
  }
  return curved;
}

/** The mesh opened for further work, with the longest edge wanted in each triangle. */
export function triangulationOf(mesh: Mesh, wanted: Float64Array): Triangulation {
  const m = triangleCount(mesh);
  const tri = emptyTriangulation(2 * cornerCount(mesh), 2 * m, mesh.curves);
  for (let v = 0; v < cornerCount(mesh); v++) addVertex(tri, mesh.xy[2 * v], mesh.xy[2 * v + 1]);
  const { segments } = tri;
  const edgeToSegment = new Int32Array(mesh.edgeToCurve.length).fill(-1);
  mesh.edgeToCurve.forEach((curve, e) => {
    if (curve < 0) return;
    edgeToSegment[e] = segments.from.length;
    segments.from.push(mesh.edges[2 * e]);
    segments.to.push(mesh.edges[2 * e + 1]);
    segments.curve.push(curve);
    segments.side.push(mesh.edgeToSide[e]);
    segments.match.push(-1);
    segments.half.push(-1);
  });
  mesh.edgeToMatch.forEach((mate, e) => {
    if (mate >= 0) segments.match[edgeToSegment[e]] = edgeToSegment[mate];
  });
  for (let t = 0; t < m; t++) {
    takeSlot(tri);
    tri.region[t] = mesh.triangleToRegion[t];
    tri.size[t] = wanted[t];
    for (let k = 0; k < 3; k++) {
      const h = 3 * t + k; // from corner k to k + 1: opposite corner k + 2
      const across = (k + 2) % 3;
      const u = mesh.neighbours[3 * t + across];
      tri.origin[h] = mesh.triangles[h];
      const s = edgeToSegment[mesh.triangleToEdge[3 * t + across]];
      tri.segment[h] = s;
      if (s >= 0) segments.half[s] = h;
      tri.twin[h] = u < 0 ? -1 : halfTowards(mesh, u, mesh.triangleToEdge[3 * t + across]);
    }
  }
  return tri;
}

function halfTowards(mesh: Mesh, t: number, edge: number): number {
  for (let k = 0; k < 3; k++) if (mesh.triangleToEdge[3 * t + k] === edge) return 3 * t + ((k + 1) % 3);
  throw new Error('halfTowards: neighbours disagree about their common edge');
}
