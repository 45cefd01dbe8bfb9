import type { MatchedSides } from './matched-sides.js';
import { fits, matchSides } from './matched-sides.js';
import type { Point, Section, Shape } from './section.js';
import type { Circle } from './shapes.js';
import { boundsOf, centreOf, cornersOf, sidesOf, snapOf } from './shapes.js';
import { BEYOND_REGION, OUTSIDE_REGION } from './unbounded.js';

/** A section as it is drawn: shapes over one another, those of open space included. */
export interface Drawing {
  /** Outlines first, what lies in none of them is not meshed; then layers, a later one over the earlier ones. */
  readonly shapes: readonly Drawn[];
  readonly outlineCount: number;
  /** Number of the shape that the layers above it must not overhang, where there is one. */
  readonly ground?: number;
  /** Sides of all outlines, one after the other. */
  readonly sideNames: readonly string[];
  readonly matched: readonly MatchedSides[];
  readonly regionNames: readonly string[];
  /** Longest edge wanted in each region, metres; Infinity for no wish. */
  readonly maxEdges: readonly number[];
  /** Distance within which points are one, metres. */
  readonly snap: number;
  readonly beyond?: Inversion;
}

export interface Drawn {
  readonly shape: Shape;
  /** Region of what this shape covers and no later one does. */
  readonly region: number;
  /** Where the input gave it. */
  readonly key: string;
}

/** The disc that stands for all beyond the circle of inversion. */
export interface Inversion {
  readonly centre: Point;
  readonly radius: number;
  readonly imageCentre: Point;
  readonly region: number;
}

/** Radius of the circle of inversion, in radii of the circle round the outline about its middle. */
const MARGIN = 1.2;

/** The image's centre from the centre, in radii. */
const APART = 3;

/** The section's shapes in order; faultless sections only, see `checkShapes`. */
export function drawingOf(section: Section): Drawing {
  const layers = section.regions.map(({ name, shape }, i) => ({ shape, region: i + 1, key: `regions.${name}.shape` }));
  const outline: Drawn = { shape: section.outline, region: 0, key: 'outline' };
  const wish = (maxEdge: number | undefined): number => maxEdge ?? Infinity;
  const closed: Drawing = {
    shapes: [outline, ...layers],
    outlineCount: 1,
    sideNames: sidesOf(section.outline),
    matched: (section.matched ?? []).map((pair) => matchSides(section.outline, pair)).filter(fits),
    regionNames: [section.background, ...section.regions.map((region) => region.name)],
    maxEdges: [section.maxEdge, ...section.regions.map((region) => region.maxEdge)].map(wish),
    snap: snapOf(section),
  };
  return section.open === true ? opened(closed) : closed;
}

function opened(closed: Drawing): Drawing {
  const [outline, ...layers] = closed.shapes;
  const circle = circleRound(outline.shape);
  const { centre, radius } = circle;
  const shift: Point = [APART * radius, 0];
  const imageCentre: Point = [centre[0] + shift[0], centre[1] + shift[1]];
  const image = (region: number): Drawn => ({
    shape: { kind: 'circle', centre: imageCentre, radius },
    region,
    key: 'open',
  });
  const own = outline.shape.kind === 'circle';
  const region = closed.regionNames.length; // of the air outside; where the outline is the circle there is none
  const more = own ? [BEYOND_REGION] : [OUTSIDE_REGION, BEYOND_REGION];
  const beyond = region + more.length - 1;
  return {
    shapes: own
      ? [outline, image(beyond), ...layers]
      : [{ shape: circle, region, key: 'open' }, image(beyond), outline, ...layers],
    outlineCount: 2,
    ground: own ? 0 : 2,
    sideNames: ['rim', 'far rim'],
    matched: [{ from: [0], to: [1], shift }],
    regionNames: [...closed.regionNames, ...more],
    maxEdges: [...closed.maxEdges, ...more.map(() => Infinity)],
    snap: closed.snap,
    beyond: { centre, radius, imageCentre, region: beyond },
  };
}

/** The outline itself where it is a circle, else a circle about its middle that leaves room round it. */
function circleRound(outline: Shape): Circle {
  if (outline.kind === 'circle') return outline;
  const centre = centreOf(boundsOf(outline));
  let reach = 0;
  for (const [x, y] of cornersOf(outline)) reach = Math.max(reach, Math.hypot(x - centre[0], y - centre[1]));
  return { kind: 'circle', centre, radius: MARGIN * reach };
}
