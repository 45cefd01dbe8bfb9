/**
 * A direction of magnetisation that may turn from place to place. Its angle from +x at (x, y), radians:
 *
 *   angle + turns atan2(y - cy, x - cx) + gradient . (x - cx, y - cy)
 *
 * Uniform: `angle` alone. Radial outwards: turns 1; inwards: turns 1, angle pi; along circles: turns 1, angle pi/2. A round
 * Halbach array of p pole pairs: turns 1 + p or 1 - p; a straight one of wavelength L along x: gradient [-+2 pi/L, 0].
 */
export interface Direction {
  /** From +x towards +y, radians. */
  readonly angle: number;
  /** The point angles and distances are counted from, metres; the origin if absent. */
  readonly centre?: readonly [x: number, y: number];
  /** A whole number, since the direction must come back to itself round the centre; 0 if absent. */
  readonly turns?: number;
  /** Change of the angle along x and along y, rad/m; none if absent. */
  readonly gradient?: readonly [number, number];
}

/** Angle of the direction at (x, y), radians. */
export function directionAt({ angle, centre = [0, 0], turns = 0, gradient }: Direction, x: number, y: number): number {
  const [dx, dy] = [x - centre[0], y - centre[1]];
  const round = turns === 0 ? 0 : turns * Math.atan2(dy, dx);
  return angle + round + (gradient === undefined ? 0 : gradient[0] * dx + gradient[1] * dy);
}
