import type { SizeAt } from '../geometry/section.js';
import type { QualityLimits } from './refine.js';
import { refine } from './refine.js';
import type { Triangulation } from './triangulation.js';
import { inUse } from './triangulation.js';

const GROWTH = 0.3;

/**
 * Refines until no edge is longer than wished by a region (`maxEdges`, by its number) or by a point, and nowhere by much
 * more than that: triangles are wanted at most twice as fine at a time, so that a wish near a large triangle's corner does
 * not fill all of it.
 */
export function refineTo(
  tri: Triangulation,
  maxEdges: readonly number[],
  wishes: readonly SizeAt[],
  limits: QualityLimits,
): void {
  let count = -1;
  for (let again = wishes.length > 0; again && tri.vertexCount > count; ) {
    again = false;
    count = tri.vertexCount; // a round that makes none has come to what is too short to be cut
    for (let t = 0; t < tri.slotCount; t++) {
      if (!inUse(tri, t)) continue;
      const longest = longestEdge(tri, t);
      let wanted = Infinity;
      for (const { at, maxEdge, growth = GROWTH } of wishes) {
        if (maxEdge >= Math.min(wanted, longest)) continue;
        wanted = Math.min(wanted, maxEdge + growth * distanceTo(tri, t, at[0], at[1]));
      }
      const long = longest > wanted;
      tri.size[t] = Math.min(maxEdges[tri.region[t]], long ? Math.max(wanted, longest / 2) : Infinity);
      again ||= long;
    }
    if (again) refine(tri, limits);
  }
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
