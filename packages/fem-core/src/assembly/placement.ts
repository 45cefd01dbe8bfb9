import type { Mesh } from '../mesh/mesh.js';
import { cornerCount } from '../mesh/mesh.js';
import type { Placement } from '../sparse/nested-dissection.js';
import type { Unknowns } from './unknowns.js';

/**
 * Where the unknowns are and which of them are ends of which, for orders and for conjugate gradients. Of several nodes that
 * share an unknown the first one stands for it.
 */
export function placementOf(mesh: Mesh, unknowns: Unknowns): Required<Placement> {
  const { unknownOf, sign, count } = unknowns;
  const corners = cornerCount(mesh);
  const points = new Float64Array(2 * count);
  const ends = new Int32Array(2 * count).fill(-1);
  const weights = new Float64Array(2 * count);
  for (let node = unknownOf.length - 1; node >= 0; node--) {
    const i = unknownOf[node];
    if (i < 0) continue;
    const isCorner = node < corners;
    const at = 2 * (isCorner ? node : node - corners);
    for (let k = 0; k < 2; k++) {
      const end = isCorner ? node : mesh.edges[at + k];
      points[2 * i + k] = isCorner ? mesh.xy[at + k] : mesh.middles[at + k];
      ends[2 * i + k] = unknownOf[end];
      weights[2 * i + k] = (sign[node] * sign[end]) / 2;
    }
  }
  return { points, ends, weights };
}
