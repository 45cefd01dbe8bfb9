import { inCircle, orientation } from '../geometry/predicates.js';
import type { Mesh } from './mesh.js';
import { cornerCount, edgeCount, triangleCount } from './mesh.js';

export interface MeshQuality {
  /** Smallest angle between straight sides, degrees. */
  readonly minAngleDeg: number;
  /** Corner area covered by each region, m^2, in the order of regionNames. */
  readonly regionArea: readonly number[];
  /** Edges inside a region whose opposite corner lies inside the circle of the neighbour: 0 in a Delaunay mesh. */
  readonly notDelaunay: number;
}

/** Angles, areas and Delaunay property of a mesh; changes and throws nothing. */
export function measureMesh(mesh: Mesh): MeshQuality {
  const { xy, triangles, triangleToRegion, neighbours, triangleToEdge, edgeToCurve } = mesh;
  const regionArea = mesh.regionNames.map(() => 0);
  let smallest = Infinity;
  let notDelaunay = 0;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const [a, b, c] = [2 * triangles[3 * t], 2 * triangles[3 * t + 1], 2 * triangles[3 * t + 2]];
    const corners = [a, b, c];
    for (let k = 0; k < 3; k++) {
      const [p, q, r] = [corners[k], corners[(k + 1) % 3], corners[(k + 2) % 3]];
      const [ux, uy, vx, vy] = [xy[q] - xy[p], xy[q + 1] - xy[p + 1], xy[r] - xy[p], xy[r + 1] - xy[p + 1]];
      smallest = Math.min(smallest, Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy));
      const u = neighbours[3 * t + k];
      if (u < t || edgeToCurve[triangleToEdge[3 * t + k]] >= 0) continue;
      const d = 2 * triangles[3 * u + [0, 1, 2].findIndex((i) => neighbours[3 * u + i] === t)];
      if (inCircle(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1], xy[d], xy[d + 1]) > 0) notDelaunay++;
    }
    regionArea[triangleToRegion[t]] +=
      0.5 * ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]));
  }
  return { minAngleDeg: (smallest * 180) / Math.PI, regionArea, notDelaunay };
}

/**
 * Proves the promises of `Mesh`: counter-clockwise triangles, neighbours and edges that agree, Euler's formula, region
 * borders on drawn lines, sides on the outline alone, matched edges that correspond by one translation.
 * @throws Error naming the first broken promise
 */
export function checkMesh(mesh: Mesh): void {
  const { xy, triangles, neighbours, triangleToEdge, triangleToRegion, edges, edgeToCurve, edgeToSide, edgeToMatch } =
    mesh;
  const broken = (what: string): never => {
    throw new Error(`checkMesh: ${what}`);
  };
  const seen = new Uint8Array(edgeCount(mesh));
  for (let t = 0; t < triangleCount(mesh); t++) {
    const [a, b, c] = [2 * triangles[3 * t], 2 * triangles[3 * t + 1], 2 * triangles[3 * t + 2]];
    if (!(orientation(xy[a], xy[a + 1], xy[b], xy[b + 1], xy[c], xy[c + 1]) > 0))
      broken(`triangle ${t} is not counter-clockwise`);
    for (let k = 0; k < 3; k++) {
      const e = triangleToEdge[3 * t + k];
      const ends = [triangles[3 * t + ((k + 1) % 3)], triangles[3 * t + ((k + 2) % 3)]];
      if (edges[2 * e] === edges[2 * e + 1] || !ends.includes(edges[2 * e]) || !ends.includes(edges[2 * e + 1]))
        broken(`edge ${e} does not join corners of triangle ${t}`);
      seen[e]++;
      const u = neighbours[3 * t + k];
      if (u < 0) {
        if (edgeToSide[e] < 0) broken(`edge ${e} of the outline lies on no side`);
        continue;
      }
      if (edgeToSide[e] >= 0) broken(`edge ${e} is on a side and inside`);
      if (![0, 1, 2].some((i) => neighbours[3 * u + i] === t && triangleToEdge[3 * u + i] === e))
        broken(`triangles ${t} and ${u} disagree`);
      if (triangleToRegion[u] !== triangleToRegion[t] && edgeToCurve[e] < 0)
        broken(`edge ${e} parts two regions off any drawn line`);
    }
  }
  for (let e = 0; e < edgeCount(mesh); e++) {
    const mate = edgeToMatch[e];
    if (seen[e] !== (edgeToSide[e] < 0 ? 2 : 1)) broken(`edge ${e} belongs to ${seen[e]} triangles`);
    if (mate < 0) continue;
    if (edgeToMatch[mate] !== e) broken(`edge ${e} is not the match of its match`);
    const offset = [0, 1].map((k) => [0, 1].map((i) => xy[2 * edges[2 * mate + k] + i] - xy[2 * edges[2 * e + k] + i]));
    const size = Math.hypot(offset[0][0], offset[0][1]);
    if (Math.hypot(offset[1][0] - offset[0][0], offset[1][1] - offset[0][1]) > 1e-9 * size)
      broken(`edges ${e} and ${mate} do not correspond`);
  }
  const holes = 1 - (cornerCount(mesh) - edgeCount(mesh) + triangleCount(mesh));
  if (holes !== 0) broken('Euler: corners - edges + triangles is not 1');
}
