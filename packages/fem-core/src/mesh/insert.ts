import type { Triangulation } from './triangulation.js';
import {
  addVertex,
  circleHolds,
  nextHalf,
  previousHalf,
  releaseSlot,
  takeSlot,
  triangleOf,
  turn,
} from './triangulation.js';

/** Triangles whose circumcircles hold a point, as seen from it, and the half-edges round them. Lists are reused. */
export interface Cavity {
  readonly triangles: number[];
  readonly border: number[];
  /** Per slot: the epoch in which it was marked. */
  mark: Int32Array;
  epoch: number;
  /** Per vertex: the new triangle whose border edge starts there. */
  startsAt: Int32Array;
}

export function newCavity(): Cavity {
  return { triangles: [], border: [], mark: new Int32Array(0), epoch: 0, startsAt: new Int32Array(0) };
}

/**
 * Bowyer-Watson cavity of (x, y) in a constrained Delaunay triangulation: grown from `starts`, never across segments,
 * except across segment `open` (the one the point is about to split; -1 for none).
 *
 * @returns whether every edge round the cavity is seen from the point at its left; if not, rounding forbids the vertex
 */
export function findCavity(
  tri: Triangulation,
  cavity: Cavity,
  x: number,
  y: number,
  starts: readonly number[],
  open: number,
): boolean {
  const { triangles, border } = cavity;
  if (cavity.mark.length < tri.stamp.length) {
    const mark = new Int32Array(tri.stamp.length);
    mark.set(cavity.mark);
    cavity.mark = mark;
  }
  const { mark } = cavity;
  const inside = ++cavity.epoch;
  triangles.length = 0;
  for (const t of starts) {
    if (mark[t] === inside) continue;
    mark[t] = inside;
    triangles.push(t);
  }
  const firm = triangles.length; // the starts hold the point and stay
  for (let i = 0; i < triangles.length; i++) {
    for (let h = 3 * triangles[i]; h < 3 * triangles[i] + 3; h++) {
      const s = tri.segment[h];
      if (s >= 0 && s !== open) continue;
      const g = tri.twin[h];
      if (g < 0) continue;
      const u = triangleOf(g);
      if (mark[u] === inside || !(circleHolds(tri, u, x, y) > 0)) continue;
      mark[u] = inside;
      triangles.push(u);
    }
  }
  // A split point is rounded, and on an arc stands off its chord: drop triangles that would be turned over.
  let seen = true;
  for (let again = true; again; ) {
    again = false;
    seen = true;
    border.length = 0;
    for (let i = 0; i < triangles.length; i++) {
      const t = triangles[i];
      if (mark[t] !== inside) continue;
      for (let h = 3 * t; h < 3 * t + 3; h++) {
        const s = tri.segment[h];
        const g = tri.twin[h];
        const within =
          s >= 0 ? s === open && (g < 0 || mark[triangleOf(g)] === inside) : mark[triangleOf(g)] === inside;
        if (within) continue;
        if (!(turn(tri, tri.origin[h], tri.origin[nextHalf(h)], x, y) > 0)) {
          if (i < firm) seen = false;
          else {
            mark[t] = 0;
            again = true;
            break;
          }
        }
        border.push(h);
      }
    }
  }
  let kept = 0;
  for (const t of triangles) if (mark[t] === inside) triangles[kept++] = t;
  triangles.length = kept;
  return seen;
}

/**
 * Replaces the cavity by the fan of triangles round a new vertex at (x, y), and returns the vertex. Regions and wanted
 * sizes are inherited across the border edges. `made` receives the new triangles. Where `open` is a segment, it is cut:
 * `open` keeps its first half and the second half becomes a new segment, the last of the list.
 */
