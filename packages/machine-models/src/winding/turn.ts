import type { Opening, Winding } from '../machine.js';
import { COPPER_DENSITY, copperResistivity } from './copper.js';

/**
 * Length of a coil's mean turn, m.
 *
 * Concentrated: the opening's perimeter + pi x leg width, a line half a leg width outside the opening all round, with
 * round corners. Overlapped: two legs and two arcs of one pole pitch; the bundle keeps its section on the way across, so
 * its radial build there is the leg's width and the arcs' mid-lines lie half of it beyond the leg's ends: outwards at
 * the outer end, towards the shaft at the inner end. What the outer arc gains the inner one loses.
 */
export function meanTurn(winding: Winding, poles: number): number {
  if (winding.layout === 'concentrated') return openingPerimeter(winding.opening) + Math.PI * winding.legWidth;
  const { innerRadius, outerRadius } = winding.legs;
  const poleAngle = (2 * Math.PI) / poles;
  const halfBuild = winding.legWidth / 2;
  return 2 * (outerRadius - innerRadius) + poleAngle * (outerRadius + halfBuild + innerRadius - halfBuild);
}

/** Perimeter of the trapezium, m. */
function openingPerimeter({ innerRadius, outerRadius, innerWidth, outerWidth }: Opening): number {
  return innerWidth + outerWidth + 2 * Math.hypot(outerRadius - innerRadius, (outerWidth - innerWidth) / 2);
}

/** Length of one strand through all coils of the machine, m; strands in hand multiply the wire to buy, not this. */
export function wireLength(winding: Winding, poles: number): number {
  return winding.coils * winding.turns * meanTurn(winding, poles);
}

/** Bare copper of all coils, kg. */
export function copperMass(winding: Winding, poles: number): number {
  return COPPER_DENSITY * wireLength(winding, poles) * conductorArea(winding);
}

/**
 * Resistance of one phase, its parallel paths together, in ohm:
 *
 *   R = rho(T) x (length of one strand through the phase's coils) / (conductor section x paths^2)
 *
 * @param temperature of the copper, degC
 */
export function phaseResistance(winding: Winding, poles: number, temperature: number): number {
  const length = wireLength(winding, poles) / winding.phases;
  return (copperResistivity(temperature) * length) / (conductorArea(winding) * winding.paths ** 2);
}

/** Bare copper over the leg's section, leg width x thickness. */
export function fillFactor(winding: Winding): number {
  return (winding.turns * conductorArea(winding)) / (winding.legWidth * winding.thickness);
}

/** Copper section of one turn, all its strands, m^2. */
function conductorArea({ wire }: Winding): number {
  return wire.strands * wire.strandArea;
}
