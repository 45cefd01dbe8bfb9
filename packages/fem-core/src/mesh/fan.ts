import type { Circumcircles } from './circumcircles.js';
import { fitCircumcircles, isInCircle } from './circumcircles.js';
import type { Triangulation } from './triangulation.js';
import { addVertex, takeSlot, turn } from './triangulation.js';

/**
 * The cavity of a point inside one region, and the fan of triangles that fills it (Bowyer, Computing Dirichlet
 * tessellations, 1981; Watson, Computing the n-dimensional Delaunay tessellation, 1981). A cavity found here is a tree of
 * triangles: n - 2 of them within n border edges, in counter-clockwise order. Lists are reused from point to point.
 */
export interface Fan {
  /** Number n of border edges, and so of triangles of the fan. */
  count: number;
  /** Triangles of the cavity; after `fillFan` those of the fan, the one on border edge i in place i. */
  readonly slots: Int32Array;
  /** Per border edge: the half-edge within the cavity, the vertex it starts from, its twin, its segment. */
  readonly border: Int32Array;
  readonly corner: Int32Array;
  readonly outer: Int32Array;
  readonly segment: Int32Array;
  /** Per border edge: size wanted in the triangle it bounded. */
  readonly size: Float64Array;
  readonly stack: Int32Array;
}

/** Cavities with more triangles are left to `findCavity`. */
const LARGEST = 500;

export const newFan = (): Fan => ({
  count: 0,
  slots: new Int32Array(LARGEST + 4),
  border: new Int32Array(LARGEST + 4),
  corner: new Int32Array(LARGEST + 4),
  outer: new Int32Array(LARGEST + 4),
  segment: new Int32Array(LARGEST + 4),
  size: new Float64Array(LARGEST + 4),
  stack: new Int32Array(LARGEST + 4),
});

/**
 * Finds the cavity of (x, y), which lies in the circumcircle of triangle t: triangles are entered depth first, the edges
 * beyond the one entered by in counter-clockwise order, so that border edges come out in that order too. In a Delaunay
 * triangulation this leads from t to the triangle that holds the point, or to a segment in the way.
 * @returns false where the cavity is too large or closes upon itself; then nothing is promised
 */
export function growFan(
  tri: Triangulation,
  circles: Circumcircles,
  fan: Fan,
  t: number,
  x: number,
  y: number,
): boolean {
  const { twin, segment } = tri;
  const { mark } = circles;
  const { border, stack, slots } = fan;
  const inside = ++circles.epoch;
  let edges = 0;
  let triangles = 1;
  slots[0] = t;
  mark[t] = inside;
  stack[0] = 3 * t + 2;
  stack[1] = 3 * t + 1;
  stack[2] = 3 * t;
  for (let top = 3; top > 0; ) {
    const h = stack[--top];
    const g = twin[h];
    const u = (g / 3) | 0;
    if (segment[h] >= 0 || g < 0 || !isInCircle(circles, tri, u, x, y)) {
      border[edges++] = h;
      continue;
    }
    if (mark[u] === inside || triangles === LARGEST) return false;
    mark[u] = inside;
    slots[triangles++] = u;
    const k = g - 3 * u;
    stack[top++] = k === 0 ? g + 2 : g - 1;
    stack[top++] = k === 2 ? g - 2 : g + 1;
  }
  fan.count = edges;
  return true;
}

/** (3 + 16 U) U, U = 2^-53: share of the sum of both products below which their difference may have the wrong sign. */
const DOUBTFUL = 3.3306690738754716e-16;

/**
 * Reads the border of the cavity and judges it from (x, y).
 * @param encroached  receives the segments in whose diametral circles the point lies
 * @returns whether every border edge has the point strictly on its left
 */
export function readBorder(tri: Triangulation, fan: Fan, x: number, y: number, encroached: number[]): boolean {
  const { xy, origin, twin, segment } = tri;
  const { border, corner, outer, count } = fan;
  for (let i = 0; i < count; i++) {
    const h = border[i];
    corner[i] = origin[h];
    outer[i] = twin[h];
    fan.segment[i] = segment[h];
    fan.size[i] = tri.size[(h / 3) | 0];
  }
  let v = 2 * corner[count - 1];
  let ux = xy[v] - x;
  let uy = xy[v + 1] - y;
  let edge = count - 1;
  for (let i = 0; i < count; edge = i++) {
    v = 2 * corner[i];
    const vx = xy[v] - x;
    const vy = xy[v + 1] - y;
    const left = ux * vy;
    const right = uy * vx;
    if (
      left - right <= DOUBTFUL * (Math.abs(left) + Math.abs(right)) &&
      !(turn(tri, corner[edge], corner[i], x, y) > 0)
    )
      return false;
    if (fan.segment[edge] >= 0 && ux * vx + uy * vy < 0) encroached.push(fan.segment[edge]);
    ux = vx;
    uy = vy;
  }
  return true;
}

/** Puts a vertex at (x, y) and the fan of triangles round it in place of the cavity whose border has been read. */
export function fillFan(tri: Triangulation, circles: Circumcircles, fan: Fan, x: number, y: number): void {
  const { slots, corner, outer, count } = fan;
  const p = addVertex(tri, x, y);
  const inherited = tri.region[slots[0]];
  for (let i = 0; i < count - 2; i++) tri.stamp[slots[i]] += 2;
  slots[count - 2] = takeSlot(tri);
  slots[count - 1] = takeSlot(tri);
  fitCircumcircles(circles, tri);
  const { origin, twin, segment, region, size } = tri;
  let before = slots[count - 1];
  for (let i = 0; i < count; i++) {
    const t = slots[i];
    const h = 3 * t;
    const after = i + 1 < count ? i + 1 : 0;
    const s = fan.segment[i];
    region[t] = inherited;
    size[t] = fan.size[i];
    origin[h] = corner[i];
    origin[h + 1] = corner[after];
    origin[h + 2] = p;
    segment[h] = s;
    segment[h + 1] = -1;
    segment[h + 2] = -1;
    twin[h] = outer[i];
    twin[h + 1] = 3 * slots[after] + 2;
    twin[h + 2] = 3 * before + 1;
    if (outer[i] >= 0) twin[outer[i]] = h;
    if (s >= 0) tri.segments.half[s] = h;
    before = t;
  }
}
