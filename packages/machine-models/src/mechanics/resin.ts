import type { Machine } from '../machine.js';
import { COPPER_DENSITY } from '../winding/copper.js';
import { copperMass, meanTurn } from '../winding/turn.js';

/** Casting resin between the wires of the coils; what fills their openings and the rim of a casting comes on top. */
export interface Resin {
  /** Coils, copper and all: mean turn x leg width x thickness of each, m^3. */
  readonly windingVolume: number;
  /** Less the bare copper, m^3; enamel counts as resin. */
  readonly volume: number;
  /** kg. */
  readonly mass: number;
  /** Taken, kg/m^3. */
  readonly density: number;
}

/** Unfilled epoxy or polyester casting resin, kg/m^3: 1100 to 1250, from memory; with mineral filler up to 1900. */
export const RESIN_DENSITY = 1150;

/**
 * The coil's section swept along its mean turn is, with round corners, exactly the ring between the opening and a line a leg
 * width outside it (perimeter w + pi w^2), times the thickness.
 */
export function describeResin({ winding, rotor }: Machine): Resin {
  const { coils, legWidth, thickness } = winding;
  const windingVolume = coils * meanTurn(winding, rotor.poles) * legWidth * thickness;
  const volume = Math.max(0, windingVolume - copperMass(winding, rotor.poles) / COPPER_DENSITY);
  return { windingVolume, volume, mass: RESIN_DENSITY * volume, density: RESIN_DENSITY };
}
