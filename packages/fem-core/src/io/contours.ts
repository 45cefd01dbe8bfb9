import { triangleCount } from '../mesh/mesh.js';
import type { DrawingMesh } from './drawing-mesh.js';

/** Part of a drawing mesh, on which lines and areas of equal value are traced; points keep their numbers. */
export interface Patches {
  /** Float64Array(2N), metres, for all N points of the drawing mesh. */
  readonly xy: Float64Array;
  /** Int32Array(3q): points of each linear triangle, counter-clockwise. */
  readonly corners: Int32Array;
  /** Uint8Array(3q): 1 where the side from that point to the next bounds the part. */
  readonly rim: Uint8Array;
}

/** A traced line. */
export interface Trace {
  /** Its points, x and y alternating, metres; a closed one does not repeat its first. */
  readonly xy: readonly number[];
  /** The last point is joined to the first. */
  readonly closed: boolean;
}

/** The linear triangles of those six-node triangles that `inside` keeps. */
export function choosePatches(drawing: DrawingMesh, inside: (t: number) => boolean = () => true): Patches {
  const { mesh, pieces, xy } = drawing;
  const perTriangle = 3 * pieces * pieces;
  const corners: number[] = [];
  const rim: number[] = [];
  for (let t = 0; t < triangleCount(mesh); t++) {
    if (!inside(t)) continue;
    const bounds = [0, 1, 2].map((k) => mesh.neighbours[3 * t + k] < 0 || !inside(mesh.neighbours[3 * t + k]));
    for (let q = perTriangle * t; q < perTriangle * (t + 1); q++) {
      const edge = drawing.onEdge[q];
      corners.push(drawing.corners[q]);
      rim.push(edge > 0 && bounds[edge - 1] ? 1 : 0);
    }
  }
  return { xy, corners: Int32Array.from(corners), rim: Uint8Array.from(rim) };
}

/**
 * The lines on which the linearly interpolated `values` equal `level`, higher values on their left.
 *
 * A value equal to the level counts as above it, so every triangle holds at most one piece of line and no point needs
 * a special case; pieces are joined by the sides they cross, never by comparing coordinates.
 *
 * @param values  Float64Array(N), per point of the drawing mesh
 */
export function traceLevel(patches: Patches, values: Float64Array, level: number): Trace[] {
  return trace(patches, values, level, false);
}

/**
 * Outlines of the part where the linearly interpolated `values` are `level` or more; all of the part for -Infinity.
 * Outer rings run counter-clockwise and holes clockwise, so both the even-odd and the non-zero rule fill them right.
 *
 * @param values  Float64Array(N), per point of the drawing mesh
 */
export function outlineAbove(patches: Patches, values: Float64Array, level: number): Trace[] {
  // Between two triangles of the part the outlines cancel; what stays is the level itself and the rim.
  return trace(patches, values, level, true);
}

/**
 * Goes round the polygon of each triangle where the value is `level` or more, keeping the pieces along the level and,
 * if wanted, those on the rim. Its corners are keyed: a point by its number, the crossing of the side between points
 * i < j by N + i N + j.
 */
function trace(patches: Patches, values: Float64Array, level: number, withRim: boolean): Trace[] {
  const { corners, rim } = patches;
  const points = patches.xy.length / 2;
  const from: number[] = [];
  const to: number[] = [];
  for (let q = 0; q < corners.length; q += 3) {
    let down = -1;
    let up = -1;
    for (let k = 0; k < 3; k++) {
      const i = corners[q + k];
      const j = corners[q + (k === 2 ? 0 : k + 1)];
      const above = values[i] >= level;
      const crossed = above !== values[j] >= level;
      const crossing = crossed ? points + (i < j ? i * points + j : j * points + i) : -1;
      if (crossed && above) down = crossing;
      if (crossed && !above) up = crossing;
      if (withRim && rim[q + k] === 1 && (above || crossed)) {
        from.push(above ? i : crossing);
        to.push(above && crossed ? crossing : j);
      }
    }
    if (down >= 0) {
      from.push(down);
      to.push(up);
    }
  }
  return chainPieces(from, to).map((chain) => toTrace(chain, patches.xy, values, level));
}

function toTrace(chain: Chain, pointXy: Float64Array, values: Float64Array, level: number): Trace {
  const points = pointXy.length / 2;
  const xy: number[] = [];
  for (const key of chain.keys) {
    if (key < points) {
      xy.push(pointXy[2 * key], pointXy[2 * key + 1]);
      continue;
    }
    const i = Math.floor((key - points) / points);
    const j = (key - points) % points;
    const share = (level - values[i]) / (values[j] - values[i]);
    xy.push(pointXy[2 * i] + share * (pointXy[2 * j] - pointXy[2 * i]));
    xy.push(pointXy[2 * i + 1] + share * (pointXy[2 * j + 1] - pointXy[2 * i + 1]));
  }
  return { xy, closed: chain.closed };
}

/** A chain of keyed points; a closed one does not repeat its first key. */
export interface Chain {
  readonly keys: readonly number[];
  readonly closed: boolean;
}

/**
 * Joins the directed pieces `from[p]` -> `to[p]` end to end: all pieces, each once, in as few chains as following them
 * forwards gives; open chains first, else in stored order.
 */
export function chainPieces(from: readonly number[], to: readonly number[]): Chain[] {
  const leaving = new Map<number, number[]>();
  for (let p = from.length - 1; p >= 0; p--) {
    const others = leaving.get(from[p]);
    if (others === undefined) leaving.set(from[p], [p]);
    else others.push(p);
  }
  const reached = new Set(to);
  const chains: Chain[] = [];
  const follow = (first: number): void => {
    const keys = [first];
    for (let p = leaving.get(first)?.pop(); p !== undefined; p = leaving.get(to[p])?.pop()) {
      if (to[p] === first) {
        chains.push({ keys, closed: true });
        return;
      }
      keys.push(to[p]);
    }
    if (keys.length > 1) chains.push({ keys, closed: false });
  };
  for (const start of from) if (!reached.has(start)) follow(start);
  for (const start of from) while ((leaving.get(start)?.length ?? 0) > 0) follow(start);
  return chains;
}
