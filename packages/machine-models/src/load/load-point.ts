/** A machine at work at one speed; powers are means over a period, currents are positive out of the machine. */
export interface LoadPoint {
  readonly speed_rpm: number;
  /** A bridge whose line voltage never passes DC voltage and drops: no current, no power. */
  readonly below_cut_in: boolean;
  /** Bridge: mean voltage and current of the DC side, and its power. */
  readonly dc_V?: number;
  readonly dc_A?: number;
  readonly dc_W?: number;
  /** Resistors and drive: rms voltage between two of the load's terminals, power into the load. */
  readonly ac_line_V?: number;
  readonly ac_W?: number;
  /** In a phase of the winding and in a conductor of the cable; of unlike phases the rms mean. */
  readonly phase_rms_A: number;
  readonly line_rms_A: number;
  /** Delta: current round the loop, which flows whatever the load; it is part of `phase_rms_A`. */
  readonly loop_rms_A?: number;
  /** Mean of sum e i: what the shaft gives to the winding. */
  readonly electromagnetic_W: number;
  readonly copper_W: number;
  readonly rectifier_W: number;
  readonly cable_W: number;
  /** Electromagnetic. */
  readonly torque_Nm: number;
  /** Highest less lowest torque over the mean. */
  readonly torque_ripple: number;
  /** Bridge: electrical angle in which a conductor carries current, per half wave; 180 when it never rests. */
  readonly conduction_deg?: number;
  /** Bridge: angle in which all three do, per sixth of a period. */
  readonly overlap_deg?: number;
  readonly current_density_A_per_mm2?: number;
  /** False where the periodic state was not found to 1e-9 of the current at short circuit; the figures are those of the last try. */
  readonly converged: boolean;
}

/** Current (rms, A) over copper (m^2), where that is known. */
export function currentDensity(rms: number, area: number | undefined): { current_density_A_per_mm2?: number } {
  return area === undefined ? {} : { current_density_A_per_mm2: rms / (1e6 * area) };
}
