import type { Machine, Opening, Winding } from '../machine.js';
import { legCut } from '../winding/leg-cut.js';

/**
 * One coil as a window: W(r, theta), the share of its turns that go round a place, theta from the coil's axis, and its
 * fundamental at a radius,  S(r) = integral of W cos(p theta) dtheta,  p the pole pairs.
 *
 * A field By = B1(r) cos(p theta) then links the coil, when a magnet stands on its axis, by turns x integral of r B1 S
 * dr.
 */
export interface CoilWindow {
  /** Radii where the window begins, where its shape changes, where it ends; rising, m. */
  readonly radii: readonly number[];
  readonly fundamental: (radius: number) => number;
}

/** The whole coil, end turns and all. */
export function coilWindow({ rotor, winding }: Machine): CoilWindow {
  return winding.layout === 'concentrated'
    ? sideBySideWindow(winding, rotor.poles, rotor.magnets.meanRadius)
    : overlappedWindow(winding, rotor.poles, rotor.magnets.meanRadius);
}

/**
 * The slices' coil: two legs prolonged to any radius, their turns spread evenly over the leg's width along the
 * circumference:  S = (2/p) sin(p middle) sin(x)/x,  x = p (leg's angle)/2.
 */
export function legsFundamental({ rotor, winding }: Machine, radius: number): number {
  const pairs = rotor.poles / 2;
  const { halfSpan, width } = legCut(winding, rotor.poles, rotor.magnets.meanRadius, radius);
  const x = (pairs * width) / (2 * radius);
  return ((2 / pairs) * Math.sin(pairs * halfSpan) * Math.sin(x)) / x;
}

/** Midpoints along the circumference from a coil's axis to its outside. */
const STEPS = 240;

/**
 * Coils side by side: the turns lie round the opening, evenly from 0 to the leg's width outside it, with round corners
 * (see `meanTurn`), so
 *
 *   W = 1 - (distance from the opening)/(leg's width), at least 0.
 *
 * A tapered leg's width goes with the radius of the place, at the ends too.
 */
function sideBySideWindow(
  winding: Extract<Winding, { layout: 'concentrated' }>,
  poles: number,
  meanRadius: number,
): CoilWindow {
  const { opening, legWidth, legShape } = winding;
  const pairs = poles / 2;
  const widthAt = (radius: number): number => (legShape === 'parallel' ? legWidth : (legWidth * radius) / meanRadius);
  const corner = Math.hypot(opening.outerRadius, opening.outerWidth / 2);
  // Tapered: the turns' rim is where distance = legWidth r/meanRadius.
  const taper = legWidth / meanRadius;
  const inmost = legShape === 'parallel' ? opening.innerRadius - legWidth : opening.innerRadius / (1 + taper);
  const outmost = legShape === 'parallel' ? corner + legWidth : taper < 1 ? corner / (1 - taper) : 2 * corner;
  const innerCorner = Math.hypot(opening.innerRadius, opening.innerWidth / 2);
  return {
    radii: [Math.max(inmost, 0), opening.innerRadius, innerCorner, opening.outerRadius, corner, outmost],
    fundamental: (radius) => {
      const width = widthAt(radius);
      const widest = Math.max(opening.innerWidth, opening.outerWidth) / 2 + width;
      const reach = Math.asin(Math.min(1, widest / radius));
      let sum = 0;
      for (let i = 0; i < STEPS; i++) {
        const angle = ((i + 0.5) * reach) / STEPS;
        const apart = distanceFrom(opening, radius * Math.sin(angle), radius * Math.cos(angle));
        if (apart < width) sum += (1 - apart / width) * Math.cos(pairs * angle);
      }
      return (2 * sum * reach) / STEPS;
    },
  };
}

/** Distance of a place from the opening, 0 inside; x from the coil's axis, at least 0, z along it, m. */
function distanceFrom({ innerRadius, outerRadius, innerWidth, outerWidth }: Opening, x: number, z: number): number {
  const [a, b] = [innerWidth / 2, outerWidth / 2];
  const height = outerRadius - innerRadius;
  // Along the slanted side and outwards from it.
  const length = Math.hypot(height, b - a);
  const along = ((z - innerRadius) * height + (x - a) * (b - a)) / length;
  const outwards = ((x - a) * height - (z - innerRadius) * (b - a)) / length;
  const within = z >= innerRadius && z <= outerRadius && outwards <= 0;
  if (within) return 0;
  const end = Math.min(Math.max(along, 0), length);
  const toSide = Math.sqrt((along - end) ** 2 + outwards ** 2);
  const toInner = Math.sqrt(Math.max(0, x - a) ** 2 + (z - innerRadius) ** 2);
  const toOuter = Math.sqrt(Math.max(0, x - b) ** 2 + (z - outerRadius) ** 2);
  return Math.min(toSide, toInner, toOuter);
}

/**
 * Overlapped coils: the turn at share f of the leg's width, counted from the opening, goes across at f leg widths
 * beyond the leg's ends (see `meanTurn`), so it goes round everything within these arcs and its legs' angle e(f). With
 * g the share of the turns that have gone across before the radius is reached,
 *
 *   S = integral from g to 1 of (2/p) sin(p e(f)) df,   e(f) = inner + f (outer - inner).
 *
 * The bundles cross each other at the ends, out of the winding's plane as a rule; here they lie in it.
 */
function overlappedWindow(
  winding: Extract<Winding, { layout: 'overlapped' }>,
  poles: number,
  meanRadius: number,
): CoilWindow {
  const { legs, legWidth } = winding;
  const pairs = poles / 2;
  const { innerRadius, outerRadius } = legs;
  return {
    radii: [Math.max(innerRadius - legWidth, 0), innerRadius, outerRadius, outerRadius + legWidth],
    fundamental: (radius) => {
      const beyond = Math.max(0, innerRadius - radius, radius - outerRadius);
      const gone = beyond / legWidth;
      if (gone >= 1) return 0;
      const { halfSpan, width } = legCut(
        winding,
        poles,
        meanRadius,
        Math.min(Math.max(radius, innerRadius), outerRadius),
      );
      const spread = width / Math.min(Math.max(radius, innerRadius), outerRadius);
      const from = pairs * (halfSpan + (gone - 0.5) * spread);
      const to = pairs * (halfSpan + spread / 2);
      return ((2 / pairs) * (Math.cos(from) - Math.cos(to))) / (pairs * spread);
    },
  };
}
