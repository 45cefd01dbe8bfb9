import { incircle, orient2d } from 'robust-predicates';

/**
 * Twice the signed area of triangle abc with a sign that is always right: positive when a, b, c run counter-clockwise.
 * Shewchuk, Adaptive Precision Floating-Point Arithmetic and Fast Robust Geometric Predicates, 1997.
 */
export function orientation(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  return -orient2d(ax, ay, bx, by, cx, cy); // the library counts clockwise positive, for a y axis that points down
}

/** Positive when d lies inside the circle through a, b, c (counter-clockwise), negative outside, 0 on it; exact sign. */
export function inCircle(
  ax: number,
  ay: number,
  bx: number,
  by: number,
  cx: number,
  cy: number,
  dx: number,
  dy: number,
): number {
  return incircle(ax, ay, bx, by, cx, cy, dx, dy);
}
