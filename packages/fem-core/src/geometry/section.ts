/** A point of the plane, metres. */
export type Point = readonly [x: number, y: number];

/**
 * What can be drawn. Polygons may run either way round, and may repeat their first corner at the end; circles stay
 * circles down to the elements.
 */
export type Shape =
  | { readonly kind: 'rectangle'; readonly from: Point; readonly to: Point }
  | { readonly kind: 'polygon'; readonly corners: readonly Point[] }
  | { readonly kind: 'circle'; readonly centre: Point; readonly radius: number };

/** A named part of the plane. What fills it is told by the `Setup`, under the same name. */
export interface Region {
  readonly name: string;
  readonly shape: Shape;
  /** Longest element edge wanted inside, metres; none if absent. */
  readonly maxEdge?: number;
}

/** Elements near a point: at distance d from `at` no edge is longer than maxEdge + growth d. */
export interface SizeAt {
  readonly at: Point;
  /** Metres. */
  readonly maxEdge: number;
  /** 0.3 if absent; 0 wants `maxEdge` everywhere. */
  readonly growth?: number;
}

/** A side of the outline, or a chain of sides that follow each other round it, by name. */
export type SideChain = string | readonly string[];

/**
 * A plane section: an outline filled by `background`, and regions drawn in order, a later one over the earlier ones.
 * What a region has outside the outline is cut off.
 *
 * Sides of the outline are named `left right top bottom` (rectangle), `edge 1`, `edge 2`, ... (polygon; 1 = first to
 * second corner) or `rim` (circle). `matched` names pairs of sides, or of chains of sides, of which one is the other
 * translated, and whose nodes must correspond, so that a repeating or reversing condition can bind them.
 *
 * In an `open` section air without end lies round the outline. It is meshed by Kelvin's inversion in a circle of radius R
 * round the outline, x -> centre + R^2 (x - centre) / |x - centre|^2: air up to the circle is region `(outside)` (none
 * where the outline is a circle, which then serves), and the image of all beyond it is a second disc of the same radius,
 * region `(beyond)`, whose centre is infinity. Its rim, side `far rim`, is matched with side `rim` of the first.
 * Freeman, Lowther, A novel mapping technique for open boundary finite element solutions to Poisson's equation, IEEE
 * Trans. Magn. 24, 1988.
 */
export interface Section {
  readonly outline: Shape;
  /** Region name of what no drawn region covers. */
  readonly background: string;
  /** Longest element edge wanted in the background, metres. */
  readonly maxEdge?: number;
  readonly regions: readonly Region[];
  readonly matched?: readonly (readonly [SideChain, SideChain])[];
  readonly sizeAt?: readonly SizeAt[];
  readonly open?: boolean;
}
