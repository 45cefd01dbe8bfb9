import { InputError } from '../base/fault.js';
import { pointOnCurve } from '../geometry/curve.js';
import type { Point } from '../geometry/section.js';
import type { Cavity } from './insert.js';
import { apex, fillCavity, findCavity, newCavity, walkFrom, walkTo } from './insert.js';
import type { SharpCorners } from './sharp-corners.js';
import { bridgesSharpCorner, findSharpCorners, shellShare } from './sharp-corners.js';
import type { Triangulation } from './triangulation.js';
import { inUse, nextHalf, triangleOf, turn } from './triangulation.js';

export interface QualityLimits {
  /** No angle below this, radians, away from sharper corners of the input. */
  readonly minAngle: number;
  readonly maxTriangles: number;
}

/** 25 degrees: above Ruppert's proven 20.7, below the 33 at which the method stops ending in practice. */
export const DEFAULT_LIMITS: QualityLimits = { minAngle: (25 * Math.PI) / 180, maxTriangles: 2_000_000 };

/**
 * Conforming Delaunay refinement, in place: segments whose diametral circle holds a vertex are halved, and the
 * circumcentre, or the nearer off-centre, of each triangle that is too flat or longer than wanted is inserted, unless it
 * would encroach on a segment, which is then halved instead.
 * Ruppert, A Delaunay refinement algorithm for quality 2-dimensional mesh generation, J. Algorithms 18, 1995; Uengoer,
 * Off-centers, LATIN 2004; concentric shells round sharp corners as in Shewchuk, Delaunay refinement algorithms for
 * triangular mesh generation, Comput. Geom. 22, 2002. Segments on matched sides are cut together.
 * @throws InputError when the triangles asked for pass `limits.maxTriangles`
 */
export function refine(tri: Triangulation, limits: QualityLimits): void {
  const work = startWork(tri, limits);
  for (let s = 0; s < tri.segments.from.length; s++) judgeSegment(work, s);
  for (let t = 0; t < tri.slotCount; t++) if (inUse(tri, t)) judgeTriangle(work, t);
  for (;;) {
    const s = work.encroached.pop();
    if (s !== undefined) {
      if (isEncroached(work, s)) splitSegment(work, s);
      continue;
    }
    const next = nextBadTriangle(work);
    if (next < 0) return;
    treatTriangle(work, next);
  }
}

interface Work {
  readonly tri: Triangulation;
  readonly limits: QualityLimits;
  readonly sharp: SharpCorners;
  readonly cavity: Cavity;
  readonly made: number[];
  readonly encroached: number[];
  /** Slots and their stamps when they were judged, first come first served; flat ones before long ones. */
  readonly flat: Queue;
  readonly long: Queue;
  /** Squared ratio shortest edge / (2 circumradius) below which a triangle is flat. */
  readonly flatness: number;
  /** Height of Uengoer's off-centre over the shortest edge, in lengths of that edge. */
  readonly offCentre: number;
  /** Squared length below which nothing is cut any more. */
  readonly floor: number;
}

interface Queue {
  readonly slots: number[];
  readonly stamps: number[];
  head: number;
}

function startWork(tri: Triangulation, limits: QualityLimits): Work {
  let x0 = Infinity;
  let x1 = -Infinity;
  let y0 = Infinity;
  let y1 = -Infinity;
  for (let v = 0; v < tri.vertexCount; v++) {
    x0 = Math.min(x0, tri.xy[2 * v]);
    x1 = Math.max(x1, tri.xy[2 * v]);
    y0 = Math.min(y0, tri.xy[2 * v + 1]);
    y1 = Math.max(y1, tri.xy[2 * v + 1]);
  }
  return {
    tri,
    limits,
    sharp: findSharpCorners(tri),
    cavity: newCavity(),
    made: [],
    encroached: [],
    flat: { slots: [], stamps: [], head: 0 },
    long: { slots: [], stamps: [], head: 0 },
    flatness: Math.sin(limits.minAngle) ** 2,
    offCentre: 0.5 / Math.tan(limits.minAngle / 2),
    floor: (1e-7 * Math.max(x1 - x0, y1 - y0)) ** 2,
  };
}

/** True when the vertex across one of the segment's triangles sees it under more than a right angle. */
function isEncroached(work: Work, s: number): boolean {
  const { tri } = work;
  const h = tri.segments.half[s];
  const g = tri.twin[h];
  return seesObtusely(tri, s, apex(tri, h)) || (g >= 0 && seesObtusely(tri, s, apex(tri, g)));
}

function seesObtusely(tri: Triangulation, s: number, v: number): boolean {
  return holds(tri, s, tri.xy[2 * v], tri.xy[2 * v + 1]);
}

