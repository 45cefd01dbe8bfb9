import Delaunator from 'delaunator';
import { InputError } from '../base/fault.js';
import type { PlanarGraph } from '../geometry/planar-graph.js';
import { clearLenses } from './lenses.js';
import { nameRegions, nameRegionsBy, OUTSIDE, regionsBeside } from './region-parts.js';
import { tooNear } from './too-near.js';
import type { Triangulation } from './triangulation.js';
import {
  addVertex,
  circleHolds,
  emptyTriangulation,
  flip,
  inUse,
  nextHalf,
  previousHalf,
  releaseSlot,
  takeSlot,
  triangleOf,
  turn,
} from './triangulation.js';

/**
 * Constrained Delaunay triangulation of a section: `delaunator` triangulates the points, the segments are recovered by
 * flips (Sloan, A fast algorithm for generating constrained Delaunay triangulations, 1993), Lawson's flips with exact
 * predicates make it Delaunay, and each part between segments gets its region, see `nameRegions`.
 * Lines that turn out to part nothing (covered by a later region) are dropped.
 * @throws InputError for lines too near each other, and what `nameRegions` refuses
 */
export function triangulateGraph(given: PlanarGraph): Triangulation {
  const drawn = given.segmentToShapes.flatMap((shapes, s) => (shapes.length > 0 ? [s] : []));
  const graph = clearLenses(onlySegments(given, drawn));
  let tri = constrained(graph);
  nameRegions(tri, graph, outermostOf(tri));
  const beside = regionsBeside(tri);
  const useful = graph.segmentToShapes.flatMap((_, s) => (beside[2 * s] === beside[2 * s + 1] ? [] : [s]));
  if (useful.length < graph.segmentToCurve.length) {
    tri = constrained(onlySegments(graph, useful));
    nameRegionsBy(tri, beside, (s) => useful[s]);
  }
  removeOutside(tri);
  return tri;
}

function constrained(graph: PlanarGraph): Triangulation {
  const tri = delaunayOf(graph);
  recoverSegments(tri, graph);
  lawson(tri);
  return tri;
}

/** All points of the graph and the four corners of a box well outside it. */
function delaunayOf(graph: PlanarGraph): Triangulation {
  const count = graph.points.length / 2;
  const box = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
  for (let i = 0; i < count; i++) {
    box.x0 = Math.min(box.x0, graph.points[2 * i]);
    box.x1 = Math.max(box.x1, graph.points[2 * i]);
    box.y0 = Math.min(box.y0, graph.points[2 * i + 1]);
    box.y1 = Math.max(box.y1, graph.points[2 * i + 1]);
  }
  const size = Math.max(box.x1 - box.x0, box.y1 - box.y0);
  const tri = emptyTriangulation(2 * count + 16, 4 * count + 32, graph.curves);
  for (let i = 0; i < count; i++) addVertex(tri, graph.points[2 * i], graph.points[2 * i + 1]);
  addVertex(tri, box.x0 - size, box.y0 - size);
  addVertex(tri, box.x1 + size, box.y0 - size);
  addVertex(tri, box.x1 + size, box.y1 + size);
  addVertex(tri, box.x0 - size, box.y1 + size);
  // delaunator drops points nearer than 2^-52: scale by a power of two, which rounds nothing, to a size near 1.
  const scale = 2 ** -Math.round(Math.log2(size));
  const raw = new Delaunator(tri.xy.slice(0, 2 * tri.vertexCount).map((value) => value * scale));
  const triangles = raw.triangles.length / 3;
  for (let t = 0; t < triangles; t++) {
    takeSlot(tri);
    // delaunator counts clockwise where y points up: turn each triangle over, keeping half-edge slots in step.
    tri.origin[3 * t] = raw.triangles[3 * t];
    tri.origin[3 * t + 1] = raw.triangles[3 * t + 2];
    tri.origin[3 * t + 2] = raw.triangles[3 * t + 1];
    for (let k = 0; k < 3; k++) {
      const opposite = raw.halfedges[3 * t + turned(k)];
      tri.twin[3 * t + k] = opposite < 0 ? -1 : 3 * triangleOf(opposite) + turned(opposite % 3);
    }
  }
  return tri;
}

/** Half-edge k of a triangle a b c (a-b, b-c, c-a) is half-edge turned(k) of a c b (a-c, c-b, b-a), backwards. */
const turned = (k: number): number => 2 - k;

