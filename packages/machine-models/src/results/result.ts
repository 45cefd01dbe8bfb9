import type { LoadPoint } from '../load/load-point.js';
import type { Match } from '../load/operating-points.js';
import type { Warning } from '../machine.js';

/** Content of results.json: SI units, the unit ends the key; `_rel_err` twins are bounds estimated from the mesh. */
export interface MachineResult {
  readonly format: 'gapwright-result/1';
  readonly gapwright: string;
  readonly machine: string;
  readonly input_sha256: string;
  readonly slices: readonly SliceResult[];
  readonly emf: EmfResult;
  readonly effective_B: {
    readonly peak_T: number;
    readonly peak_T_rel_err: number;
    readonly line_peak_T: number;
    readonly line_peak_T_rel_err: number;
    readonly third_share_phase: number;
    readonly third_share_line: number;
  };
  readonly winding: WindingResult;
  readonly merit: {
    readonly merit_W: number;
    readonly merit_W_rel_err: number;
    readonly line_B_squared_thickness_T2m: number;
    readonly line_B_squared_thickness_T2m_rel_err: number;
  };
  /** Main magnets at their temperature, and interpoles where they are of another material. */
  readonly magnets: MagnetResult & {
    readonly interpoles?: MagnetResult;
    /** The magnet with the least margin, worst hundredth of its area, circuit open; left out where it is not known. */
    readonly working_B_min_T?: number;
    /** 1 - |H| / |H at the knee|. */
    readonly demagnetisation_margin?: number;
    /** The least of all states: open and shorted at the operating speed, and the coldest start where that is worse. */
    readonly demagnetisation_margin_short?: number;
    readonly worst_region?: string;
  };
  /** On its load at the operating speed; three phases. */
  readonly load?: LoadResult;
  readonly losses: LossResult;
  readonly thermal?: ThermalResult;
  readonly faults: {
    /** Open-circuit peak at overspeed with cold magnets, scaled; left out without an overspeed. */
    readonly overspeed_dc_peak_V?: number;
    /** All terminals joined at the operating speed, hot: of one phase, steady rms, and the first peak. */
    readonly short_circuit_A?: number;
    readonly short_circuit_first_peak_A?: number;
    readonly short_circuit_torque_Nm?: number;
    /** Where joined terminals brake most. */
    readonly greatest_brake_Nm?: number;
    readonly greatest_brake_rpm?: number;
    /** Speed from which the open machine's rectified voltage is taken for a shock hazard. */
    readonly touch_voltage_rpm?: number;
  };
  readonly mechanical: {
    readonly disc_pull_N: number;
    readonly disc_pull_N_rel_err: number;
    /** Rim of the disc that bends most, at the nominal gap. */
    readonly disc_deflection_m?: number;
    readonly disc_stress_Pa?: number;
    /** Between winding and magnets once both discs have bent. */
    readonly clearance_left_m?: number;
    /** Centrifugal force on one magnet (of a Halbach array: one piece) at the highest speed given. */
    readonly magnet_retention_N?: number;
    readonly band_tension_N?: number;
    /** While the discs come together, from far to the gap. */
    readonly jacking?: readonly { readonly gap_m: number; readonly pull_N: number }[];
  };
  readonly masses: {
    readonly magnets_kg?: number;
    readonly copper_kg: number;
    readonly steel_kg?: number;
    readonly resin_kg?: number;
  };
  /** Of magnets, copper and steel, where prices are given; no total while a price or a mass is missing. */
  readonly costs?: {
    readonly total?: number;
    readonly priced: number;
    readonly currency: string;
    readonly parts: { readonly magnets?: number; readonly copper?: number; readonly steel?: number };
  };
  /** What was taken for what the machine file does not tell. */
  readonly notes: readonly string[];
  readonly cautions: readonly string[];
  readonly warnings: readonly Warning[];
}

/** One operating point; see `LoadPoint`. */
export interface LoadRow extends Omit<LoadPoint, 'torque_Nm'> {
  /** Electromagnetic, with drag and strand eddies. */
  readonly shaft_W: number;
  /** At the shaft. */
  readonly torque_Nm: number;
  readonly electromagnetic_torque_Nm: number;
  /** Delivered over shaft power. */
  readonly efficiency: number;
}

export interface LoadResult extends LoadRow {
  readonly cut_in_rpm: number;
  /** Rising in speed, from above cut-in to overspeed. */
  readonly table: readonly LoadRow[];
  /** The same speeds at other voltages of the bus. */
  readonly buses?: readonly {
    readonly voltage_V: number;
    readonly cut_in_rpm: number;
    readonly rows: readonly LoadRow[];
  }[];
  readonly prime_mover?: Pick<Match, 'outcome' | 'points'>;
}

/** W; those of the load are left out without one. */
export interface LossResult {
  readonly copper_W?: number;
  readonly strand_eddy_W?: number;
  readonly rectifier_W?: number;
  readonly cable_W?: number;
  /** Of a delta without a load: by the current round it; on a load it is part of the copper's. */
  readonly circulation_W?: number;
  /** Bearings and windage. */
  readonly rotation_W: number;
}

export interface ThermalResult {
  /** Left out where the heat runs away. */
  readonly winding_C?: number;
  readonly winding_middle_C?: number;
  readonly limit_C: number;
  /** Rms per phase, for good. */
  readonly continuous_A: number;
  readonly overloads: readonly { readonly times: number; readonly current_A: number; readonly from_cold_s: number }[];
}

