import type { Winding } from '../machine.js';
import { fillFactor } from '../winding/turn.js';
import { figure, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import { type Surroundings, widthAt } from './resolve-winding.js';
import type { WindingFile } from './schema-winding.js';

/**
 * Bare copper over the leg's section. Round wire in square packing, without enamel, fills pi/4 = 0.785; closest packing
 * of 1 mm wire with grade 2 enamel 0.758 (diameters of IEC 60317-0-1): beyond 0.75 it cannot be wound; by common
 * practice, hand winding ends at 0.60. Flat wire leaves no holes but for its enamel and its rounded corners.
 */
const FILL = { round: { most: 0.75, usual: 0.6 }, flat: { most: 0.95, usual: 0.8 } };

/** Whether the turns go into a leg that has a place (see `checkLegs`) and is wound with wire that has a size. */
export function checkCopper(winding: Winding, around: Surroundings, report: Report): void {
  const { wire, thickness, legWidth, legShape, turns, layout } = winding;
  const { innerRadius } = layout === 'concentrated' ? winding.opening : winding.legs;
  // All turns pass the leg's narrowest place, the inner end where it is tapered.
  const narrowest = Math.min(1, widthAt(legShape, innerRadius, around));
  checkWireSize(winding, legWidth * narrowest, report);
  const fill = fillFactor(winding) / narrowest;
  const { most, usual } = wire.diameter === undefined ? FILL.flat : FILL.round;
  const place = narrowest < 1 ? ` at the leg's inner end, ${millimetres(legWidth * narrowest)} wide` : '';
  const told =
    `${turns} turns of ${figure(wire.strands * wire.strandArea * 1e6)} mm2 fill ${figure(fill)} of a leg of ` +
    `${millimetres(legWidth)} x ${millimetres(thickness)}${place}`;
  if (fill > most && thickness > 0) {
    const wrong = `${told}, but no more than ${most} can be wound`;
    const fitting = Math.floor((turns * most) / fill);
    const fewer = fitting > 0 ? `at most ${fitting} turns, ` : '';
    report.fault(['winding', 'turns'], 'over-full', wrong, `give ${fewer}thinner wire, or a wider leg`);
  } else if (fill > usual && thickness > 0) {
    report.warn(['winding', 'turns'], `${told}; hand winding seldom passes ${usual}`);
  }
}

/** Whether the wire's section is given in exactly one way; tells what is wrong where it is not. */
export function checkWire({ wire }: WindingFile, report: Report): boolean {
  const path = ['winding', 'wire'];
  const remedy = 'give a diameter, or awg, or width and height';
  const flat = wire.width !== undefined || wire.height !== undefined;
  const kinds = [wire.diameter !== undefined, wire.awg !== undefined, flat].filter(Boolean).length;
  if (kinds !== 1) {
    const wrong = kinds === 0 ? 'has no size' : 'has its size given in more than one way';
    report.fault(path, 'one-of', wrong, remedy);
    return false;
  }
  if (!flat || (wire.width !== undefined && wire.height !== undefined)) return true;
  const missing = wire.width === undefined ? 'width' : 'height';
  report.fault([...path, missing], 'missing', 'is missing', 'flat wire has a width and a height');
  return false;
}

function checkWireSize({ wire, thickness }: Winding, legWidth: number, report: Report): void {
  const path = ['winding', 'wire'];
  const least = wire.diameter ?? Math.min(wire.width ?? Number.NaN, wire.height ?? Number.NaN);
  const room = Math.min(legWidth, thickness);
  if (least > room && room > 0) {
    const wrong = `wire of ${millimetres(least)} is thicker than the leg, ${millimetres(legWidth)} x ${millimetres(thickness)}`;
    report.fault(path, 'wire-too-thick', wrong, 'give thinner wire and more strands in hand');
  }
}
