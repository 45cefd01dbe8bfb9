import type { Inductance, InductanceParts } from '../inductance/inductance.js';
import type { Machine } from '../machine.js';
import { coilPlaces } from '../winding/coil-places.js';
import { distributionFactor, legSpreadFactor, pitchFactor } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';
import { fillFactor, meanTurn, phaseResistance, wireLength } from '../winding/turn.js';
import { relative } from './error-bounds.js';
import type { WindingResult } from './result.js';

/** Orders of the winding factors that are told. */
const ORDERS = Array.from({ length: 25 }, (_, k) => 2 * k + 1);

/**
 * `winding` of the results. The winding factor of an order is distribution x pitch x leg spread with the coil's true span
 * and leg width at the magnets' mean radius, signed so that  e1 = sum peak_n sin(n theta),  peak_n in proportion to
 * factor_n x B_n; 1 would be all conductors in step under the peak of the wave.
 */
export function describeWinding(machine: Machine, inductance?: Inductance): WindingResult {
  const { winding, rotor } = machine;
  const { poles } = rotor;
  const places = coilPlaces(winding, poles);
  return {
    thickness_m: winding.thickness,
    fill_factor: fillFactor(winding),
    mean_turn_m: meanTurn(winding, poles),
    wire_length_m: wireLength(winding, poles),
    phase_resistance_20C_ohm: phaseResistance(winding, poles, 20),
    phase_resistance_hot_ohm: phaseResistance(winding, poles, winding.temperature),
    ...(inductance !== undefined && describeInductance(inductance)),
    order: ORDERS,
    winding_factor: ORDERS.map((order) => windingFactor(machine, order)),
    phase_map: places.map(({ phase, sense }) => ({ phase, sense })),
  };
}

function describeInductance({ self, mutual, phase }: Inductance): Partial<WindingResult> {
  const parts = ({ slices, endTurns, endTurnsBand }: InductanceParts) => ({
    slices_H: slices,
    end_turns_H: endTurns,
    end_turns_band_H: endTurnsBand,
  });
  // The error from the mesh is one of the slices' part.
  const error = ({ slices, slicesRelErr, total }: InductanceParts): number =>
    relative(Math.abs(slices) * slicesRelErr, total);
  return {
    self_inductance_H: self.total,
    self_inductance_H_rel_err: error(self),
    mutual_inductance_H: mutual.total,
    mutual_inductance_H_rel_err: error(mutual),
    phase_inductance_H: phase.total,
    phase_inductance_H_rel_err: error(phase),
    inductance_parts: { self: parts(self), mutual: parts(mutual), phase: parts(phase) },
  };
}

/** Signed winding factor at the magnets' mean radius; see `describeWinding`. */
export function windingFactor({ winding, rotor }: Machine, order: number): number {
  const { poles, magnets } = rotor;
  const { halfSpan, width } = legCut(winding, poles, magnets.meanRadius, magnets.meanRadius);
  const polePitch = (2 * Math.PI * magnets.meanRadius) / poles;
  return (
    distributionFactor(coilPlaces(winding, poles), poles, order) *
    pitchFactor((poles / 2) * halfSpan, order) *
    legSpreadFactor(width, polePitch, order)
  );
}