export interface MagnetResult {
  readonly material: string;
  readonly temperature_C: number;
  readonly remanence_T: number;
  /** Left out where it is not known, or not how it changes from 20 degC. */
  readonly coercivity_intrinsic_A_per_m?: number;
}

export interface HarmonicsResult {
  readonly order: readonly number[];
  /** Signed cosine coefficients about the magnet's axis. */
  readonly amplitude_T: readonly number[];
  readonly amplitude_T_rel_err: readonly number[];
}

export interface SliceResult {
  readonly radius_m: number;
  readonly pole_pitch_m: number;
  readonly mid_B: HarmonicsResult;
  readonly winding_B: HarmonicsResult;
  readonly leg_B: {
    readonly electrical_deg: readonly number[];
    readonly value_T: readonly number[];
    readonly peak_T: number;
    readonly fundamental_T: number;
  };
  /** Width of the leg along the circumference at this radius. */
  readonly leg_width_m: number;
  readonly line_B_peak_T: number;
  readonly pull_N_per_m_pole: number;
  readonly pull_N_per_m_pole_rel_err: number;
  readonly energy_J_per_m_pole: number;
  readonly energy_J_per_m_pole_rel_err: number;
  /**
   * Overlapped windings: one turn a leg, all legs of a phase at 1 A in alternating sense, linkage of one leg per ampere, mean
   * over the rotor's position; mutual with the next phase.
   */
  readonly leg_inductance?:
    | {
        readonly self_H_per_m: number;
        readonly self_H_per_m_rel_err: number;
        readonly mutual_H_per_m: number;
        readonly mutual_H_per_m_rel_err: number;
      }
    | undefined;
  readonly disc_B_T?: number;
  readonly peak_steel_B_T?: number;
  readonly mesh: { readonly nodes: number; readonly triangles: number; readonly min_angle_deg: number };
  readonly newton_steps: number;
  readonly leg_B_rel_err: number;
}

export interface VoltageResult {
  readonly rms_V: number;
  readonly rms_V_rel_err: number;
  readonly peak_V: number;
  readonly peak_V_rel_err: number;
  readonly fundamental_rms_V: number;
  readonly fundamental_rms_V_rel_err: number;
  readonly order: readonly number[];
  readonly harmonic_rms_V: readonly number[];
  /** Above 1 where the mesh's error may be more than the harmonic itself; null in JSON where the harmonic is 0. */
  readonly harmonic_rms_V_rel_err: readonly number[];
  /** sqrt(rms^2 / fundamental^2 - 1). */
  readonly thd: number;
  readonly thd_rel_err: number;
}

export interface EmfResult {
  readonly speed_rpm: number;
  /** Electrical frequency. */
  readonly frequency_Hz: number;
  /** EMF with the third dimension over EMF of the slices alone; see `computeEndFactor`. */
  readonly end_factor?: number;
  readonly end_factor_rel_err?: number;
  /** Half width, relative, of the band for what its model leaves out. */
  readonly end_factor_band_rel?: number;
  /** The same for straight legs over the magnets' radial length alone. */
  readonly end_factor_legs?: number;
  /** The figures here include the end factor. */
  readonly end_corrected: boolean;
  /** Without end factor. */
  readonly slices_alone: {
    readonly phase_rms_V: number;
    readonly phase_fundamental_rms_V: number;
    readonly line_rms_V: number;
  };
  readonly phase: VoltageResult;
  readonly line: VoltageResult;
  readonly rectified_mean_V: number;
  readonly rectified_mean_V_rel_err: number;
  readonly line_rms_V_per_rpm: number;
  readonly line_rms_V_per_rpm_rel_err: number;
  readonly waveform: {
    readonly electrical_deg: readonly number[];
    readonly phase_V: readonly number[];
    readonly line_V: readonly number[];
    readonly rectified_V: readonly number[];
  };
}

export interface WindingResult {
  readonly thickness_m: number;
  readonly fill_factor: number;
  readonly mean_turn_m: number;
  /** Wire length of the whole machine, one strand. */
  readonly wire_length_m: number;
  readonly phase_resistance_20C_ohm: number;
  readonly phase_resistance_hot_ohm: number;
  /** Of one phase, mean over the rotor's position; left out where a slice did not converge. */
  readonly self_inductance_H?: number;
  readonly self_inductance_H_rel_err?: number;
  /** Between two phases of one star. */
  readonly mutual_inductance_H?: number;
  readonly mutual_inductance_H_rel_err?: number;
  /** self - mutual. */
  readonly phase_inductance_H?: number;
  readonly phase_inductance_H_rel_err?: number;
  /** What each is made of: straight legs by the slices, and end turns with a band for what their model leaves out. */
  readonly inductance_parts?: Readonly<
    Record<
      'self' | 'mutual' | 'phase',
      { readonly slices_H: number; readonly end_turns_H: number; readonly end_turns_band_H: number }
    >
  >;
  readonly order: readonly number[];
  readonly winding_factor: readonly number[];
  /** For each coil in order round the machine: its phase (1 ...) and which way round (+1, -1). */
  readonly phase_map: readonly { readonly phase: number; readonly sense: 1 | -1 }[];
}
