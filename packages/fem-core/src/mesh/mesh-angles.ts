import type { Point } from '../geometry/section.js';
import { boundsOf, sizeOf } from '../geometry/shapes.js';
import type { Mesh } from './mesh.js';
import { cornerCount, edgeCount, triangleCount } from './mesh.js';

/** Smallest angles of a mesh between straight sides, radians; Infinity of no triangle. */
export interface SmallestAngles {
  readonly all: number;
  /**
   * Away from sharp corners of the drawing and of triangles with no edge shorter than `FLOOR` sizes of the mesh: where
   * refinement promises `QualityLimits.minAngle`.
   */
  readonly free: number;
}

/**
 * Drawn lines that meet under less than this make a sharp corner; of arcs it is chords that met so when refinement began,
 * each off its arc's tangent by up to half of a sixteenth of a circle.
 */
const SHARP = Math.PI / 3;
const OFF_TANGENT = Math.PI / 16;

/** Refinement cuts nothing shorter than this share of the longer of width and height of all that is meshed. */
const FLOOR = 1e-7;

/**
 * A triangle is near a sharp corner when it has a corner there, or its shortest edge joins two lines that meet in one:
 * such triangles cannot be mended (Miller, Pav, Walkington, When and why Delaunay refinement algorithms work, 2005).
 */
export function smallestAngles(mesh: Mesh): SmallestAngles {
  const drawn = drawnEdgesAt(mesh);
  const { sharp, pairs } = sharpCorners(mesh, drawn);
  const curvesAt = (v: number): number[] => (drawn.get(v) ?? []).map((e) => mesh.edgeToCurve[e]);
  const floor = FLOOR * sizeOf(boundsOf({ kind: 'polygon', corners: pointsOf(mesh) }));
  let all = Infinity;
  let free = Infinity;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const corners = [0, 1, 2].map((k) => mesh.triangles[3 * t + k]);
    const angles = corners.map((v, k) => angleAt(mesh, v, corners[(k + 1) % 3], corners[(k + 2) % 3]));
    const least = Math.min(...angles);
    all = Math.min(all, least);
    if (least >= free || corners.some((v) => sharp.has(v))) continue;
    const k = angles.indexOf(least); // opposite the shortest edge
    const others = curvesAt(corners[(k + 2) % 3]);
    const bridges = curvesAt(corners[(k + 1) % 3]).some((i) => others.some((j) => pairs.has(pairKey(i, j))));
    const [p, q] = [corners[(k + 1) % 3], corners[(k + 2) % 3]];
    const shortest = Math.hypot(mesh.xy[2 * p] - mesh.xy[2 * q], mesh.xy[2 * p + 1] - mesh.xy[2 * q + 1]);
    if (!bridges && shortest >= floor) free = least;
  }
  return { all, free };
}

function pointsOf(mesh: Mesh): Point[] {
  return Array.from({ length: cornerCount(mesh) }, (_, v) => [mesh.xy[2 * v], mesh.xy[2 * v + 1]]);
}

function angleAt({ xy }: Mesh, v: number, a: number, b: number): number {
  const [ux, uy] = [xy[2 * a] - xy[2 * v], xy[2 * a + 1] - xy[2 * v + 1]];
  const [wx, wy] = [xy[2 * b] - xy[2 * v], xy[2 * b + 1] - xy[2 * v + 1]];
  return Math.abs(Math.atan2(ux * wy - uy * wx, ux * wx + uy * wy));
}

function drawnEdgesAt(mesh: Mesh): Map<number, number[]> {
  const drawn = new Map<number, number[]>();
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (mesh.edgeToCurve[e] < 0) continue;
    for (const v of [mesh.edges[2 * e], mesh.edges[2 * e + 1]]) {
      const list = drawn.get(v);
      if (list === undefined) drawn.set(v, [e]);
      else list.push(e);
    }
  }
  return drawn;
}

function sharpCorners(
  mesh: Mesh,
  drawn: ReadonlyMap<number, readonly number[]>,
): { readonly sharp: ReadonlySet<number>; readonly pairs: ReadonlySet<string> } {
  const sharp = new Set<number>();
  const pairs = new Set<string>();
  for (const [v, list] of drawn) {
    const ends = list.map((e) => (mesh.edges[2 * e] === v ? mesh.edges[2 * e + 1] : mesh.edges[2 * e]));
    for (let i = 0; i < list.length; i++) {
      for (let j = i + 1; j < list.length; j++) {
        const arcs = [list[i], list[j]].filter((e) => mesh.curves[mesh.edgeToCurve[e]].kind === 'arc').length;
        if (angleAt(mesh, v, ends[i], ends[j]) >= SHARP + arcs * OFF_TANGENT) continue;
        sharp.add(v);
        pairs.add(pairKey(mesh.edgeToCurve[list[i]], mesh.edgeToCurve[list[j]]));
      }
    }
  }
  return { sharp, pairs };
}

const pairKey = (i: number, j: number): string => (i < j ? `${i},${j}` : `${j},${i}`);
