import type { Steps } from '../base/steps.js';
import { finish } from '../base/steps.js';
import { buildPlanarGraph } from '../geometry/planar-graph.js';
import type { Section } from '../geometry/section.js';
import { triangulateGraph } from './constrained-delaunay.js';
import { tellCrowd } from './crowding.js';
import type { Beyond, Mesh } from './mesh.js';
import { cornerCount } from './mesh.js';
import { meshOf, triangulationOf } from './mesh-triangulation.js';
import { refineTo } from './point-sizes.js';
import type { QualityLimits, RefineProgress } from './refine.js';
import { DEFAULT_LIMITS, refine } from './refine.js';
import { unfold } from './unfold.js';

/**
 * Meshes a section: planar graph, constrained Delaunay triangulation, quality refinement, six-node triangles.
 * @throws InputError for drawings that cannot be meshed, see `buildPlanarGraph`, `triangulateGraph` and `refine`
 */
export function meshSection(section: Section, limits: QualityLimits = DEFAULT_LIMITS): Mesh {
  return finish(meshSteps(section, limits));
}

/** The same, step by step. */
export function* meshSteps(section: Section, limits: QualityLimits): Steps<RefineProgress, Mesh> {
  const { sizeAt = [] } = section;
  const graph = buildPlanarGraph(section);
  const { regionNames, maxEdges, sideNames, beyond } = graph.drawing;
  const tri = triangulateGraph(graph);
  for (let t = 0; t < tri.slotCount; t++) tri.size[t] = maxEdges[tri.region[t]] ?? Infinity;
  yield* tellCrowd({ tri, regionNames, wishes: sizeAt, limits, drawn: true }, function* () {
    yield* refine(tri, limits);
    yield* refineTo(tri, maxEdges, sizeAt, limits);
    yield* unfold(tri, limits);
  });
  const mesh = meshOf(tri, regionNames, sideNames);
  return beyond === undefined ? mesh : withInfinity(mesh, beyond);
}

/**
 * Refines a mesh where it is longer than wanted; what is fine enough stays. The quality promises are kept.
 * @param wanted  Float64Array(m): longest edge wanted in each triangle, metres; Infinity for no wish
 */
export function refineMesh(mesh: Mesh, wanted: Float64Array, limits: QualityLimits = DEFAULT_LIMITS): Mesh {
  return finish(refineMeshSteps(mesh, wanted, limits));
}

/** The same, step by step. */
export function* refineMeshSteps(mesh: Mesh, wanted: Float64Array, limits: QualityLimits): Steps<RefineProgress, Mesh> {
  const { regionNames, sideNames } = mesh;
  const tri = triangulationOf(mesh, wanted);
  yield* tellCrowd({ tri, regionNames, wishes: [], limits, drawn: false }, function* () {
    yield* refine(tri, limits);
    yield* unfold(tri, limits);
  });
  const fine = meshOf(tri, regionNames, sideNames);
  return mesh.beyond === undefined ? fine : withInfinity(fine, mesh.beyond);
}

/** The corner that stands for infinity was drawn there; its number changes from mesh to mesh. */
function withInfinity(mesh: Mesh, beyond: Omit<Beyond, 'infinity'>): Mesh {
  const [x, y] = beyond.imageCentre;
  for (let v = 0; v < cornerCount(mesh); v++) {
    if (mesh.xy[2 * v] === x && mesh.xy[2 * v + 1] === y) return { ...mesh, beyond: { ...beyond, infinity: v } };
  }
  throw new Error('withInfinity: no corner at the centre of the image');
}
