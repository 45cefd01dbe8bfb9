import type { Steps } from '../base/steps.js';
import type { Point, SizeAt } from '../geometry/section.js';
import type { QualityLimits, RefineProgress } from './refine.js';
import { refine } from './refine.js';
import type { Triangulation } from './triangulation.js';
import { inUse } from './triangulation.js';

/** Of the length wished with the distance from a point, where the wish does not say. */
export const GROWTH = 0.3;

/**
 * Refines until no edge is longer than wished by a region (`maxEdges`, by its number) or by a point, and nowhere by much
 * more than that: triangles are wanted at most twice as fine at a time, so that a wish near a large triangle's corner does
 * not fill all of it.
 */
export function* refineTo(
  tri: Triangulation,
  maxEdges: readonly number[],
  wishes: readonly SizeAt[],
  limits: QualityLimits,
): Steps<RefineProgress, void> {
  let count = -1;
  // Stamps of the triangles found short enough: they need not be asked again until they change.
  let fine: Int32Array = new Int32Array(0);
  for (let again = wishes.length > 0; again && tri.vertexCount > count; ) {
    again = false;
    count = tri.vertexCount; // a round that makes none has come to what is too short to be cut
    fine = widened(fine, tri.slotCount);
    for (let t = 0; t < tri.slotCount; t++) {
      if (fine[t] === tri.stamp[t] || !inUse(tri, t)) continue;
      const longest = longestEdge(tri, t);
      const [x, y] = cornerOf(tri, t);
      let wanted = Infinity;
      for (const { at, maxEdge, growth = GROWTH } of wishes) {
        // No place of the triangle is farther from the corner than its longest edge: most wishes are too far to matter.
        const nearest = Math.max(0, Math.sqrt((at[0] - x) ** 2 + (at[1] - y) ** 2) - longest);
        if (maxEdge + growth * nearest >= Math.min(wanted, longest)) continue;
        wanted = Math.min(wanted, maxEdge + growth * distanceTo(tri, t, at[0], at[1]));
      }
      const long = longest > wanted;
      tri.size[t] = Math.min(maxEdges[tri.region[t]], long ? Math.max(wanted, longest / 2) : Infinity);
      if (!long) fine[t] = tri.stamp[t];
      again ||= long;
    }
    if (again) yield* refine(tri, limits);
  }
}

function widened(stamps: Int32Array, count: number): Int32Array {
  const wide = new Int32Array(count).fill(-1);
  wide.set(stamps);
  return wide;
}

function cornerOf({ xy, origin }: Triangulation, t: number): Point {
  const v = 2 * origin[3 * t];
  return [xy[v], xy[v + 1]];
}

function longestEdge({ xy, origin }: Triangulation, t: number): number {
  let longest = 0;
  for (let k = 0; k < 3; k++) {
    const [a, b] = [2 * origin[3 * t + k], 2 * origin[3 * t + ((k + 1) % 3)]];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  }
  return longest;
}

/** Distance of a point from a triangle, 0 within. */
function distanceTo({ xy, origin }: Triangulation, t: number, x: number, y: number): number {
  let nearest = Infinity;
  let within = true;
  for (let k = 0; k < 3; k++) {
    const [a, b] = [2 * origin[3 * t + k], 2 * origin[3 * t + ((k + 1) % 3)]];
    const [ux, uy] = [xy[b] - xy[a], xy[b + 1] - xy[a + 1]];
    const [vx, vy] = [x - xy[a], y - xy[a + 1]];
    if (ux * vy - uy * vx < 0) within = false;
    const share = Math.min(1, Math.max(0, (ux * vx + uy * vy) / (ux * ux + uy * uy)));
    nearest = Math.min(nearest, Math.hypot(vx - share * ux, vy - share * uy));
  }
  return within ? 0 : nearest;
}
