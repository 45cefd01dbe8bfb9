import type { Magnets, Winding } from '../machine.js';
import { leastRoom } from '../rotor/interpole-shape.js';
import { magnetReach, segmentCount } from '../rotor/magnet-shape.js';
import { atLeastMillimetres, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { RotorFile } from './schema-rotor.js';

/** Layers thinner than this share of the pole pitch would need meshes out of all proportion to what they do to the field. */
export const THINNEST = 1 / 1000;

/**
 * Layers and slots of the unrolled sections that are too thin to be meshed: their elements are about as long as they are
 * thick. None at all is fine: magnets may touch, and a winding may fill the gap.
 */
export function checkLayers(rotor: RotorFile, magnets: Magnets, winding: Winding, report: Report): void {
  const { inner, outer } = magnetReach(magnets);
  const least = (THINNEST * 2 * Math.PI * outer) / rotor.poles;
  const tell = (path: readonly string[], what: string, size: number, noneWillDo: boolean): void => {
    if (!(size < least * (1 - HAIR)) || (noneWillDo && size <= HAIR)) return;
    const remedy = `give ${noneWillDo ? 'none or ' : ''}at least ${atLeastMillimetres(least)}, a thousandth of the pole pitch`;
    report.fault(path, 'too-thin', `${what} of ${millimetres(size)} is too thin to be meshed`, remedy);
  };
  tell(['rotor', 'magnets', 'thickness'], 'a magnet', magnets.thickness, false);
  if (rotor.disc.thickness !== undefined) tell(['rotor', 'disc', 'thickness'], 'a disc', rotor.disc.thickness, false);
  if (rotor.arrangement === 'keeper' && rotor.keeper?.thickness !== undefined) {
    tell(['rotor', 'keeper', 'thickness'], 'a keeper', rotor.keeper.thickness, false);
  }
  tell(['winding', 'thickness'], 'a winding', winding.thickness, false);
  const air = (rotor.gap - winding.thickness) / 2;
  tell(['winding', 'thickness'], 'the air between winding and magnets', air, true);
  // Round magnets are cut at many radii: how near they come to their neighbours is for `checkMagnets` to judge.
  const room = magnets.shape === 'round' || inner <= 0 ? Number.NaN : leastRoom(magnets, rotor.poles).room;
  if (segmentCount(magnets) === 1) {
    tell(['rotor', 'magnets', magnets.shape === 'sector' ? 'arc' : 'width'], 'the slot between magnets', room, true);
  }
  tellInterpoles(rotor, magnets, room, tell);
}

/** Interpoles and what they leave beside and behind them. */
function tellInterpoles(
  { interpoles, disc }: RotorFile,
  magnets: Magnets,
  room: number,
  tell: (path: readonly string[], what: string, size: number, noneWillDo: boolean) => void,
): void {
  if (interpoles === undefined) return;
  const { width, depth } = interpoles;
  if (width !== 'fill') {
    tell(['rotor', 'interpoles', 'width'], 'an interpole', width, false);
    tell(['rotor', 'interpoles', 'width'], 'the slot beside an interpole', (room - width) / 2, true);
  }
  if (depth === 'through') return;
  const path = ['rotor', 'interpoles', 'depth'];
  tell(path, 'an interpole', depth, false);
  tell(path, 'the step to the back of the main magnets', Math.abs(depth - magnets.thickness), true);
  if (disc.thickness !== undefined && depth > magnets.thickness) {
    tell(path, 'the disc behind an interpole', magnets.thickness + disc.thickness - depth, true);
  }
}