/** (x, y) lies inside the circle over the segment as diameter. */
function holds(tri: Triangulation, s: number, x: number, y: number): boolean {
  const a = 2 * tri.segments.from[s];
  const b = 2 * tri.segments.to[s];
  const { xy } = tri;
  return (xy[a] - x) * (xy[b] - x) + (xy[a + 1] - y) * (xy[b + 1] - y) < 0;
}

function judgeSegment(work: Work, s: number): void {
  if (isEncroached(work, s)) work.encroached.push(s);
}

/** Shape of a triangle as far as refinement cares. */
interface Figure {
  /** Half-edge of the shortest edge. */
  shortest: number;
  shortest2: number;
  longest2: number;
  circumX: number;
  circumY: number;
  radius2: number;
}
const figure: Figure = { shortest: 0, shortest2: 0, longest2: 0, circumX: 0, circumY: 0, radius2: 0 };

function measure(tri: Triangulation, t: number): Figure {
  const { xy, origin } = tri;
  const a = 2 * origin[3 * t];
  const b = 2 * origin[3 * t + 1];
  const c = 2 * origin[3 * t + 2];
  const ux = xy[b] - xy[a];
  const uy = xy[b + 1] - xy[a + 1];
  const vx = xy[c] - xy[a];
  const vy = xy[c + 1] - xy[a + 1];
  const wx = vx - ux;
  const wy = vy - uy;
  const u2 = ux * ux + uy * uy;
  const v2 = vx * vx + vy * vy;
  const w2 = wx * wx + wy * wy;
  figure.shortest = u2 <= v2 && u2 <= w2 ? 3 * t : w2 <= v2 ? 3 * t + 1 : 3 * t + 2;
  figure.shortest2 = Math.min(u2, v2, w2);
  figure.longest2 = Math.max(u2, v2, w2);
  const twice = 2 * (ux * vy - uy * vx);
  const px = (vy * u2 - uy * v2) / twice;
  const py = (ux * v2 - vx * u2) / twice;
  figure.circumX = xy[a] + px;
  figure.circumY = xy[a + 1] + py;
  figure.radius2 = px * px + py * py;
  return figure;
}

function isFlat(work: Work, f: Figure): boolean {
  return f.shortest2 < 4 * f.radius2 * work.flatness;
}

function isLong(work: Work, t: number, f: Figure): boolean {
  const size = work.tri.size[t];
  return f.longest2 > size * size;
}

function judgeTriangle(work: Work, t: number): void {
  const f = measure(work.tri, t);
  const queue = isFlat(work, f) ? work.flat : isLong(work, t, f) ? work.long : undefined;
  if (queue === undefined) return;
  queue.slots.push(t);
  queue.stamps.push(work.tri.stamp[t]);
}

function nextBadTriangle(work: Work): number {
  for (const queue of [work.flat, work.long]) {
    while (queue.head < queue.slots.length) {
      const at = queue.head++;
      if (work.tri.stamp[queue.slots[at]] === queue.stamps[at]) return queue.slots[at];
    }
    queue.slots.length = 0;
    queue.stamps.length = 0;
    queue.head = 0;
  }
  return -1;
}

function treatTriangle(work: Work, t: number): void {
  const { tri, cavity } = work;
  const f = measure(tri, t);
  const flat = isFlat(work, f);
  if (f.shortest2 < work.floor) return;
  const u = tri.origin[f.shortest];
  const v = tri.origin[nextHalf(f.shortest)];
  if (flat && !isLong(work, t, f) && bridgesSharpCorner(tri, work.sharp, f.shortest)) return;
  let x = f.circumX;
  let y = f.circumY;
  if (flat) {
    const mx = 0.5 * (tri.xy[2 * u] + tri.xy[2 * v]);
    const my = 0.5 * (tri.xy[2 * u + 1] + tri.xy[2 * v + 1]);
    const away = Math.hypot(x - mx, y - my);
    const reach = work.offCentre * Math.sqrt(f.shortest2);
    if (away > reach) {
      x = mx + ((x - mx) * reach) / away;
      y = my + ((y - my) * reach) / away;
    }
  }
  const landing = walkTo(tri, t, x, y);
  if (landing.kind === 'blocked') {
    const cut = splitSegment(work, tri.segment[landing.half]);
    if (cut && inUse(tri, t)) judgeTriangle(work, t);
    return;
  }
  const seen = findCavity(tri, cavity, x, y, [landing.t], -1);
  let encroaches = false;
  for (const h of cavity.border) {
    const s = tri.segment[h];
    if (s < 0 || !holds(tri, s, x, y)) continue;
    encroaches = true;
    work.encroached.push(s);
  }
  if (encroaches) {
    // The vertex is not made; the segments are cut first (forced: they need not be encroached by a vertex yet).
    let cut = false;
    for (const s of work.encroached.splice(0)) cut = splitSegment(work, s) || cut;
    if (cut && inUse(tri, t)) judgeTriangle(work, t);
    return;
  }
  if (!seen) return; // smaller than rounding can tell
  checkCount(work);
  fillCavity(tri, cavity, x, y, -1, work.made);
  judgeMade(work);
}

