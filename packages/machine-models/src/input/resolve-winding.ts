import type { Opening, Winding, Wire } from '../machine.js';
import { openingSide } from '../winding/leg-cut.js';
import type { WindingFile, WireFile } from './schema-winding.js';

/** What `fit`, `fill` and the defaults of a winding's sizes depend on. */
export interface Surroundings {
  readonly poles: number;
  readonly gap: number;
  /** Inner and outer radius of the magnets, m. */
  readonly inner: number;
  readonly outer: number;
}

type LegShape = Winding['legShape'];

/** The winding in SI units, `fit`, `fill` and the defaults worked out; NaN where something they need is not known. */
export function resolveWinding(file: WindingFile, around: Surroundings): Winding {
  const common = {
    phases: file.phases,
    coils: file.coils,
    turns: file.turns,
    legShape: file.leg_shape,
    thickness: file.thickness ?? around.gap - 2 * file.clearance,
    clearance: file.clearance,
    wire: resolveWire(file.wire),
    connection: file.connection,
    paths: file.paths,
    temperature: file.temperature,
  } as const;
  if (file.layout === 'overlapped') {
    const { inner_radius: innerRadius = around.inner, outer_radius: outerRadius = around.outer } = file.opening ?? {};
    const legWidth = file.leg_width === 'fill' ? overlappedRoom(common, innerRadius, around) : file.leg_width;
    return { layout: 'overlapped', ...common, legWidth, legs: { innerRadius, outerRadius } };
  }
  const given = file.leg_width === 'fill' ? Number.NaN : file.leg_width;
  const opening = resolveOpening(file, given, around);
  const legWidth = file.leg_width === 'fill' ? legRoom(common, opening, around).width : given;
  return { layout: 'concentrated', ...common, legWidth, opening };
}

function resolveOpening(
  { opening, coils, leg_shape }: WindingFile & { readonly layout: 'concentrated' },
  legWidth: number,
  around: Surroundings,
): Opening {
  const innerRadius = opening.inner_radius === 'fit' ? around.inner : opening.inner_radius;
  const outerRadius = opening.outer_radius === 'fit' ? around.outer : opening.outer_radius;
  const fit = (radius: number): number => fittingWidth(coils, leg_shape, legWidth, radius, around);
  return {
    innerRadius,
    outerRadius,
    innerWidth: opening.inner_width === 'fit' ? fit(innerRadius) : opening.inner_width,
    outerWidth: opening.outer_width === 'fit' ? fit(outerRadius) : opening.outer_width,
  };
}

/**
 * Width of the opening at one end such that the legs of neighbouring coils touch all along. Parallel legs: their sides
 * run parallel to the border between two coils, w / cos(pi/coils) from it straight across the coil's axis. Tapered legs:
 * both sides run along radii, and the leg's width is r sin of the angle between them.
 */
function fittingWidth(
  coils: number,
  legShape: LegShape,
  legWidth: number,
  radius: number,
  { inner, outer }: Surroundings,
): number {
  const border = Math.PI / coils;
  if (legShape === 'parallel') return 2 * (radius * Math.tan(border) - legWidth / Math.cos(border));
  const legAngle = Math.asin(Math.min(1, legWidth / ((inner + outer) / 2)));
  return 2 * radius * Math.tan(border - legAngle);
}

/**
 * The largest leg width (of a tapered leg: its width at the magnets' mean radius) with which neighbouring coils do not
 * overlap between the radii of the opening, and the radius that limits it.
 *
 * At radius r the border to the next coil, at the angle pi/coils, stands r sin(pi/coils - slant) - distance outside the
 * line of the opening's side (see `openingSide`), at right angles to it. That is linear in r, and its ratio to r is
 * monotone, so one end of the opening limits.
 */
export function legRoom(
  { coils, legShape }: Pick<Winding, 'coils' | 'legShape'>,
  opening: Opening,
  around: Surroundings,
): { readonly width: number; readonly radius: number } {
  const { slant, distance } = openingSide(opening);
  const [atInner, atOuter] = [opening.innerRadius, opening.outerRadius].map((radius) => {
    const room = radius * Math.sin(Math.PI / coils - slant) - distance;
    return { width: room / widthAt(legShape, radius, around), radius };
  });
  return atOuter.width < atInner.width ? atOuter : atInner;
}

/** As `legRoom`, for the phases x poles straight legs of overlapped coils: they touch first at their inner ends. */
export function overlappedRoom(
  { phases, legShape }: Pick<Winding, 'phases' | 'legShape'>,
  innerRadius: number,
  around: Surroundings,
): number {
  const room = 2 * innerRadius * Math.sin(Math.PI / (phases * around.poles));
  return room / widthAt(legShape, innerRadius, around);
}

/** Width of a leg at a radius, as a share of its stated width. */
export function widthAt(legShape: LegShape, radius: number, { inner, outer }: Surroundings): number {
  return legShape === 'parallel' ? 1 : (2 * radius) / (inner + outer);
}

/** Bare section of one strand by whichever way the wire is given; AWG n has (0.127 mm) 92^((36 - n)/39), ASTM B258. */
export function resolveWire({ diameter, awg, width, height, strands, enamel }: WireFile): Wire {
  const common = { strands, ...(enamel === undefined ? {} : { enamel }) };
  if (width !== undefined && height !== undefined) return { strandArea: width * height, width, height, ...common };
  const round = awg === undefined ? (diameter ?? Number.NaN) : 0.127e-3 * 92 ** ((36 - awg) / 39);
  return { strandArea: (Math.PI / 4) * round ** 2, diameter: round, ...common };
}
