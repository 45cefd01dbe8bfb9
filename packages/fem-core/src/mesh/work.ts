import { InputError } from '../base/fault.js';
import type { Circumcircles } from './circumcircles.js';
import { fitCircumcircles, keepCircle, newCircumcircles } from './circumcircles.js';
import type { Fan } from './fan.js';
import { newFan } from './fan.js';
import type { Cavity } from './insert.js';
import { newCavity } from './insert.js';
import type { Queue } from './queue.js';
import { enqueue, newQueue } from './queue.js';
import type { SharpCorners } from './sharp-corners.js';
import { findSharpCorners } from './sharp-corners.js';
import type { Triangulation } from './triangulation.js';

/** What refinement promises, and where it stops. */
export interface QualityLimits {
  /** No angle below this, radians, away from sharper corners of the input. */
  readonly minAngle: number;
  /** A drawing that needs more is refused. */
  readonly maxTriangles: number;
}

/** What refinement holds while it works on a triangulation. */
export interface Work {
  readonly tri: Triangulation;
  readonly limits: QualityLimits;
  readonly sharp: SharpCorners;
  readonly circles: Circumcircles;
  readonly fan: Fan;
  readonly cavity: Cavity;
  /** Triangles a cut has just made. */
  readonly made: number[];
  /** Segments that a vertex encroaches on, or longer than wanted; judged again when their turn comes. */
  readonly poor: number[];
  /** Segments that a point yet to be made would encroach on; empty between points. */
  readonly encroached: number[];
  /** Triangles to treat, in this order: flat ones, long ones on the front, long ones off it, those a little too long. */
  readonly flat: Queue;
  readonly front: Queue;
  readonly long: Queue;
  readonly over: Queue;
  /** Squared ratio shortest edge / (2 circumradius) below which a triangle is flat. */
  readonly flatness: number;
  /** Height of Uengoer's off-centre over the shortest edge, in lengths of that edge. */
  readonly offCentre: number;
  /** Squared length below which nothing is cut any more. */
  readonly floor: number;
  /** Float64Array(2): the point about to be made, m. */
  readonly point: Float64Array;
}

/**
 * What refinement thinks of a triangle: good; flat, of angles too small; over, of edges a little longer than wanted; long.
 * A triangle that is flat and over or long counts as the latter.
 */
export const GOOD = 0;
export const FLAT = 1;
export const OVER = 2;
export const LONG = 3;

/**
 * Squared longest edge, in squares of that wanted, above which a triangle is long and not merely over. As the front of
 * good triangles advances it must not break those it has just left behind; 2.1 in length left the fewest triangles in
 * trials on sections of many kinds.
 */
const LONG_FROM = 4.5;

/** Rounding of an edge cut to exactly the length wanted: this much over it, squared, is not longer. */
export const AS_WANTED = 1 + 1e-12;

export function startWork(tri: Triangulation, limits: QualityLimits): Work {
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
  const circles = newCircumcircles();
  fitCircumcircles(circles, tri);
  return {
    tri,
    limits,
    sharp: findSharpCorners(tri),
    circles,
    fan: newFan(),
    cavity: newCavity(),
    made: [],
    poor: [],
    encroached: [],
    flat: newQueue(),
    front: newQueue(),
    long: newQueue(),
    over: newQueue(),
    flatness: Math.sin(limits.minAngle) ** 2,
    offCentre: 0.5 / Math.tan(limits.minAngle / 2),
    floor: (1e-7 * Math.max(x1 - x0, y1 - y0)) ** 2,
    point: new Float64Array(2),
  };
}

/** Measures triangle t, keeps its circumcircle and its verdict, and queues it unless it is good. */
export function judgeTriangle(work: Work, t: number): void {
  const { tri, circles } = work;
  const { xy, origin } = tri;
  const a = 2 * origin[3 * t];
  const b = 2 * origin[3 * t + 1];
  const c = 2 * origin[3 * t + 2];
  const ax = xy[a];
  const ay = xy[a + 1];
  const ux = xy[b] - ax;
  const uy = xy[b + 1] - ay;
  const vx = xy[c] - ax;
  const vy = xy[c + 1] - ay;
  const wx = vx - ux;
  const wy = vy - uy;
  const u2 = ux * ux + uy * uy;
  const v2 = vx * vx + vy * vy;
  const w2 = wx * wx + wy * wy;
  const longest2 = Math.max(u2, v2, w2);
  const det = ux * vy - uy * vx;
  const px = (vy * u2 - uy * v2) / (2 * det);
  const py = (ux * v2 - vx * u2) / (2 * det);
  keepCircle(circles, t, ax, ay, px, py, longest2, det);
  const size = tri.size[t];
  if (longest2 > size * size * AS_WANTED) {
    const isLong = longest2 > size * size * LONG_FROM;
    circles.verdict[t] = isLong ? LONG : OVER;
    enqueue(isLong ? work.front : work.over, t, tri.stamp[t]);
  } else if (Math.min(u2, v2, w2) < 4 * (px * px + py * py) * work.flatness) {
    circles.verdict[t] = FLAT;
    enqueue(work.flat, t, tri.stamp[t]);
  } else circles.verdict[t] = GOOD;
}

/** Judges the triangles of the fan just made; long ones beside others that are not now stand on the front. */
export function judgeFan(work: Work): void {
  const { tri, circles, fan } = work;
  const { slots, outer, count } = fan;
  for (let i = 0; i < count; i++) {
    judgeTriangle(work, slots[i]);
    if (circles.verdict[slots[i]] === LONG || outer[i] < 0) continue;
    const u = (outer[i] / 3) | 0;
    if (circles.verdict[u] === LONG) enqueue(work.front, u, tri.stamp[u]);
  }
}

export function checkCount(work: Work): void {
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
