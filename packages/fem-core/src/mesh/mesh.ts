import type { Curve } from '../geometry/curve.js';
import type { Point } from '../geometry/section.js';

/**
 * Six-node triangles covering a plane section; never changed once built. n corners, e edges, m triangles.
 *
 * Node numbers: 0 ... n-1 are the corners, n ... n+e-1 the third (middle) nodes of the edges, n + edge number.
 * Local order in a triangle: corners 0 1 2, then the middle nodes opposite corners 0 1 2.
 */
export interface Mesh {
  /** Float64Array(2n), metres: corner i is at (xy[2i], xy[2i + 1]). */
  readonly xy: Float64Array;
  /** Int32Array(3m): corners of triangle t at 3t, 3t + 1, 3t + 2, counter-clockwise. */
  readonly triangles: Int32Array;
  /** Int32Array(3m): edge opposite each corner of each triangle. */
  readonly triangleToEdge: Int32Array;
  /** Int32Array(3m): triangle across that edge, -1 at the outline. */
  readonly neighbours: Int32Array;
  /** Int32Array(m): triangle t lies in the region regionNames[triangleToRegion[t]]. */
  readonly triangleToRegion: Int32Array;
  /** Background first, then the regions as drawn, then those of unbounded space; some may cover nothing. */
  readonly regionNames: readonly string[];
  /** Int32Array(2e): end corners of each edge. */
  readonly edges: Int32Array;
  /**
   * Float64Array(2e), metres: third node of each edge, half-way; where the edge follows an arc so far off the chord that
   * the parabola of the element encloses the area of the circular segment (see middle-on-arc.ts).
   */
  readonly middles: Float64Array;
  /** Int32Array(e): index into `curves` of the drawn line the edge lies on, -1 for edges of the mesh alone. */
  readonly edgeToCurve: Int32Array;
  /** Drawn lines; those of a circle are its arcs. */
  readonly curves: readonly Curve[];
  /** Int32Array(e): index into sideNames for edges on the outline, -1 inside. */
  readonly edgeToSide: Int32Array;
  /** Of the outline, see `Section`. */
  readonly sideNames: readonly string[];
  /** Int32Array(e): the edge that corresponds on the matched side, -1 where there is none; end corners correspond in stored order. */
  readonly edgeToMatch: Int32Array;
  /** Uint8Array(m): 1 where an edge of the triangle follows an arc, so that its map is quadratic. */
  readonly curved: Uint8Array;
  /** Where the section lies in unbounded space: the circle the mesh of the space at hand ends on, and the image of the rest. */
  readonly beyond?: Beyond;
}

/**
 * What lies beyond a circle, turned inside out: the point at distance r from `centre` stands at R^2/r from `imageCentre`,
 * under the same angle, with the same A (Kelvin transformation). The far rim of the image is tied to the rim of the circle.
 */
export interface Beyond {
  /** Of the circle, metres. */
  readonly centre: Point;
  /** R, metres. */
  readonly radius: number;
  /** Of the image, metres. */
  readonly imageCentre: Point;
  /** Number of the region of the image. */
  readonly region: number;
  /** Corner at `imageCentre`: infinity. */
  readonly infinity: number;
}

/** Number of corners, n. */
export const cornerCount = (mesh: Mesh): number => mesh.xy.length / 2;
/** Number of edges, e. */
export const edgeCount = (mesh: Mesh): number => mesh.edges.length / 2;
/** Number of triangles, m. */
export const triangleCount = (mesh: Mesh): number => mesh.triangles.length / 3;
/** Number of nodes of the quadratic elements, n + e: corners and edge middles. */
export const nodeCount = (mesh: Mesh): number => cornerCount(mesh) + edgeCount(mesh);

/** Longest edge of triangle t, from corner to corner, m. */
export function longestEdge({ xy, triangles }: Mesh, t: number): number {
  let longest = 0;
  for (let k = 0; k < 3; k++) {
    const a = 2 * triangles[3 * t + k];
    const b = 2 * triangles[3 * t + ((k + 1) % 3)];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  }
  return longest;
}

/** The six node numbers of triangle t, written into `out` (Int32Array(6)) and returned. */
export function triangleNodes(mesh: Mesh, t: number, out: Int32Array): Int32Array {
  const n = cornerCount(mesh);
  for (let k = 0; k < 3; k++) {
    out[k] = mesh.triangles[3 * t + k];
    out[3 + k] = n + mesh.triangleToEdge[3 * t + k];
  }
  return out;
}

/** Coordinates of a node (corner or edge middle), metres. */
export function nodePoint(mesh: Mesh, node: number): Point {
  const n = cornerCount(mesh);
  return node < n
    ? [mesh.xy[2 * node], mesh.xy[2 * node + 1]]
    : [mesh.middles[2 * (node - n)], mesh.middles[2 * (node - n) + 1]];
}
