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
  /** In unbounded space: sum of all currents, A. Where it is not 0, A grows beyond all bounds far away. */
  readonly netCurrent?: number;
}
