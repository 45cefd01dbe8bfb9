import type { Point, SizeAt } from '../geometry/section.js';
import { GROWTH } from './point-sizes.js';
import type { Triangulation } from './triangulation.js';
import { inUse } from './triangulation.js';

/** Triangles that wishes for short edges ask for. */
export interface Demand {
  /** Float64Array(slots): by the length wanted in each triangle, as of its region. */
  readonly byTriangle: Float64Array;
  /** Float64Array(wishes): by each wish at a point. */
  readonly byWish: Float64Array;
}

type Corners = readonly [Point, Point, Point];

/**
 * Triangles that a mesh with all wishes met has at least: none with edges of at most h has more area than sqrt(3)/4 h^2, so
 * there are no fewer than the integral of 4/(sqrt(3) h^2), where h is the least of what is wanted in the triangle
 * (`tri.size`) and by the points. Triangles are halved until h varies by no more than `VARIED` in them, or they are as small
 * as h, or as coordinates can tell; each part counts, by h in its middle, for what asks for the least there.
 * @param enough  at which to stop counting
 */
export function demandOf(tri: Triangulation, wishes: readonly SizeAt[], enough: number): Demand {
  const byTriangle = new Float64Array(tri.slotCount);
  const byWish = new Float64Array(wishes.length);
  let all = 0;
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t)) continue;
    if (wishes.length === 0) {
      byTriangle[t] = (0.5 * doubleArea(tri, t)) / (FULL * tri.size[t] ** 2);
      continue;
    }
    const count = (corners: Corners, candidates: readonly number[], halvings: number): void => {
      const { low, high, middle, by, near } = lengthIn(corners, candidates, wishes, tri.size[t]);
      const area = areaOf(corners);
      if (high <= VARIED * low || area <= FULL * low ** 2 || halvings === MOST_HALVINGS) {
        const share = area === 0 ? 0 : area / (FULL * middle ** 2);
        all += share;
        if (by < 0) byTriangle[t] += share;
        else byWish[by] += share;
        return;
      }
      if (all < enough) for (const half of halvesOf(corners)) count(half, near, halvings + 1);
    };
    count(cornersOf(tri, t), [...wishes.keys()], 0);
  }
  return { byTriangle, byWish };
}

/** Area of a triangle with edges of 1. */
const FULL = Math.sqrt(3) / 4;

/** Greatest over least length wanted in a part that is not halved further. */
const VARIED = 2;

/** Two halve the edges: after so many, coordinates no longer tell the corners apart. */
const MOST_HALVINGS = 100;

/** Bounds of the length wanted in a triangle, that in its middle and whose it is (-1: no point's), and the wishes that count. */
function lengthIn(corners: Corners, candidates: readonly number[], wishes: readonly SizeAt[], size: number) {
  const [a, b, c] = corners;
  const [x, y] = [(a[0] + b[0] + c[0]) / 3, (a[1] + b[1] + c[1]) / 3];
  const reach = Math.sqrt(Math.max(...corners.map((p) => (p[0] - x) ** 2 + (p[1] - y) ** 2)));
  const lows = new Float64Array(candidates.length);
  let [low, high, middle, by] = [size, size, size, -1];
  candidates.forEach((k, i) => {
    const { at, maxEdge, growth = GROWTH } = wishes[k];
    const distance = Math.sqrt((at[0] - x) ** 2 + (at[1] - y) ** 2);
    lows[i] = maxEdge + growth * Math.max(0, distance - reach);
    low = Math.min(low, lows[i]);
    high = Math.min(high, maxEdge + growth * (distance + reach));
    const here = maxEdge + growth * distance;
    if (here < middle) [middle, by] = [here, k];
  });
  return { low, high, middle, by, near: candidates.filter((_, i) => lows[i] < high) };
}

function cornersOf({ xy, origin }: Triangulation, t: number): Corners {
  const corner = (k: number): Point => [xy[2 * origin[3 * t + k]], xy[2 * origin[3 * t + k] + 1]];
  return [corner(0), corner(1), corner(2)];
}

/** Twice the area of triangle t, m^2; its corners run counter-clockwise. */
export function doubleArea({ xy, origin }: Triangulation, t: number): number {
  const [a, b, c] = [2 * origin[3 * t], 2 * origin[3 * t + 1], 2 * origin[3 * t + 2]];
  return (xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]);
}

const areaOf = ([a, b, c]: Corners): number =>
  0.5 * Math.abs((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]));

/** Cut across the longest edge. */
function halvesOf([a, b, c]: Corners): readonly [Corners, Corners] {
  const square = (p: Point, q: Point): number => (p[0] - q[0]) ** 2 + (p[1] - q[1]) ** 2;
  const middle = (p: Point, q: Point): Point => [0.5 * (p[0] + q[0]), 0.5 * (p[1] + q[1])];
  const [u, v, w] = [square(a, b), square(b, c), square(c, a)];
  if (u < v || u < w) return halvesOf(v < w ? [c, a, b] : [b, c, a]);
  const m = middle(a, b);
  return [
    [a, m, c],
    [m, b, c],
  ];
}
