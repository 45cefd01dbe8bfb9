import type { Machine } from '../machine.js';
import { phaseResistance } from '../winding/turn.js';
import type { EmfResult, MachineResult } from './result.js';

/**
 * Resistance, hot, in the way of a DC load's current, ohm: two phases in series (star, whatever the number of phases; of
 * two stars one carries the current at a time) or 2/3 of one (delta).
 */
export function lineResistanceHot(machine: Machine): number {
  const { winding, rotor } = machine;
  return phaseResistance(winding, rotor.poles, winding.temperature) * (winding.connection === 'star' ? 2 : 2 / 3);
}

/**
 * Merit:  V^2/R,  V the rectified mean, R as `lineResistanceHot`; the ohmic loss at delivered power P is about P^2/merit.
 *
 * Beside it `line_peak_T^2 x winding thickness`, which orders machines as merit does when copper fills the gap and all
 * else is common.
 */
export function describeMerit(
  machine: Machine,
  emf: EmfResult,
  effectiveB: MachineResult['effective_B'],
): MachineResult['merit'] {
  return {
    merit_W: emf.rectified_mean_V ** 2 / lineResistanceHot(machine),
    merit_W_rel_err: 2 * emf.rectified_mean_V_rel_err,
    line_B_squared_thickness_T2m: effectiveB.line_peak_T ** 2 * machine.winding.thickness,
    line_B_squared_thickness_T2m_rel_err: 2 * effectiveB.line_peak_T_rel_err,
  };
}
