import type { Curve } from '../geometry/curve.js';
import { inCircle, orientation } from '../geometry/predicates.js';

/**
 * A triangulation while it is being worked on; `Mesh` is what comes out. Half-edge h = 3t + k runs from corner k of
 * triangle t to its next corner, so that t lies on its left. Slots of removed triangles are used again.
 */
export interface Triangulation {
  /** Float64Array, at least 2 vertexCount: coordinates, metres. */
  xy: Float64Array;
  vertexCount: number;
  /** Int32Array, per half-edge: vertex it starts from. */
  origin: Int32Array;
  /** Int32Array, per half-edge: the opposite half-edge, -1 on the outline. */
  twin: Int32Array;
  /** Int32Array, per half-edge: segment it lies on, -1 for none. */
  segment: Int32Array;
  /** Int32Array, per triangle: region. */
  region: Int32Array;
  /** Float64Array, per triangle: longest edge wanted, metres; Infinity for no wish. */
  size: Float64Array;
  /** Int32Array, per triangle: counts its rewritings; odd while the slot is in use. */
  stamp: Int32Array;
  /** Slots in use or used once. */
  slotCount: number;
  readonly free: number[];
  readonly segments: Segments;
  readonly curves: readonly Curve[];
}

/** Segments: the pieces into which the drawn lines are cut so far. Growing lists with one entry a segment. */
export interface Segments {
  readonly from: number[];
  readonly to: number[];
  readonly curve: number[];
  /** Side of the outline, -1 inside. */
  readonly side: number[];
  /** The corresponding segment on the matched side, -1 for none; ends correspond in order. */
  readonly match: number[];
  /** A half-edge that lies on the segment. */
  readonly half: number[];
}

export const nextHalf = (h: number): number => (h % 3 === 2 ? h - 2 : h + 1);
export const previousHalf = (h: number): number => (h % 3 === 0 ? h + 2 : h - 1);
export const triangleOf = (h: number): number => (h / 3) | 0;
export const inUse = (tri: Triangulation, t: number): boolean => (tri.stamp[t] & 1) === 1;

export function emptyTriangulation(vertices: number, triangles: number, curves: readonly Curve[]): Triangulation {
  return {
    xy: new Float64Array(2 * vertices),
    vertexCount: 0,
    origin: new Int32Array(3 * triangles),
    twin: new Int32Array(3 * triangles),
    segment: new Int32Array(3 * triangles).fill(-1),
    region: new Int32Array(triangles),
    size: new Float64Array(triangles).fill(Infinity),
    stamp: new Int32Array(triangles),
    slotCount: 0,
    free: [],
    segments: { from: [], to: [], curve: [], side: [], match: [], half: [] },
    curves,
  };
}

export function addVertex(tri: Triangulation, x: number, y: number): number {
  const v = tri.vertexCount++;
  if (2 * v + 1 >= tri.xy.length) tri.xy = grown(tri.xy, new Float64Array(2 * tri.xy.length + 16));
  tri.xy[2 * v] = x;
  tri.xy[2 * v + 1] = y;
  return v;
}

/** A free slot, marked as in use. */
export function takeSlot(tri: Triangulation): number {
  const t = tri.free.pop() ?? tri.slotCount++;
  if (t >= tri.stamp.length) {
    const more = 2 * tri.stamp.length + 16;
    tri.origin = grown(tri.origin, new Int32Array(3 * more));
    tri.twin = grown(tri.twin, new Int32Array(3 * more));
    tri.segment = grown(tri.segment, new Int32Array(3 * more));
    tri.region = grown(tri.region, new Int32Array(more));
    tri.size = grown(tri.size, new Float64Array(more));
    tri.stamp = grown(tri.stamp, new Int32Array(more));
  }
  tri.stamp[t]++;
  return t;
}

export function releaseSlot(tri: Triangulation, t: number): void {
  tri.stamp[t]++;
  tri.free.push(t);
}

function grown<T extends Float64Array | Int32Array>(from: T, to: T): T {
  to.set(from);
  return to;
}

/** Orientation of vertices a, b and the point (x, y). */
export function turn(tri: Triangulation, a: number, b: number, x: number, y: number): number {
  const { xy } = tri;
  return orientation(xy[2 * a], xy[2 * a + 1], xy[2 * b], xy[2 * b + 1], x, y);
}

/** Positive when (x, y) lies inside the circumcircle of triangle t. */
export function circleHolds(tri: Triangulation, t: number, x: number, y: number): number {
  const { xy, origin } = tri;
  const a = 2 * origin[3 * t];
  const b = 2 * origin[3 * t + 1];
  const c = 2 * origin[3 * t + 2];
  return inCircle(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1], x, y);
}

/**
 * Turns the diagonal of the quadrilateral made by the two triangles at half-edge h; neither may be a segment.
 * Triangles keep their slots; afterwards the new diagonal is half-edge 3 triangleOf(h) + 2.
 */
export function flip(tri: Triangulation, h: number): void {
  const { origin, twin, segment } = tri;
  const g = twin[h];
  const t = triangleOf(h);
  const s = triangleOf(g);
  const hn = nextHalf(h);
  const hp = previousHalf(h);
  const gn = nextHalf(g);
  const gp = previousHalf(g);
  const a = origin[h];
  const b = origin[g];
  const c = origin[hp];
  const d = origin[gp];
  const [ca, ad, db, bc] = [twin[hp], twin[gn], twin[gp], twin[hn]];
  const [sca, sad, sdb, sbc] = [segment[hp], segment[gn], segment[gp], segment[hn]];
  writeHalf(tri, 3 * t, c, ca, sca);
  writeHalf(tri, 3 * t + 1, a, ad, sad);
  writeHalf(tri, 3 * s, d, db, sdb);
  writeHalf(tri, 3 * s + 1, b, bc, sbc);
  writeHalf(tri, 3 * t + 2, d, 3 * s + 2, -1);
  writeHalf(tri, 3 * s + 2, c, 3 * t + 2, -1);
  tri.stamp[t] += 2;
  tri.stamp[s] += 2;
}

/** Half-edge e from a vertex, with its twin, which is told, and on segment `seg`, which is told too. */
function writeHalf(tri: Triangulation, e: number, from: number, opposite: number, seg: number): void {
  tri.origin[e] = from;
  tri.twin[e] = opposite;
  tri.segment[e] = seg;
  if (opposite >= 0) tri.twin[opposite] = e;
  if (seg >= 0) tri.segments.half[seg] = e;
}
