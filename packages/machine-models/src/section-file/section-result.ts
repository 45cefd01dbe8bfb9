import type { Warning } from '../machine.js';

/**
 * A solved section, SI units, per metre of depth where the key says so; totals for the given depth beside them. A figure's
 * twin ending in `_rel_err` bounds what the mesh does to it; of a component, against the component itself. Figures that
 * are not numbers (no field there, not converged) become null in JSON.
 */
export interface SectionResult {
  readonly format: 'gapwright-section-result/1';
  readonly gapwright: string;
  readonly name: string;
  readonly input_sha256: string;
  readonly depth_m: number;
  /** Air B^2/2mu0, steel int H dB, magnets (B-Br)^2/2mu or int H dB from the remanence; everything in the section. */
  readonly energy_J_per_m: number;
  readonly energy_J_per_m_rel_err: number;
  readonly coenergy_J_per_m: number;
  readonly coenergy_J_per_m_rel_err: number;
  readonly energy_J: number;
  readonly coenergy_J: number;
  readonly mesh: { readonly nodes: number; readonly triangles: number; readonly min_angle_deg: number };
  readonly elements: 'quadratic' | 'linear';
  /** On the last mesh. */
  readonly newton_steps: number;
  /** The largest of all that the wanted accuracy binds. */
  readonly rel_err: number;
  readonly converged: boolean;
  /** The wanted accuracy was met. */
  readonly accurate: boolean;
  readonly probes: readonly ProbeResult[];
  readonly cautions: readonly string[];
  readonly warnings: readonly Warning[];
}

export type ProbeResult =
  | PointResult
  | LineResult
  | {
      readonly name: string;
      readonly kind: 'force_on';
      readonly Fx_N_per_m: number;
      readonly Fx_N_per_m_rel_err: number;
      readonly Fy_N_per_m: number;
      readonly Fy_N_per_m_rel_err: number;
      readonly torque_Nm_per_m: number;
      readonly torque_Nm_per_m_rel_err: number;
      readonly Fx_N: number;
      readonly Fy_N: number;
      readonly torque_Nm: number;
    }
  | {
      readonly name: string;
      readonly kind: 'linkage_of';
      readonly linkage_Wb_per_m: number;
      readonly linkage_Wb_per_m_rel_err: number;
      readonly linkage_Wb: number;
    }
  | {
      readonly name: string;
      readonly kind: 'flux_through';
      readonly flux_Wb_per_m: number;
      readonly flux_Wb_per_m_rel_err: number;
      readonly flux_Wb: number;
    }
  | {
      readonly name: string;
      readonly kind: 'mean_over';
      readonly Bx_T: number;
      readonly Bx_T_rel_err: number;
      readonly By_T: number;
      readonly By_T_rel_err: number;
      /** Mean of |B|. */
      readonly B_T: number;
      readonly B_T_rel_err: number;
    };

export interface PointResult {
  readonly name: string;
  readonly kind: 'point';
  readonly A_Wb_per_m: number;
  readonly A_Wb_per_m_rel_err: number;
  readonly Bx_T: number;
  readonly Bx_T_rel_err: number;
  readonly By_T: number;
  readonly By_T_rel_err: number;
  readonly B_T: number;
  readonly B_T_rel_err: number;
  readonly Hx_A_per_m: number;
  readonly Hx_A_per_m_rel_err: number;
  readonly Hy_A_per_m: number;
  readonly Hy_A_per_m_rel_err: number;
}

/** Lists of one length; the same figures as of a point, and where each was taken. */
export type LineResult = { readonly name: string; readonly kind: 'line' } & {
  readonly [K in 's_m' | 'x_m' | 'y_m' | Exclude<keyof PointResult, 'name' | 'kind'>]: readonly number[];
};
