/** A point of the plane, metres. */
export type Point = readonly [x: number, y: number];

/** What can be drawn. Polygons may run either way round; circles stay circles down to the elements. */
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

/**
 * A plane section: an outline filled by `background`, and regions drawn in order, a later one over the earlier ones.
 *
 * Sides of the outline are named `left right top bottom` (rectangle), `edge 1`, `edge 2`, ... (polygon; 1 = first to
 * second corner) or `rim` (circle). `matched` names pairs of sides of equal length and direction-by-translation whose
 * nodes must correspond, so that a repeating or reversing condition can bind them.
 */
export interface Section {
  readonly outline: Shape;
  /** Region name of what no drawn region covers. */
  readonly background: string;
  /** Longest element edge wanted in the background, metres. */
  readonly maxEdge?: number;
  readonly regions: readonly Region[];
  readonly matched?: readonly (readonly [string, string])[];
}