/** Per vertex some half-edge that starts there. */
function outgoing(tri: Triangulation): Int32Array {
  const out = new Int32Array(tri.vertexCount).fill(-1);
  for (let h = 0; h < 3 * tri.slotCount; h++) out[tri.origin[h]] = h;
  return out;
}

function recoverSegments(tri: Triangulation, graph: PlanarGraph): void {
  const out = outgoing(tri);
  const { segments } = tri;
  for (let s = 0; s < graph.segmentToCurve.length; s++) {
    const a = graph.segments[2 * s];
    const b = graph.segments[2 * s + 1];
    segments.from.push(a);
    segments.to.push(b);
    segments.curve.push(graph.segmentToCurve[s]);
    segments.side.push(graph.segmentToSide[s]);
    segments.match.push(graph.segmentToMatch[s]);
    segments.half.push(-1);
    recover(tri, out, a, b);
    const h = halfBetween(tri, out, a, b);
    if (h < 0) throw tooNear();
    tri.segment[h] = s;
    tri.segment[tri.twin[h]] = s;
    segments.half[s] = h;
  }
}

/** Flips edges until a-b is one. No point lies on a-b: the planar graph was cut there. */
function recover(tri: Triangulation, out: Int32Array, a: number, b: number): void {
  if (halfBetween(tri, out, a, b) >= 0) return;
  const crossing = crossedEdges(tri, out, a, b);
  let idle = 0;
  for (let at = 0; at < crossing.length; at++) {
    const [u, v] = crossing[at];
    const h = halfBetween(tri, out, u, v);
    if (h < 0 || tri.segment[h] >= 0) throw tooNear(); // drawn lines that cross, but for the snapping distance
    const c = tri.origin[previousHalf(h)];
    const d = tri.origin[previousHalf(tri.twin[h])];
    const { xy } = tri;
    const convex =
      turn(tri, c, d, xy[2 * u], xy[2 * u + 1]) > 0 !== turn(tri, c, d, xy[2 * v], xy[2 * v + 1]) > 0 &&
      turn(tri, c, d, xy[2 * u], xy[2 * u + 1]) !== 0 &&
      turn(tri, c, d, xy[2 * v], xy[2 * v + 1]) !== 0;
    if (!convex) {
      if (++idle > crossing.length + 10) {
        throw tooNear();
      }
      crossing.push([u, v]);
      continue;
    }
    idle = 0;
    flip(tri, h);
    for (const e of [h, tri.twin[3 * triangleOf(h) + 2]]) {
      const t = triangleOf(e);
      for (let k = 3 * t; k < 3 * t + 3; k++) out[tri.origin[k]] = k;
    }
    const crosses =
      c !== a &&
      c !== b &&
      d !== a &&
      d !== b &&
      turn(tri, a, b, xy[2 * c], xy[2 * c + 1]) > 0 !== turn(tri, a, b, xy[2 * d], xy[2 * d + 1]) > 0;
    if (crosses) crossing.push([c, d]);
  }
}

/** Edges that the open segment a-b crosses, from a to b. */
function crossedEdges(tri: Triangulation, out: Int32Array, a: number, b: number): [number, number][] {
  const [bx, by] = [tri.xy[2 * b], tri.xy[2 * b + 1]];
  const crossed: [number, number][] = [];
  let h = out[a];
  for (;;) {
    const far = nextHalf(h); // the edge opposite a in this triangle
    const [u, v] = [tri.origin[far], tri.origin[nextHalf(far)]];
    if (turn(tri, a, u, bx, by) > 0 && turn(tri, a, v, bx, by) < 0) {
      h = far;
      break;
    }
    const round = tri.twin[previousHalf(h)];
    if (round < 0 || round === out[a]) throw tooNear();
    h = round;
  }
  for (;;) {
    crossed.push([tri.origin[h], tri.origin[nextHalf(h)]]);
    const g = tri.twin[h];
    const c = tri.origin[previousHalf(g)];
    if (c === b) return crossed;
    const side = turn(tri, a, b, tri.xy[2 * c], tri.xy[2 * c + 1]);
    // Keep to the edge with one end on each side of a-b.
    h = side > 0 ? nextHalf(g) : previousHalf(g);
    const [u, v] = [tri.origin[h], tri.origin[nextHalf(h)]];
    const [su, sv] = [u, v].map((w) => turn(tri, a, b, tri.xy[2 * w], tri.xy[2 * w + 1]));
    if (su > 0 === sv > 0) h = side > 0 ? previousHalf(g) : nextHalf(g);
  }
}

