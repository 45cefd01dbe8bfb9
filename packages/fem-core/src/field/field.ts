import type { Setup } from '../assembly/setup.js';
import type { Mesh } from '../mesh/mesh.js';
import type { SolveReport } from '../solve/newton.js';

/** A solved section. B = (dA/dy, -dA/dx). */
export interface Field {
  readonly mesh: Mesh;
  readonly setup: Setup;
  /** Float64Array(n + e): vector potential A out of the page at every node (corners, then edge middles), Wb/m. */
  readonly potential: Float64Array;
  readonly report: SolveReport;
}
