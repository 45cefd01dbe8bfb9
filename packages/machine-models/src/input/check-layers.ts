import type { Winding } from '../machine.js';
import { atLeastMillimetres, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { RotorFile, SolvedMagnets } from './schema-rotor.js';

/** Layers thinner than this share of the pole pitch would need meshes out of all proportion to what they do to the field. */
export const THINNEST = 1 / 1000;

/**
 * Layers and slots of the unrolled sections that are too thin to be meshed: their elements are about as long as they are
 * thick. None at all is fine: magnets may touch, and a winding may fill the gap.
 */
export function checkLayers(rotor: RotorFile, magnets: SolvedMagnets, winding: Winding, report: Report): void {
  const pitchAt = (radius: number): number => (2 * Math.PI * radius) / rotor.poles;
  const inner = pitchAt(magnets.mean_radius - magnets.length / 2);
  const outer = pitchAt(magnets.mean_radius + magnets.length / 2);
  const least = THINNEST * outer;
  const tell = (path: readonly string[], what: string, size: number, noneWillDo: boolean): void => {
    if (!(size < least * (1 - HAIR)) || (noneWillDo && size <= HAIR)) return;
    const remedy = `give ${noneWillDo ? 'none or ' : ''}at least ${atLeastMillimetres(least)}, a thousandth of the pole pitch`;
    report.fault(path, 'too-thin', `${what} of ${millimetres(size)} is too thin to be meshed`, remedy);
  };
  tell(['rotor', 'magnets', 'thickness'], 'a magnet', magnets.thickness, false);
  if (rotor.disc.thickness !== undefined) tell(['rotor', 'disc', 'thickness'], 'a disc', rotor.disc.thickness, false);
  tell(['winding', 'thickness'], 'a winding', winding.thickness, false);
  const air = (rotor.gap - winding.thickness) / 2;
  tell(['winding', 'thickness'], 'the air between winding and magnets', air, true);
  if (magnets.shape === 'block')
    tell(['rotor', 'magnets', 'width'], 'the slot between magnets', inner - magnets.width, true);
  else if (magnets.arc !== undefined)
    tell(['rotor', 'magnets', 'arc'], 'the slot between magnets', (1 - magnets.arc) * inner, true);
}
