import { buildPlanarGraph } from '../geometry/planar-graph.js';
import type { Section } from '../geometry/section.js';
import { triangulateGraph } from './constrained-delaunay.js';
import type { Mesh } from './mesh.js';
import { meshOf, triangulationOf } from './mesh-triangulation.js';
import type { QualityLimits } from './refine.js';
import { DEFAULT_LIMITS, refine } from './refine.js';

/**
 * Meshes a section: planar graph, constrained Delaunay triangulation, quality refinement, six-node triangles.
 * @throws InputError for drawings that cannot be meshed, see `buildPlanarGraph` and `refine`
 */
export function meshSection(section: Section, limits: QualityLimits = DEFAULT_LIMITS): Mesh {
  const graph = buildPlanarGraph(section);
  const tri = triangulateGraph(section, graph);
  const sizes = [section.maxEdge, ...section.regions.map((region) => region.maxEdge)];
  for (let t = 0; t < tri.slotCount; t++) tri.size[t] = sizes[tri.region[t]] ?? Infinity;
  refine(tri, limits);
  const names = [section.background, ...section.regions.map((region) => region.name)];
  return meshOf(tri, names, graph.sideNames);
}

/**
 * Refines a mesh where it is longer than wanted; what is fine enough stays. The quality promises are kept.
 * @param wanted  Float64Array(m): longest edge wanted in each triangle, metres; Infinity for no wish
 */
export function refineMesh(mesh: Mesh, wanted: Float64Array, limits: QualityLimits = DEFAULT_LIMITS): Mesh {
  const tri = triangulationOf(mesh, wanted);
  refine(tri, limits);
  return meshOf(tri, mesh.regionNames, mesh.sideNames);
}
