import type { Triangulation } from './triangulation.js';
import { circleHolds } from './triangulation.js';

/** Circumcircles of the triangles, kept by slot, and what refinement marks in the slots. */
export interface Circumcircles {
  /**
   * Float64Array, four a slot: centre x and y, m; squared radius, m^2; and the distance from the squared radius below
   * which a squared distance from the centre, both as computed, does not tell inside from outside.
   */
  data: Float64Array;
  /** Int32Array, per slot: the epoch in which it was marked; a new epoch clears all marks. */
  mark: Int32Array;
  epoch: number;
  /** Uint8Array, per slot: what the triangle was last judged to be, GOOD to LONG of work.ts. */
  verdict: Uint8Array;
}

export const newCircumcircles = (): Circumcircles => ({
  data: new Float64Array(0),
  mark: new Int32Array(0),
  epoch: 0,
  verdict: new Uint8Array(0),
});

/** Makes room for all slots of the triangulation; what is kept stays. */
export function fitCircumcircles(circles: Circumcircles, tri: Triangulation): void {
  const slots = tri.stamp.length;
  if (circles.mark.length >= slots) return;
  const data = new Float64Array(4 * slots);
  data.set(circles.data);
  circles.data = data;
  const mark = new Int32Array(slots);
  mark.set(circles.mark);
  circles.mark = mark;
  const verdict = new Uint8Array(slots);
  verdict.set(circles.verdict);
  circles.verdict = verdict;
}

/** Rounding unit of double numbers. */
const U = 2 ** -53;

/**
 * Keeps the circumcircle of triangle t: its first corner at (ax, ay), squared longest edge `longest2`, twice its area
 * `det`, the centre at (px, py) from the first corner, all as computed in the plain way.
 *
 * With k = longest2/det >= 1 rounding moves det by less than 8 U k of itself, hence the centre by less than
 * 12 U k^2 L + U (|x| + |y|), L the longest edge, and a squared distance near the squared radius r^2 by 2 r times that
 * and 4 U r^2. Since r <= k L/2, the bound kept is several times what can happen; where k is so great that the bound
 * would not hold it is infinite, and the exact predicate decides.
 */
export function keepCircle(
  circles: Circumcircles,
  t: number,
  ax: number,
  ay: number,
  px: number,
  py: number,
  longest2: number,
  det: number,
): void {
  const { data } = circles;
  const x = ax + px;
  const y = ay + py;
  const r2 = px * px + py * py;
  const k = longest2 / det;
  data[4 * t] = x;
  data[4 * t + 1] = y;
  data[4 * t + 2] = r2;
  data[4 * t + 3] =
    k > 0 && k < 1e6
      ? U * (100 * longest2 * k * k * k + 16 * r2 + 8 * Math.sqrt(r2) * (Math.abs(x) + Math.abs(y)))
      : Infinity;
}

/** Whether (x, y) lies inside the circumcircle of triangle t; exact, from what is kept where that tells. */
export function isInCircle(circles: Circumcircles, tri: Triangulation, t: number, x: number, y: number): boolean {
  const { data } = circles;
  const dx = data[4 * t] - x;
  const dy = data[4 * t + 1] - y;
  const beyond = dx * dx + dy * dy - data[4 * t + 2];
  const doubt = data[4 * t + 3];
  if (beyond > doubt) return false;
  if (beyond < -doubt) return true;
  return circleHolds(tri, t, x, y) > 0;
}
