import type { Mesh } from '../mesh/mesh.js';
import { triangleCount } from '../mesh/mesh.js';

/** Area of each region, m^2, curved edges included. */
export function regionAreas(mesh: Mesh): number[] {
  const areas = mesh.regionNames.map(() => 0);
  for (let t = 0; t < triangleCount(mesh); t++) areas[mesh.triangleToRegion[t]] += areaOf(mesh, t);
  return areas;
}

/**
 * Area of triangle t: that of its corners, and 2/3 of chord times height for the parabola each edge is (Archimedes), counted
 * positive where the edge bulges outwards; equal to the integral of det J.
 */
function areaOf({ xy, middles, triangles, triangleToEdge, curved }: Mesh, t: number): number {
  let twice = 0;
  let bulge = 0;
  const origin = 2 * triangles[3 * t];
  for (let k = 0; k < 3; k++) {
    const a = 2 * triangles[3 * t + ((k + 1) % 3)];
    const b = 2 * triangles[3 * t + ((k + 2) % 3)];
    const dx = xy[b] - xy[a];
    const dy = xy[b + 1] - xy[a + 1];
    twice += (xy[a] - xy[origin]) * dy - (xy[a + 1] - xy[origin + 1]) * dx;
    if (curved[t] === 0) continue;
    const e = 2 * triangleToEdge[3 * t + k];
    const hx = middles[e] - 0.5 * (xy[a] + xy[b]);
    const hy = middles[e + 1] - 0.5 * (xy[a + 1] + xy[b + 1]);
    bulge += hx * dy - hy * dx;
  }
  return 0.5 * twice + (2 / 3) * bulge;
}
