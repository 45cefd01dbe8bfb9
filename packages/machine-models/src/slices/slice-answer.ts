import type { Harmonics } from '../waves/series.js';

/**
 * What one solved slice tells the models. All per metre of depth and for one pole where it says so.
 *
 * The magnets of the slice point along +y at x = 0, so By is positive there.
 */
export interface SliceAnswer {
  /** m. */
  readonly radius: number;
  /** m. */
  readonly polePitch: number;
  /** Weight of the slice in integrals over the magnets' radial length, m. */
  readonly weight: number;
  /** By on the mid-plane of the gap, T; odd orders 1 ... 11. */
  readonly midB: Harmonics;
  /** By averaged over the winding thickness, T; odd orders 1 ... as far as the average over a leg needs. */
  readonly windingB: Harmonics;
  /** Estimated bound of the mesh's error in each `windingB` amplitude, T. */
  readonly windingBErr: readonly number[];
  /** Pull of one disc towards the other, N per metre of depth and pole; positive attracts. */
  readonly pull: number;
  readonly pullRelErr: number;
  /** Field energy as the contract defines it, J per metre of depth and pole. */
  readonly energy: number;
  readonly energyRelErr: number;
  /** Mean flux density in the disc's cut midway between two poles, T; undefined where there is no disc. */
  readonly discB: number | undefined;
  /** Flux density exceeded in 1 % of the steel's area, T; undefined where there is no steel. */
  readonly peakSteelB: number | undefined;
  readonly mesh: { readonly nodes: number; readonly triangles: number; readonly minAngleDeg: number };
  /** Newton steps of the final solve and, over all meshes of the adaptation, in all. */
  readonly newtonSteps: number;
  readonly newtonStepsTotal: number;
  /** Meshes solved until the wanted accuracy was met. */
  readonly meshes: number;
  readonly converged: boolean;
  /** Why Newton's method stopped short; undefined where it converged. */
  readonly failure?: string;
  /** Residual of the final solve over that at A = 0, before the first Newton step and after each. */
  readonly residuals: readonly number[];
  /** The wanted accuracy was reached. */
  readonly accurate: boolean;
}
