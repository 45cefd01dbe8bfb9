import { pointOnCurve } from '../geometry/curve.js';
import type { Point } from '../geometry/section.js';
import { fitCircumcircles } from './circumcircles.js';
import { apex, fillCavity, findCavity, walkFrom } from './insert.js';
import { shellShare } from './sharp-corners.js';
import type { Triangulation } from './triangulation.js';
import { nextHalf, triangleOf, turn } from './triangulation.js';
import type { Work } from './work.js';
import { AS_WANTED, checkCount, judgeTriangle } from './work.js';

/** True when the segment is to be cut: a vertex encroaches on it, or it is longer than wanted on one of its sides. */
export function isPoor(work: Work, s: number): boolean {
  const { tri } = work;
  const h = tri.segments.half[s];
  const g = tri.twin[h];
  if (seesObtusely(tri, s, apex(tri, h)) || (g >= 0 && seesObtusely(tri, s, apex(tri, g)))) return true;
  const size = wishAt(tri, s);
  return length2(tri, s) > size * size * AS_WANTED;
}

/** Length wanted of the edges beside a segment. */
function wishAt(tri: Triangulation, s: number): number {
  const h = tri.segments.half[s];
  const g = tri.twin[h];
  const size = tri.size[triangleOf(h)];
  return g < 0 ? size : Math.min(size, tri.size[triangleOf(g)]);
}

function length2(tri: Triangulation, s: number): number {
  const { segments, xy } = tri;
  const a = 2 * segments.from[s];
  const b = 2 * segments.to[s];
  return (xy[a] - xy[b]) ** 2 + (xy[a + 1] - xy[b + 1]) ** 2;
}

function seesObtusely(tri: Triangulation, s: number, v: number): boolean {
  return isInDiametral(tri, s, tri.xy[2 * v], tri.xy[2 * v + 1]);
}

/** (x, y) lies inside the circle over the segment as diameter. */
export function isInDiametral(tri: Triangulation, s: number, x: number, y: number): boolean {
  const a = 2 * tri.segments.from[s];
  const b = 2 * tri.segments.to[s];
  const { xy } = tri;
  return (xy[a] - x) * (xy[b] - x) + (xy[a + 1] - y) * (xy[b + 1] - y) < 0;
}

/**
 * Cuts a segment, on its curve, and with it the segment it is matched with; false where it is too short to be cut, or the
 * way to the cut is not to be cleared. `depth` counts cuts made for the sake of other cuts.
 */
export function cutSegment(work: Work, s: number, depth = 0): boolean {
  const { tri } = work;
  const { segments } = tri;
  if (length2(tri, s) < work.floor) return false;
  const share = cutShare(work, s);
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

/**
 * Where to cut, as a share from the first end: so that the parts may in the end be cut into the fewest equal pieces as
 * short as wanted, else half-way; near a sharp corner of the input on its shells.
 */
function cutShare(work: Work, s: number): number {
  const { tri, sharp } = work;
  const share = shellShare(tri, sharp, s);
  if (share !== 0.5) return share;
  const curve = tri.curves[tri.segments.curve[s]];
  const chord = Math.sqrt(length2(tri, s));
  const length = curve.kind === 'line' ? chord : 2 * curve.radius * Math.asin(Math.min(1, chord / (2 * curve.radius)));
  const pieces = Math.ceil((length / wishAt(tri, s)) * (1 - 1e-9));
  return pieces > 2 && pieces < 1e6 ? (pieces >> 1) / pieces : 0.5;
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
    if (curves[segments.curve[other]].kind === 'line' || !cutSegment(work, other, depth + 1)) return false;
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

/** Judges the triangles `fillCavity` has just made, and the segments they lie on. */
export function judgeMade(work: Work): void {
  const { tri, made, poor } = work;
  fitCircumcircles(work.circles, tri);
  for (const t of made) {
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      const s = tri.segment[h];
      if (s >= 0 && isPoor(work, s)) poor.push(s);
    }
    judgeTriangle(work, t);
  }
}