/** The half-edge from a to b, or -1. Vertices inside the box are ringed by triangles, so the turn closes. */
function halfBetween(tri: Triangulation, out: Int32Array, a: number, b: number): number {
  let h = out[a];
  do {
    if (tri.origin[nextHalf(h)] === b) return h;
    h = tri.twin[previousHalf(h)];
  } while (h >= 0 && h !== out[a]);
  if (h >= 0) return -1;
  for (h = out[a]; ; ) {
    // a corner of the box: turn the other way
    const g = tri.twin[h];
    if (g < 0) return -1;
    h = nextHalf(g);
    if (tri.origin[nextHalf(h)] === b) return h;
  }
}

/** Lawson's flips with exact in-circle tests until every edge that is no segment is locally Delaunay. */
function lawson(tri: Triangulation): void {
  const stack: number[] = [];
  for (let h = 0; h < 3 * tri.slotCount; h++) if (tri.twin[h] > h) stack.push(h);
  while (stack.length > 0) {
    const h = stack.pop() as number;
    const g = tri.twin[h];
    if (g < 0 || tri.segment[h] >= 0) continue;
    const d = tri.origin[previousHalf(g)];
    if (!(circleHolds(tri, triangleOf(h), tri.xy[2 * d], tri.xy[2 * d + 1]) > 0)) continue;
    flip(tri, h);
    const [t, s] = [triangleOf(h), triangleOf(g)];
    stack.push(3 * t, 3 * t + 1, 3 * s, 3 * s + 1);
  }
}

/** The graph with some of its segments alone, their points and the loose ones. */
function onlySegments(graph: PlanarGraph, keep: readonly number[]): PlanarGraph {
  const pointTo = new Int32Array(graph.points.length / 2).fill(-1);
  const points: number[] = [];
  const renumber = (p: number): number => {
    if (pointTo[p] < 0) {
      pointTo[p] = points.length / 2;
      points.push(graph.points[2 * p], graph.points[2 * p + 1]);
    }
    return pointTo[p];
  };
  const segmentTo = new Map(keep.map((s, i) => [s, i]));
  const segments = new Int32Array(2 * keep.length);
  keep.forEach((s, i) => {
    segments[2 * i] = renumber(graph.segments[2 * s]);
    segments[2 * i + 1] = renumber(graph.segments[2 * s + 1]);
  });
  const loose = graph.loose.map(renumber);
  return {
    ...graph,
    segments,
    loose,
    points: Float64Array.from(points),
    segmentToCurve: Int32Array.from(keep, (s) => graph.segmentToCurve[s]),
    segmentToSide: Int32Array.from(keep, (s) => graph.segmentToSide[s]),
    segmentToMatch: Int32Array.from(keep, (s) => segmentTo.get(graph.segmentToMatch[s]) ?? -1),
    segmentToShapes: keep.map((s) => graph.segmentToShapes[s]),
  };
}

/** A triangle at a corner of the box, which are the last four points. */
function outermostOf(tri: Triangulation): number {
  return triangleOf(tri.origin.findIndex((v, h) => v === tri.vertexCount - 1 && h < 3 * tri.slotCount));
}

/** Removes what lies outside the outline, the box's corners with it (they are the last four points). */
function removeOutside(tri: Triangulation): void {
  for (let t = 0; t < tri.slotCount; t++) {
    if (tri.region[t] !== OUTSIDE) continue;
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      const g = tri.twin[h];
      if (g < 0) continue;
      tri.twin[g] = -1;
      if (tri.segment[g] >= 0) tri.segments.half[tri.segment[g]] = g;
      tri.segment[h] = -1;
    }
    releaseSlot(tri, t);
  }
  // Points left in no triangle would end the numbering with gaps: `meshOf` drops them.
  tri.vertexCount -= 4;
  for (let t = 0; t < tri.slotCount; t++) {
    if (inUse(tri, t)) return;
  }
  throw new InputError([
    { code: 'no-area', key: 'outline', wrong: 'has no area', remedy: 'give it a width and a height' },
  ]);
}
