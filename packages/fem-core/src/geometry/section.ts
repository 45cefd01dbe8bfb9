/** A point of the plane, metres. */
export type Point = readonly [x: number, y: number];

/**
 * What can be drawn. Polygons may run either way round, and may repeat their first corner at the end; circles stay
 * circles down to the elements.
 */
export type Shape =
  | {
      readonly kind: 'rectangle';
      /** A corner. */
      readonly from: Point;
      /** The corner opposite. */
      readonly to: Point;
    }
  | {
      readonly kind: 'polygon';
      /** Three or more, in order. */
      readonly corners: readonly Point[];
    }
  | {
      readonly kind: 'circle';
      /** Its middle. */
      readonly centre: Point;
      /** Metres, above 0. */
      readonly radius: number;
    };

/** A named part of the plane. What fills it is told by the `Setup`, under the same name. */
export interface Region {
  /** What the `Setup` and the probes call it; no two regions share one. */
  readonly name: string;
  /** What it covers, but for what later regions and the outline cut off. */
  readonly shape: Shape;
  /** Longest element edge wanted inside, metres; none if absent. */
  readonly maxEdge?: number;
}

/** Elements near a point: at distance d from `at` no edge is longer than maxEdge + growth d. */
export interface SizeAt {
  /** Where, metres. */
  readonly at: Point;
  /** Longest edge wanted at the point itself, metres. */
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
  /** The border of the section; of an `open` one, of what is drawn. */
  readonly outline: Shape;
  /** Region name of what no drawn region covers. */
  readonly background: string;
  /** Longest element edge wanted in the background, metres. */
  readonly maxEdge?: number;
  /** From the bottom to the top. */
  readonly regions: readonly Region[];
  /** Pairs of sides, or of chains of sides, whose nodes must correspond; none if absent. */
  readonly matched?: readonly (readonly [SideChain, SideChain])[];
  /** Elements wanted near points; none if absent. */
  readonly sizeAt?: readonly SizeAt[];
  /** Unbounded space lies round the outline; false if absent. */
  readonly open?: boolean;
}
