import type { Mesh } from './mesh.js';
import { triangleCount } from './mesh.js';

/** Area of each region, m^2, with arcs taken as arcs, not as the parabolas of the elements. */
export function roundAreas(mesh: Mesh): number[] {
  const { xy, triangles, triangleToEdge, middles, edgeToCurve, curves, curved } = mesh;
  const areas = mesh.regionNames.map(() => 0);
  for (let t = 0; t < triangleCount(mesh); t++) {
    const corners = [0, 1, 2].map((k) => 2 * triangles[3 * t + k]);
    const [a, b, c] = corners;
    let area = 0.5 * ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]));
    for (let k = 0; k < 3 && curved[t] === 1; k++) {
      const e = triangleToEdge[3 * t + k];
      const curve = edgeToCurve[e] < 0 ? undefined : curves[edgeToCurve[e]];
      if (curve?.kind !== 'arc') continue;
      const [p, q] = [corners[(k + 1) % 3], corners[(k + 2) % 3]];
      const [ux, uy] = [xy[q] - xy[p], xy[q + 1] - xy[p + 1]];
      const out = uy * (middles[2 * e] - xy[p]) - ux * (middles[2 * e + 1] - xy[p + 1]);
      const turn = 2 * Math.asin(Math.min(1, Math.hypot(ux, uy) / (2 * curve.radius)));
      area += Math.sign(out) * 0.5 * curve.radius ** 2 * (turn - Math.sin(turn)); // between chord and arc
    }
    areas[mesh.triangleToRegion[t]] += area;
  }
  return areas;
}