export function fillCavity(
  tri: Triangulation,
  cavity: Cavity,
  x: number,
  y: number,
  open: number,
  made: number[],
): number {
  const p = addVertex(tri, x, y);
  if (cavity.startsAt.length < tri.xy.length / 2) cavity.startsAt = new Int32Array(tri.xy.length / 2);
  const { startsAt, border } = cavity;
  made.length = 0;
  // The cavity's slots are given back last, so that what lies in them can be read until then.
  for (const b of border) {
    const t = takeSlot(tri);
    const h = 3 * t;
    const old = triangleOf(b);
    const from = tri.origin[b];
    const opposite = tri.twin[b];
    const s = tri.segment[b];
    made.push(t);
    tri.region[t] = tri.region[old];
    tri.size[t] = tri.size[old];
    tri.origin[h] = from;
    tri.origin[h + 1] = tri.origin[nextHalf(b)];
    tri.origin[h + 2] = p;
    tri.twin[h] = opposite;
    tri.twin[h + 1] = -1;
    tri.twin[h + 2] = -1;
    tri.segment[h] = s;
    tri.segment[h + 1] = -1;
    tri.segment[h + 2] = -1;
    if (opposite >= 0) tri.twin[opposite] = h;
    if (s >= 0) tri.segments.half[s] = h;
    startsAt[from] = t;
  }
  for (const t of cavity.triangles) releaseSlot(tri, t);
  for (const t of made) {
    const u = startsAt[tri.origin[3 * t + 1]];
    // At a split of the outline the fan is open: nothing starts where it ends.
    if (tri.origin[3 * u] !== tri.origin[3 * t + 1] || tri.origin[3 * u + 2] !== p) continue;
    tri.twin[3 * t + 1] = 3 * u + 2;
    tri.twin[3 * u + 2] = 3 * t + 1;
  }
  if (open >= 0) cutSegment(tri, open, p, made);
  return p;
}

function cutSegment(tri: Triangulation, s: number, p: number, made: readonly number[]): void {
  const { from, to, curve, side, match, half } = tri.segments;
  const second = from.length;
  const a = from[s];
  const b = to[s];
  from.push(p);
  to.push(b);
  curve.push(curve[s]);
  side.push(side[s]);
  match.push(-1);
  half.push(-1);
  to[s] = p;
  for (const t of made) {
    for (const h of [3 * t + 1, 3 * t + 2]) {
      const end = tri.origin[h] === p ? tri.origin[nextHalf(h)] : tri.origin[h];
      if (end !== a && end !== b) continue;
      const part = end === a ? s : second;
      tri.segment[h] = part;
      half[part] = h;
    }
  }
}

/** What a walk towards a point ends at: the triangle that holds it, or the half-edge of a segment in the way. */
export type Landing =
  | { readonly kind: 'triangle'; readonly t: number }
  | { readonly kind: 'blocked'; readonly half: number };

/** Straight walk from the middle of triangle t to (x, y). */
export function walkTo(tri: Triangulation, t: number, x: number, y: number): Landing {
  const { xy, origin } = tri;
  const i = 2 * origin[3 * t];
  const j = 2 * origin[3 * t + 1];
  const k = 2 * origin[3 * t + 2];
  return walkFrom(tri, t, (xy[i] + xy[j] + xy[k]) / 3, (xy[i + 1] + xy[j + 1] + xy[k + 1]) / 3, x, y);
}

/** Straight walk from (fx, fy), a point of triangle t, to (x, y). */
export function walkFrom(tri: Triangulation, t: number, fx: number, fy: number, x: number, y: number): Landing {
  const { xy, origin, twin, segment } = tri;
  let entry = -1;
  for (let steps = 0; steps <= tri.slotCount; steps++) {
    let exit = -1;
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      if (h === entry) continue;
      const u = origin[h];
      const v = origin[nextHalf(h)];
      if (!(turn(tri, u, v, x, y) < 0)) continue;
      exit = h;
      // Of two edges the point lies beyond, the way leads through the one it crosses.
      if (aside(fx, fy, x, y, xy[2 * u], xy[2 * u + 1]) <= 0 && aside(fx, fy, x, y, xy[2 * v], xy[2 * v + 1]) >= 0)
        break;
    }
    if (exit < 0) return { kind: 'triangle', t };
    if (segment[exit] >= 0 || twin[exit] < 0) return { kind: 'blocked', half: exit };
    entry = twin[exit];
    t = triangleOf(entry);
  }
  throw new Error('walkTo: the walk does not end; the triangulation is not valid');
}

const aside = (ax: number, ay: number, bx: number, by: number, px: number, py: number): number =>
  (bx - ax) * (py - ay) - (by - ay) * (px - ax);

/** The vertex across half-edge h in its own triangle. */
export const apex = (tri: Triangulation, h: number): number => tri.origin[previousHalf(h)];
