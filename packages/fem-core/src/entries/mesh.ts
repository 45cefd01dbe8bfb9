/**
 * Meshes: their arrays and how to walk them; making one of a section, refining it to wanted sizes, proving it sound,
 * and solving on one that is at hand. The names of sides and of the regions of unbounded space are here too.
 *
 * @module @gapwright/fem-core/mesh
 */

export { regionAreas } from '../elements/areas.js';
export type { Curve } from '../geometry/curve.js';
export { sidesOf } from '../geometry/shapes.js';
export { BEYOND_REGION, OUTSIDE_REGION } from '../geometry/unbounded.js';
export type { MeshExpectation, MeshQuality } from '../mesh/check-mesh.js';
export { checkMesh, measureMesh } from '../mesh/check-mesh.js';
export type { Beyond, Mesh } from '../mesh/mesh.js';
export { cornerCount, edgeCount, nodeCount, nodePoint, triangleCount, triangleNodes } from '../mesh/mesh.js';
export { meshSection, refineMesh } from '../mesh/mesh-section.js';
export type { QualityLimits, RefineProgress } from '../mesh/refine.js';
export type { SolvedField } from '../pipeline.js';
export { solveOnMesh } from '../pipeline.js';
