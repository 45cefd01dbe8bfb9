import type { Machine, Winding } from '../machine.js';

/** A leg's section at its narrowest, m. */
export interface LegSection {
  readonly width: number;
  readonly thickness: number;
}

/** All turns pass the narrowest place: a tapered leg's inner end. */
export function narrowestLeg({ winding, rotor }: Pick<Machine, 'winding' | 'rotor'>): LegSection {
  const { legShape, legWidth, thickness } = winding;
  const share = legShape === 'parallel' ? 1 : Math.min(1, innerEnd(winding) / rotor.magnets.meanRadius);
  return { width: legWidth * share, thickness };
}

const innerEnd = (winding: Winding): number =>
  winding.layout === 'concentrated' ? winding.opening.innerRadius : winding.legs.innerRadius;

/** Sizes (m) or counts that differ by less are equal: decimal fractions. */
const HAIR = 1e-9;

/**
 * Round wires of an overall diameter that go into a section in whole layers, each wire on top of one below: along the width or
 * along the thickness makes no difference.
 */
export function wiresInLayers(diameter: number, { width, thickness }: LegSection): number {
  return Math.floor(width / diameter + HAIR) * Math.floor(thickness / diameter + HAIR);
}
