import type { Mesh } from '../mesh/mesh.js';
import { triangleCount } from '../mesh/mesh.js';
import { FULL_RULE, gradients, nodeCoordinates } from './six-node.js';

/** Area of each region, m^2, curved edges included. */
export function regionAreas(mesh: Mesh): number[] {
  const areas = mesh.regionNames.map(() => 0);
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  for (let t = 0; t < triangleCount(mesh); t++) {
    nodeCoordinates(mesh, t, at);
    for (let q = 0; q < FULL_RULE.count; q++) {
      areas[mesh.triangleToRegion[t]] += FULL_RULE.weights[q] * gradients(at, FULL_RULE.slopes, 12 * q, grad);
    }
  }
  return areas;
}
