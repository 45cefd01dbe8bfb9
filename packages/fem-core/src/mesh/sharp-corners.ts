import type { Triangulation } from './triangulation.js';
import { nextHalf, previousHalf } from './triangulation.js';

/** Corners at which two segments meet under less than 60 degrees, where refinement could chase its own tail. */
export interface SharpCorners {
  readonly vertices: ReadonlySet<number>;
  /** For a pair of curves 'i,j' (i < j) that meet sharply: the vertex they share. */
  readonly pairs: ReadonlyMap<string, number>;
  /** Curves that start or end at a sharp corner, by vertex number on them: found through the segments. */
  readonly segmentsAt: ReadonlyMap<number, readonly number[]>;
}

const LIMIT = Math.PI / 3;

export function findSharpCorners(tri: Triangulation): SharpCorners {
  const { from, to } = tri.segments;
  const segmentsAt = new Map<number, number[]>();
  from.forEach((a, s) => {
    for (const v of [a, to[s]]) {
      const list = segmentsAt.get(v);
      if (list === undefined) segmentsAt.set(v, [s]);
      else list.push(s);
    }
  });
  const vertices = new Set<number>();
  const pairs = new Map<string, number>();
  const near: number[] = [];
  for (const [v, list] of segmentsAt) {
    for (let i = 0; i < list.length; i++) {
      for (let j = i + 1; j < list.length; j++) {
        if (angleBetween(tri, v, list[i], list[j]) >= LIMIT) continue;
        vertices.add(v);
        near.push(v);
        pairs.set(pairKey(tri.segments.curve[list[i]], tri.segments.curve[list[j]]), v);
      }
    }
  }
  return { vertices, pairs, segmentsAt: new Map(near.map((v) => [v, segmentsAt.get(v) as number[]])) };
}

const pairKey = (i: number, j: number): string => (i < j ? `${i},${j}` : `${j},${i}`);

function angleBetween(tri: Triangulation, v: number, s: number, q: number): number {
  const direction = (segment: number): [number, number] => {
    const { from, to } = tri.segments;
    const w = from[segment] === v ? to[segment] : from[segment];
    return [tri.xy[2 * w] - tri.xy[2 * v], tri.xy[2 * w + 1] - tri.xy[2 * v + 1]];
  };
  const [ax, ay] = direction(s);
  const [bx, by] = direction(q);
  return Math.abs(Math.atan2(ax * by - ay * bx, ax * bx + ay * by));
}

/**
 * Where a segment is to be cut, as a share from its first end: half-way, but from a sharp corner at a distance that is a
 * power of two of a common unit, so that segments round the corner are cut at equal distances (Ruppert's shells).
 */
export function shellShare(tri: Triangulation, sharp: SharpCorners, s: number): number {
  const [a, b] = [tri.segments.from[s], tri.segments.to[s]];
  const [sharpA, sharpB] = [sharp.vertices.has(a), sharp.vertices.has(b)];
  if (sharpA === sharpB) return 0.5;
  const length = Math.hypot(tri.xy[2 * a] - tri.xy[2 * b], tri.xy[2 * a + 1] - tri.xy[2 * b + 1]);
  const shell = 2 ** Math.round(Math.log2(0.5 * length)); // 0.35 to 0.71 of the length
  return sharpA ? shell / length : 1 - shell / length;
}

/**
 * A flat triangle whose shortest edge, half-edge h, runs between two segments of one sharp corner, at equal distance from
 * it, cannot be mended and is left (Miller, Pav, Walkington, When and why Delaunay refinement algorithms work, 2005).
 */
export function bridgesSharpCorner(tri: Triangulation, sharp: SharpCorners, h: number): boolean {
  if (sharp.vertices.size === 0) return false;
  const [u, v] = [tri.origin[h], tri.origin[nextHalf(h)]];
  const [ux, uy, vx, vy] = [tri.xy[2 * u], tri.xy[2 * u + 1], tri.xy[2 * v], tri.xy[2 * v + 1]];
  const onV = curvesRound(tri, nextHalf(h));
  for (const i of curvesRound(tri, h)) {
    for (const j of onV) {
      const corner = i === j ? undefined : sharp.pairs.get(pairKey(i, j));
      if (corner === undefined) continue;
      const [x, y] = [tri.xy[2 * corner], tri.xy[2 * corner + 1]];
      const du = Math.hypot(ux - x, uy - y);
      const dv = Math.hypot(vx - x, vy - y);
      if (Math.abs(du - dv) < 1e-3 * Math.max(du, dv)) return true;
    }
  }
  return false;
}

/** Curves of the segments that meet in the vertex half-edge h starts from. */
function curvesRound(tri: Triangulation, h: number): Set<number> {
  const curves = new Set<number>();
  const take = (e: number): void => {
    if (tri.segment[e] >= 0) curves.add(tri.segments.curve[tri.segment[e]]);
  };
  let e = h;
  do {
    take(e);
    take(previousHalf(e));
    e = tri.twin[previousHalf(e)];
  } while (e >= 0 && e !== h);
  // At the outline the turn is cut short: the rest is found the other way round.
  for (e = e < 0 ? tri.twin[h] : -1; e >= 0; e = tri.twin[nextHalf(e)]) take(nextHalf(e));
  return curves;
}
