import type { Machine, Opening, Winding } from '../machine.js';
import { coilEdges, legCut } from './leg-cut.js';

/** W as theta rises from the coil's axis: `share[0]` up to `angle[0]`, then straight from knot to knot, 0 at the last. */
export interface Profile {
  readonly angle: readonly number[];
  readonly share: readonly number[];
}

/**
 * One coil as a window: W(r, theta) is the share of its turns that go round a place, theta from the coil's axis, the same on
 * both sides of it.
 */
export interface CoilWindow {
  /** Radii where it begins, where its shape changes, where it ends; rising, m. */
  readonly radii: readonly number[];
  readonly profile: (radius: number) => Profile;
}

/** Radii between which the legs run: those of the opening where coils stand side by side. */
export const legEnds = (winding: Winding): { readonly innerRadius: number; readonly outerRadius: number } =>
  winding.layout === 'concentrated' ? winding.opening : winding.legs;

/** The whole coil, end turns and all. */
export function coilWindow({ winding, rotor }: Machine): CoilWindow {
  const { meanRadius } = rotor.magnets;
  return winding.layout === 'concentrated'
    ? sideBySideWindow(winding, meanRadius)
    : overlappedWindow(winding, rotor.poles, meanRadius);
}

/**
 * Coefficient of exp(i m theta) in W at one radius:  w_m = (1/pi) integral of W cos(m theta) from 0 to pi, in parts
 * (1/(pi m^2)) sum over the pieces of slope (cos(m end) - cos(m beginning)).
 */
export function windowWave({ angle, share }: Profile, order: number): number {
  let sum = order === 0 ? share[0] * angle[0] : 0;
  for (let i = 0; i + 1 < angle.length; i++) {
    const length = angle[i + 1] - angle[i];
    if (order === 0) sum += ((share[i] + share[i + 1]) / 2) * length;
    else if (length > 0) {
      const slope = (share[i + 1] - share[i]) / length;
      sum += (slope * (Math.cos(order * angle[i + 1]) - Math.cos(order * angle[i]))) / (order * order);
    }
  }
  return sum / Math.PI;
}

/**
 * Fundamental of the window at a radius:  S(r) = integral of W cos(p theta) dtheta,  p the pole pairs. A field
 * By = B1(r) cos(p theta) links the coil, when a magnet stands on its axis, by turns x integral of r B1 S dr.
 */
export function windowFundamental({ profile }: CoilWindow, poles: number, radius: number): number {
  return 2 * Math.PI * windowWave(profile(radius), poles / 2);
}

/**
 * The same of the slices' coil: two legs prolonged to any radius, their turns spread evenly over the leg's width along the
 * circumference:  S = (2/p) sin(p middle) sin(x)/x,  x = p (leg's angle)/2.
 */
export function legsFundamental({ rotor, winding }: Machine, radius: number): number {
  const pairs = rotor.poles / 2;
  const { halfSpan, width } = legCut(winding, rotor.poles, rotor.magnets.meanRadius, radius);
  const x = (pairs * width) / (2 * radius);
  return ((2 / pairs) * Math.sin(pairs * halfSpan) * Math.sin(x)) / x;
}

/**
 * Overlapped coils: the turn at share f of the leg's width, counted from the opening, goes across f leg widths beyond the
 * leg's ends (see `meanTurn`). The bundles cross each other there, out of the winding's plane as a rule; here they lie in it.
 */
function overlappedWindow(
  winding: Extract<Winding, { layout: 'overlapped' }>,
  poles: number,
  meanRadius: number,
): CoilWindow {
  const { legs, legWidth } = winding;
  const { innerRadius, outerRadius } = legs;
  return {
    radii: [Math.max(innerRadius - legWidth, 0), innerRadius, outerRadius, outerRadius + legWidth],
    profile: (radius) => {
      const gone = Math.max(0, innerRadius - radius, radius - outerRadius) / legWidth;
      if (gone >= 1) return { angle: [0], share: [0] };
      const nearest = Math.min(Math.max(radius, innerRadius), outerRadius);
      const { halfSpan, width } = legCut(winding, poles, meanRadius, nearest);
      const spread = width / nearest;
      return { angle: [halfSpan + (gone - 0.5) * spread, halfSpan + spread / 2], share: [1 - gone, 0] };
    },
  };
}

/** Pieces of the profile where it is round. */
const PIECES = 60;

/**
 * Coils side by side: the turns lie round the opening, evenly from 0 to the leg's width outside it, with round corners
 * (see `meanTurn`), so  W = 1 - (distance from the opening)/(leg's width), at least 0. A tapered leg's width goes with the
 * radius of the place, at the ends too.
 */
function sideBySideWindow(winding: Extract<Winding, { layout: 'concentrated' }>, meanRadius: number): CoilWindow {
  const { opening, legWidth, legShape } = winding;
  const { innerRadius, outerRadius, innerWidth, outerWidth } = opening;
  const innerCorner = Math.hypot(innerRadius, innerWidth / 2);
  const corner = Math.hypot(outerRadius, outerWidth / 2);
  const taper = legWidth / meanRadius; // the turns' rim is where distance = taper x radius
  const [inmost, outmost] =
    legShape === 'parallel'
      ? [innerRadius - legWidth, corner + legWidth]
      : [innerRadius / (1 + taper), taper < 1 ? corner / (1 - taper) : 2 * corner];
  return {
    radii: [Math.max(inmost, 0), innerRadius, innerCorner, outerRadius, corner, outmost],
    profile: (radius) => {
      if (radius >= innerCorner && radius <= outerRadius) {
        const { inner, outer } = coilEdges(winding, opening, meanRadius, radius);
        return { angle: [inner, outer], share: [1, 0] };
      }
      const width = legShape === 'parallel' ? legWidth : taper * radius;
      const reach = Math.asin(Math.min(1, (Math.max(innerWidth, outerWidth) / 2 + width) / radius));
      const angle = Array.from({ length: PIECES + 1 }, (_, i) => (i * reach) / PIECES);
      const share = angle.map((theta) =>
        Math.max(0, 1 - distanceFrom(opening, radius * Math.sin(theta), radius * Math.cos(theta)) / width),
      );
      share[PIECES] = 0;
      return { angle, share };
    },
  };
}

/** Distance of a place from the opening, 0 inside; x from the coil's axis, at least 0, z along it, m. */
function distanceFrom({ innerRadius, outerRadius, innerWidth, outerWidth }: Opening, x: number, z: number): number {
  const [a, b] = [innerWidth / 2, outerWidth / 2];
  const height = outerRadius - innerRadius;
  // Along the slanted side, and outwards from it.
  const length = Math.hypot(height, b - a);
  const along = ((z - innerRadius) * height + (x - a) * (b - a)) / length;
  const outwards = ((x - a) * height - (z - innerRadius) * (b - a)) / length;
  if (z >= innerRadius && z <= outerRadius && outwards <= 0) return 0;
  const end = Math.min(Math.max(along, 0), length);
  return Math.min(
    Math.hypot(along - end, outwards),
    Math.hypot(Math.max(0, x - a), z - innerRadius),
    Math.hypot(Math.max(0, x - b), z - outerRadius),
  );
}
