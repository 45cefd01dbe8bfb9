import { pointOnCurve } from '../geometry/curve.js';
import type { Mesh } from './mesh.js';
import { cornerCount, triangleCount } from './mesh.js';
import type { Triangulation } from './triangulation.js';
import { addVertex, emptyTriangulation, inUse, nextHalf, takeSlot, triangleOf } from './triangulation.js';

/** The finished triangulation as a mesh: numbers without gaps, edges numbered, arcs given their middle nodes. */
export function meshOf(tri: Triangulation, regionNames: readonly string[], sideNames: readonly string[]): Mesh {
  const slots: number[] = [];
  for (let t = 0; t < tri.slotCount; t++) if (inUse(tri, t)) slots.push(t);
  const m = slots.length;
  const slotTo = new Int32Array(tri.slotCount).fill(-1);
  const vertexTo = new Int32Array(tri.vertexCount).fill(-1);
  const triangles = new Int32Array(3 * m);
  const triangleToRegion = new Int32Array(m);
  const xy: number[] = [];
  slots.forEach((t, i) => {
    slotTo[t] = i;
    triangleToRegion[i] = tri.region[t];
    for (let k = 0; k < 3; k++) {
      const v = tri.origin[3 * t + k];
      if (vertexTo[v] < 0) {
        vertexTo[v] = xy.length / 2;
        xy.push(tri.xy[2 * v], tri.xy[2 * v + 1]);
      }
      triangles[3 * i + k] = vertexTo[v];
    }
  });
  const triangleToEdge = new Int32Array(3 * m);
  const neighbours = new Int32Array(3 * m);
  const edges: number[] = [];
  const segmentToEdge = new Int32Array(tri.segments.from.length).fill(-1);
  const edgeToSegment: number[] = [];
  slots.forEach((t, i) => {
    for (let k = 0; k < 3; k++) {
      const h = 3 * t + ((k + 1) % 3); // the half-edge opposite corner k
      const g = tri.twin[h];
      const u = g < 0 ? -1 : slotTo[triangleOf(g)];
      neighbours[3 * i + k] = u;
      if (u >= 0 && u < i) {
        triangleToEdge[3 * i + k] = triangleToEdge[3 * u + ((g + 2) % 3)];
        continue;
      }
      const e = edges.length / 2;
      const s = tri.segment[h];
      const forward = s < 0 || tri.segments.from[s] === tri.origin[h];
      const [a, b] = [vertexTo[tri.origin[h]], vertexTo[tri.origin[nextHalf(h)]]];
      edges.push(forward ? a : b, forward ? b : a); // stored as the segment runs, so that matched ends correspond
      edgeToSegment.push(s);
      if (s >= 0) segmentToEdge[s] = e;
      triangleToEdge[3 * i + k] = e;
    }
  });
  return finish(
    tri,
    { xy, triangles, triangleToEdge, neighbours, triangleToRegion, edges, edgeToSegment, segmentToEdge },
    regionNames,
    sideNames,
  );
}

interface Numbered {
  readonly xy: readonly number[];
  readonly triangles: Int32Array;
  readonly triangleToEdge: Int32Array;
  readonly neighbours: Int32Array;
  readonly triangleToRegion: Int32Array;
  readonly edges: readonly number[];
  readonly edgeToSegment: readonly number[];
  readonly segmentToEdge: Int32Array;
}

function finish(tri: Triangulation, n: Numbered, regionNames: readonly string[], sideNames: readonly string[]): Mesh {
  const { segments, curves } = tri;
  const edgeCount = n.edgeToSegment.length;
  const middles = new Float64Array(2 * edgeCount);
  const arcEdge = new Uint8Array(edgeCount);
  for (let e = 0; e < edgeCount; e++) {
    const [a, b] = [2 * n.edges[2 * e], 2 * n.edges[2 * e + 1]];
    const s = n.edgeToSegment[e];
    const curve = s < 0 ? undefined : curves[segments.curve[s]];
    if (curve !== undefined && curve.kind === 'arc') {
      arcEdge[e] = 1;
      middles.set(pointOnCurve(curve, n.xy[a], n.xy[a + 1], n.xy[b], n.xy[b + 1], 0.5), 2 * e);
    } else {
      middles[2 * e] = 0.5 * (n.xy[a] + n.xy[b]);
      middles[2 * e + 1] = 0.5 * (n.xy[a + 1] + n.xy[b + 1]);
    }
  }
  const ofSegment = (e: number, list: readonly number[]): number =>
    n.edgeToSegment[e] < 0 ? -1 : list[n.edgeToSegment[e]];
  return {
    xy: Float64Array.from(n.xy),
    triangles: n.triangles,
    triangleToEdge: n.triangleToEdge,
    neighbours: n.neighbours,
    triangleToRegion: n.triangleToRegion,
    regionNames,
    edges: Int32Array.from(n.edges),
    middles,
    edgeToCurve: Int32Array.from({ length: edgeCount }, (_, e) => ofSegment(e, segments.curve)),
    curves,
    edgeToSide: Int32Array.from({ length: edgeCount }, (_, e) => ofSegment(e, segments.side)),
    sideNames,
    edgeToMatch: Int32Array.from({ length: edgeCount }, (_, e) => {
      const mate = ofSegment(e, segments.match);
      return mate < 0 ? -1 : n.segmentToEdge[mate];
    }),
    curved: Uint8Array.from({ length: n.triangleToRegion.length }, (_, t) =>
      Math.max(
        arcEdge[n.triangleToEdge[3 * t]],
        arcEdge[n.triangleToEdge[3 * t + 1]],
        arcEdge[n.triangleToEdge[3 * t + 2]],
      ),
    ),
  };
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
