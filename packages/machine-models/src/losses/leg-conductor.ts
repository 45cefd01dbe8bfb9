import type { Machine } from '../machine.js';
import { legCut } from '../winding/leg-cut.js';

/** Width of a leg at right angles to its turns where they cross a radius, m. */
export function legWidthAt({ winding, rotor }: Pick<Machine, 'winding' | 'rotor'>, radius: number): number {
  return winding.legShape === 'parallel' ? winding.legWidth : (winding.legWidth * radius) / rotor.magnets.meanRadius;
}

/**
 * Length of conductor per length of radius, of one turn's two legs as the slices take them, prolonged to any radius: twice
 * their width along the circumference over that at right angles to the turns, 2 or little more.
 */
export function legConductor(machine: Pick<Machine, 'winding' | 'rotor'>, radius: number): number {
  const { winding, rotor } = machine;
  const { width } = legCut(winding, rotor.poles, rotor.magnets.meanRadius, radius);
  return (2 * width) / legWidthAt(machine, radius);
}
