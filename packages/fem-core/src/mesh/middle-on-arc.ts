import type { Curve } from '../geometry/curve.js';
import type { Point } from '../geometry/section.js';

/**
 * Third node of an edge from a to b along an arc: over the middle of the chord, so high that the parabola through the
 * three nodes encloses with the chord the area of the circular segment. Areas bounded by arcs are then exact to rounding,
 * and the distance from arc to parabola has the mean zero on every edge.
 *
 *   parabola: area 2/3 chord rise;  segment: area R^2/2 (phi - sin phi);  chord = 2 R sin(phi/2)
 *   rise / chord = 3/16 (phi - sin phi) / sin^2(phi/2)
 *
 * The node stands off the arc by phi^2/80 or so of the rise. Derived here.
 */
export function middleOnArc(
  { centre }: Extract<Curve, { kind: 'arc' }>,
  ax: number,
  ay: number,
  bx: number,
  by: number,
): Point {
  const [px, py, qx, qy] = [ax - centre[0], ay - centre[1], bx - centre[0], by - centre[1]];
  const phi = Math.atan2(px * qy - py * qx, px * qx + py * qy); // negative where the arc runs clockwise, as is the rise
  const half = Math.sin(0.5 * phi);
  const rise = half === 0 ? 0 : (0.1875 * lessSine(phi)) / (half * half); // to the right of the chord, in chords
  return [0.5 * (ax + bx) + rise * (by - ay), 0.5 * (ay + by) - rise * (bx - ax)];
}

/** phi - sin phi, by its series where the difference would cancel; to rounding for all |phi| <= pi. */
function lessSine(phi: number): number {
  if (Math.abs(phi) > 1) return phi - Math.sin(phi);
  const p = phi * phi;
  let series = 1;
  for (let k = 17; k >= 5; k -= 2) series = 1 - (p / (k * (k - 1))) * series;
  return (phi * p * series) / 6;
}
