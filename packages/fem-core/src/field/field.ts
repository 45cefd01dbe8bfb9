import type { Setup } from '../assembly/setup.js';
import type { Mesh } from '../mesh/mesh.js';
import type { SolveReport } from '../solve/newton.js';

/** A solved section. B = (dA/dy, -dA/dx). */
export interface Field {
  /** The last one, where the solution was adaptive. */
  readonly mesh: Mesh;
  /** As it was given. */
  readonly setup: Setup;
  /** Float64Array(n + e): vector potential A out of the page at every node (corners, then edge middles), Wb/m. */
  readonly potential: Float64Array;
  /** Whether the solve converged, and how. */
  readonly report: SolveReport;
  /** In unbounded space: sum of all currents, A. Where it is not 0, A grows beyond all bounds far away. */
  readonly netCurrent?: number;
}