function judgeMade(work: Work): void {
  const { tri } = work;
  for (const t of work.made) {
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      const s = tri.segment[h];
      if (s >= 0) judgeSegment(work, s);
    }
    judgeTriangle(work, t);
  }
}

/**
 * Cuts a segment, on its curve, and with it the segment it is matched with; false where it is too short to be cut, or the
 * way to the cut is not to be cleared. `depth` counts cuts made for the sake of other cuts.
 */
function splitSegment(work: Work, s: number, depth = 0): boolean {
  const { segments, xy } = work.tri;
  const a = segments.from[s];
  const b = segments.to[s];
  if ((xy[2 * a] - xy[2 * b]) ** 2 + (xy[2 * a + 1] - xy[2 * b + 1]) ** 2 < work.floor) return false;
  const share = shellShare(work.tri, work.sharp, s);
  if (!clearWay(work, s, share, depth)) return false;
  const mate = segments.match[s];
  if (mate >= 0 && !findCut(work, mate, share)) return false;
  if (!findCut(work, s, share)) return false;
  const second = cutFound(work, s, share);
  if (mate < 0) return true;
  findCut(work, mate, share);
  const mateSecond = cutFound(work, mate, share);
  segments.match[second] = mateSecond;
  segments.match[mateSecond] = second;
  return true;
}

/** Cuts in one way at most, and cuts for the sake of cuts at most: beyond this arcs touch but for rounding. */
const PATIENCE = 30;

/**
 * The cut of an arc stands off its chord, and may lie beyond the chord of another arc that has been cut less finely, as in
 * a ring thinner than its chords are high: then that one is cut first.
 */
function clearWay(work: Work, s: number, share: number, depth: number): boolean {
  const { tri } = work;
  const { segments, curves } = tri;
  if (curves[segments.curve[s]].kind === 'line') return true;
  const [x, y] = placeOn(tri, s, share);
  const [fx, fy] = [0, 1].map((k) => 0.5 * (tri.xy[2 * segments.from[s] + k] + tri.xy[2 * segments.to[s] + k]));
  for (let tries = 0; tries < PATIENCE && depth < PATIENCE; tries++) {
    const half = segments.half[s];
    const ahead = turn(tri, tri.origin[half], tri.origin[nextHalf(half)], x, y) > 0 ? half : tri.twin[half];
    if (ahead < 0) return true; // out of the outline, where nothing is
    const landing = walkFrom(tri, triangleOf(ahead), fx, fy, x, y);
    if (landing.kind === 'triangle') return true;
    const other = tri.segment[landing.half];
    if (curves[segments.curve[other]].kind === 'line' || !splitSegment(work, other, depth + 1)) return false;
  }
  return false;
}

function placeOn(tri: Triangulation, s: number, share: number): Point {
  const { segments, xy } = tri;
  const a = 2 * segments.from[s];
  const b = 2 * segments.to[s];
  return pointOnCurve(tri.curves[segments.curve[s]], xy[a], xy[a + 1], xy[b], xy[b + 1], share);
}

/** Finds the cavity of the cut; false where rounding forbids it. */
function findCut(work: Work, s: number, share: number): boolean {
  const { tri } = work;
  const [x, y] = placeOn(tri, s, share);
  const h = tri.segments.half[s];
  const g = tri.twin[h];
  const starts = g < 0 ? [triangleOf(h)] : [triangleOf(h), triangleOf(g)];
  return findCavity(tri, work.cavity, x, y, starts, s);
}

/** Cuts where `findCut` has just been; returns the new segment. */
function cutFound(work: Work, s: number, share: number): number {
  const { tri, cavity } = work;
  const [x, y] = placeOn(tri, s, share);
  checkCount(work);
  fillCavity(tri, cavity, x, y, s, work.made);
  judgeMade(work);
  return tri.segments.from.length - 1;
}

function checkCount(work: Work): void {
  if (work.tri.slotCount - work.tri.free.length < work.limits.maxTriangles) return;
  throw new InputError([
    {
      code: 'mesh-too-large',
      key: 'regions',
      wrong: `the mesh would pass ${work.limits.maxTriangles} triangles`,
      remedy: 'ask for longer edges or less accuracy, or leave out details far smaller than the section',
    },
  ]);
}
