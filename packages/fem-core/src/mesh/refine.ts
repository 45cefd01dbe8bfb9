import type { Steps } from '../base/steps.js';
import { cutSegment, isInDiametral, isPoor, judgeMade } from './cut-segments.js';
import { fillFan, growFan, readBorder } from './fan.js';
import { fillCavity, findCavity, walkTo } from './insert.js';
import { edgeLength2, frontEdge, placePoint, shortestEdge } from './place-points.js';
import { dequeue, enqueue } from './queue.js';
import { bridgesSharpCorner } from './sharp-corners.js';
import type { Triangulation } from './triangulation.js';
import { inUse } from './triangulation.js';
import type { QualityLimits, Work } from './work.js';
import { checkCount, judgeFan, judgeTriangle, startWork } from './work.js';

export type { QualityLimits } from './work.js';

/** 25 degrees: above Ruppert's proven 20.7, below the 33 at which the method stops ending in practice. */
export const DEFAULT_LIMITS: QualityLimits = { minAngle: (25 * Math.PI) / 180, maxTriangles: 2_000_000 };

/**
 * Conforming Delaunay refinement, in place: segments that are too long, or whose diametral circle holds a vertex, are cut,
 * and into each triangle that is too flat or longer than wanted its circumcentre, or a point nearer to an edge that is
 * short enough, is inserted, unless it would encroach on a segment, which is then cut instead.
 *
 * Flat triangles: Ruppert, A Delaunay refinement algorithm for quality 2-dimensional mesh generation, J. Algorithms 18,
 * 1995; with the points of Uengoer, Off-centers, LATIN 2004. Long ones: from the segments inwards, each new vertex making
 * a triangle of the wanted size on the front of those that are short enough, as in Rebay, Efficient unstructured mesh
 * generation by means of Delaunay triangulation and Bowyer-Watson algorithm, J. Comput. Phys. 106, 1993, which takes
 * about two thirds of the triangles that circumcentres take. Concentric shells round sharp corners as in Shewchuk,
 * Delaunay refinement algorithms for triangular mesh generation, Comput. Geom. 22, 2002. Segments on matched sides are
 * cut together.
 *
 * It ends because each point put into a triangle lies on the Voronoi edge of the edge it is placed from: no vertex is
 * nearer to it than the ends of that edge, which for long triangles are 1/sqrt(3) of the wanted length away or more, or
 * as far as the angle asked for allows, which is farther than they are from each other.
 * Stops after some thousand points each, so that it can be called off.
 * @throws InputError when the triangles asked for pass `limits.maxTriangles`
 */
export function* refine(tri: Triangulation, limits: QualityLimits): Steps<RefineProgress, void> {
  const work = startWork(tri, limits);
  for (let s = 0; s < tri.segments.from.length; s++) if (isPoor(work, s)) work.poor.push(s);
  for (let t = 0; t < tri.slotCount; t++) if (inUse(tri, t)) judgeTriangle(work, t);
  while (treatSome(work)) yield { refined: tri.slotCount - tri.free.length };
}

/** Told while a mesh is made or refined. */
export interface RefineProgress {
  /** Triangles so far. */
  readonly refined: number;
}

/** Cuts and points between two steps: some ten milliseconds of work. */
const AT_ONCE = 8192;

/** False when nothing is left to do. */
function treatSome(work: Work): boolean {
  for (let i = 0; i < AT_ONCE; i++) if (!(cutNext(work) || treatNextFlat(work) || treatNextLong(work))) return false;
  return true;
}

/** The last segment found poor; false when there is none. */
function cutNext(work: Work): boolean {
  const s = work.poor.pop();
  if (s === undefined) return false;
  if (isPoor(work, s)) cutSegment(work, s);
  return true;
}

function treatNextFlat(work: Work): boolean {
  const { tri, flat, sharp } = work;
  const t = dequeue(flat, tri);
  if (t < 0) return false;
  const base = shortestEdge(work, t);
  if (edgeLength2(work, base) < work.floor || bridgesSharpCorner(tri, sharp, base)) return true;
  placePoint(work, t, base, false);
  makeVertex(work, t);
  return true;
}

function treatNextLong(work: Work): boolean {
  const { tri, front, long, over } = work;
  let t = dequeue(front, tri);
  const isOnFront = t >= 0;
  if (t < 0) t = dequeue(long, tri);
  if (t < 0) t = dequeue(over, tri);
  if (t < 0) return false;
  let base = frontEdge(work, t);
  if (base < 0 && isOnFront) {
    enqueue(long, t, tri.stamp[t]); // until the front comes there
    return true;
  }
  if (base < 0) base = shortestEdge(work, t);
  if (edgeLength2(work, base) < work.floor) return true;
  placePoint(work, t, base, true);
  makeVertex(work, t);
  return true;
}

/** Inserts `work.point`, which lies in the circumcircle of triangle t, or cuts the segments it would encroach on. */
function makeVertex(work: Work, t: number): void {
  const { tri, circles, fan, encroached } = work;
  const x = work.point[0];
  const y = work.point[1];
  if (!growFan(tri, circles, fan, t, x, y) || !readBorder(tri, fan, x, y, encroached)) {
    makeVertexWithCare(work, t, x, y);
    return;
  }
  if (encroached.length > 0) {
    cutEncroached(work, t);
    return;
  }
  checkCount(work);
  fillFan(tri, circles, fan, x, y);
  judgeFan(work);
}

/** The same where a segment stands between triangle and point, or rounding decides. */
function makeVertexWithCare(work: Work, t: number, x: number, y: number): void {
  const { tri, cavity, encroached } = work;
  const landing = walkTo(tri, t, x, y);
  encroached.length = 0;
  if (landing.kind === 'blocked') {
    encroached.push(tri.segment[landing.half]);
    cutEncroached(work, t);
    return;
  }
  const seen = findCavity(tri, cavity, x, y, [landing.t], -1);
  for (const h of cavity.border) {
    const s = tri.segment[h];
    if (s >= 0 && isInDiametral(tri, s, x, y)) encroached.push(s);
  }
  if (encroached.length > 0) {
    cutEncroached(work, t);
    return;
  }
  if (!seen) return; // smaller than rounding can tell
  checkCount(work);
  fillCavity(tri, cavity, x, y, -1, work.made);
  judgeMade(work);
}

/** The vertex is not made: the segments it would encroach on are cut first, whether or not a vertex encroaches yet. */
function cutEncroached(work: Work, t: number): void {
  let cut = false;
  for (const s of work.encroached.splice(0)) cut = cutSegment(work, s) || cut;
  if (cut && inUse(work.tri, t)) judgeTriangle(work, t);
}
