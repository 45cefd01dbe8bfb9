import type { Magnets } from '../machine.js';
import { magnetLength, magnetReach } from '../rotor/magnet-shape.js';
import { THINNEST } from './check-layers.js';
import { atLeastMillimetres, atMostMillimetres, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { RotorFile } from './schema-rotor.js';

/** Whether the main magnets find their places round the circle. */
export function checkMagnets(rotor: RotorFile, magnets: Magnets, report: Report): void {
  if (rotor.magnets.segments > 1 && magnets.shape !== 'sector') {
    const remedy = 'give shape: sector, or segments: 1';
    report.fault(['rotor', 'magnets', 'segments'], 'wrong-shape', 'the pieces of a Halbach array are sectors', remedy);
  }
  const { inner } = magnetReach(magnets);
  if (inner <= 0) {
    const wrong = `${millimetres(magnetLength(magnets))} about a mean radius of ${millimetres(magnets.meanRadius)} reaches the shaft`;
    const remedy = `give less than ${millimetres(2 * magnets.meanRadius)}`;
    report.fault(['rotor', 'magnets', sizeAlong(magnets)], 'magnets-at-shaft', wrong, remedy);
    return;
  }
  if (rotor.magnets.shape === 'sector') {
    if (rotor.magnets.arc === undefined && rotor.magnets.segments === 1) {
      const remedy = 'give the share of the pole pitch, for example 0.75';
      report.fault(['rotor', 'magnets', 'arc'], 'missing', 'is missing', remedy);
    }
    return;
  }
  if (magnets.shape === 'block') checkBlocks(rotor.poles, magnets, report);
  else if (magnets.shape === 'round') checkRounds(rotor.poles, magnets, report);
}

const sizeAlong = (magnets: Magnets): string => (magnets.shape === 'round' ? 'diameter' : 'length');

function checkBlocks(poles: number, magnets: Magnets & { readonly shape: 'block' }, report: Report): void {
  const { inner } = magnetReach(magnets);
  const pitch = (2 * Math.PI * inner) / poles;
  if (!(magnets.width > pitch * (1 + HAIR))) return;
  const wrong =
    `neighbouring magnets overlap: ${millimetres(magnets.width)} wide, but at their inner radius of ${millimetres(inner)} ` +
    `there are only ${millimetres(pitch)} from pole to pole`;
  // With the slot between them that `checkLayers` asks for, a share of the outer pole pitch.
  const half = magnets.length / 2;
  const slot = (THINNEST * 2 * Math.PI * (magnets.meanRadius + half)) / poles;
  const meanRadius = ((magnets.width * poles) / (2 * Math.PI) + half * (1 + THINNEST)) / (1 - THINNEST);
  const remedy = `give at most ${atMostMillimetres(pitch - slot)}, or a mean_radius of at least ${atLeastMillimetres(meanRadius)}`;
  report.fault(['rotor', 'magnets', 'width'], 'magnets-overlap', wrong, remedy);
}

/**
 * Two round magnets touch where the line between their centres is as long as they are wide; in the slices, cut along circles
 * that are then unrolled, a little before: where the line y = pi r / poles, half a pole pitch at the radius r, touches the
 * magnet's circle about y = 0, r = meanRadius.
 */
function checkRounds(poles: number, magnets: Magnets & { readonly shape: 'round' }, report: Report): void {
  const share = 2 * Math.sin(Math.atan(Math.PI / poles));
  const most = magnets.meanRadius * share;
  if (!(magnets.diameter > most + HAIR)) return;
  const wrong =
    `neighbouring magnets overlap: ${millimetres(magnets.diameter)} across, but unrolled there is room for no more than ` +
    millimetres(most);
  const meanRadius = atLeastMillimetres((1.005 * magnets.diameter) / share);
  const remedy = `give at most ${atMostMillimetres(0.995 * most)}, or a mean_radius of at least ${meanRadius}`;
  report.fault(['rotor', 'magnets', 'diameter'], 'magnets-overlap', wrong, remedy);
}
