import type { Opening, Winding } from '../machine.js';

/** A coil's leg where the circle of one radius crosses it. */
export interface LegCut {
  /** Mechanical angle in radians from the coil's axis to the leg's centre; the other leg mirrors it. */
  readonly halfSpan: number;
  /** Along the circumference, m. */
  readonly width: number;
}

/** Edges of the leg at the larger angle: mechanical radians from the coil's axis, towards the opening and away from it. */
export interface LegEdges {
  readonly inner: number;
  readonly outer: number;
}

/**
 * Centre and width of the legs at one radius.
 *
 * Concentrated coils: the legs lie along the slanted sides of the opening, prolonged to any radius (see `coilEdges`).
 * Overlapped coils: legs are radial and one pole pitch apart; a parallel one subtends 2 asin(w / 2r), a tapered one
 * 2 asin(w / 2 meanRadius) at every radius.
 *
 * @param meanRadius of the magnets, where a tapered leg has its stated width, m
 * @param radius     m
 * @throws Error if the circle does not reach the leg's far side (input checks refuse such coils)
 */
export function legCut(winding: Winding, poles: number, meanRadius: number, radius: number): LegCut {
  if (winding.layout === 'concentrated') {
    const { inner, outer } = coilEdges(winding, winding.opening, meanRadius, radius);
    return { halfSpan: (inner + outer) / 2, width: radius * (outer - inner) };
  }
  const { legWidth, legShape } = winding;
  const angle = 2 * arcsine(legWidth / (2 * (legShape === 'parallel' ? radius : meanRadius)), radius);
  return { halfSpan: Math.PI / poles, width: radius * angle };
}

/**
 * Edges of a concentrated coil's leg at one radius.
 *
 * The side of the opening is a straight line at the angle g to the coil's axis, passing the shaft at the signed distance
 * d:  tan g = (outerWidth - innerWidth) / (2 (outerRadius - innerRadius)),  d = (innerWidth/2) cos g - innerRadius sin g.
 * A point at radius r and at the distance s outside that line stands at the angle  g + asin((d + s)/r).  The inner edge
 * has s = 0, the outer edge s = legWidth (parallel, a second straight line), or s = legWidth r / meanRadius (tapered:
 * the leg's width, at right angles to the side, grows with the radius of the outer edge's point).
 *
 * @throws Error as `legCut`
 */
export function coilEdges(
  shape: Pick<Winding, 'legWidth' | 'legShape'>,
  opening: Opening,
  meanRadius: number,
  radius: number,
): LegEdges {
  const { slant, distance } = openingSide(opening);
  const width = shape.legShape === 'parallel' ? shape.legWidth : (shape.legWidth * radius) / meanRadius;
  return {
    inner: slant + arcsine(distance / radius, radius),
    outer: slant + arcsine((distance + width) / radius, radius),
  };
}

/** Angle to the coil's axis (rad) and signed distance from the shaft (m) of the opening's slanted side; see `coilEdges`. */
export function openingSide(opening: Opening): { readonly slant: number; readonly distance: number } {
  const { innerRadius, outerRadius, innerWidth, outerWidth } = opening;
  const slant = Math.atan2(outerWidth - innerWidth, 2 * (outerRadius - innerRadius));
  return { slant, distance: (innerWidth / 2) * Math.cos(slant) - innerRadius * Math.sin(slant) };
}

function arcsine(sine: number, radius: number): number {
  if (!(Math.abs(sine) <= 1)) throw new Error(`the circle of radius ${radius} m does not cross the leg's sides`);
  return Math.asin(sine);
}
