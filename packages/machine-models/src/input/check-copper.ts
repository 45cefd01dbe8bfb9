import type { Winding, Wire } from '../machine.js';
import { fillFactor } from '../winding/turn.js';
import { figure, HAIR, millimetres } from './format-figure.js';
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
  const goesIn = checkWireSize(winding, legWidth * narrowest, report);
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
  if (goesIn && fill <= most) checkLayers(winding, legWidth * narrowest, report);
}

/** Thick wire may have the area it needs and yet no place: whole wires side by side, in whole layers, fill a leg by steps. */
function checkLayers({ wire, turns, thickness }: Winding, legWidth: number, report: Report): void {
  const wanted = turns * wire.strands;
  const places = Math.max(inLayers(wire, legWidth, thickness), inLayers(wire, thickness, legWidth));
  if (!(wanted > places)) return;
  const text =
    `${wanted} wires of ${sizeOf(wire)} do not go side by side into a leg of ${millimetres(legWidth)} x ` +
    `${millimetres(thickness)}, where whole layers hold ${places}; thinner wire and more strands in hand fill it better`;
  report.warn(['winding', 'wire'], text);
}

/**
 * Wires, without enamel, in whole layers along `across`: flat ones on their broad side; round ones layer over layer, or,
 * where that holds more, every other layer shifted by half a wire and sunk into the one below.
 */
function inLayers({ diameter, width = 0, height = 0 }: Wire, across: number, up: number): number {
  const whole = (room: number): number => Math.max(0, Math.floor(room + HAIR));
  if (diameter === undefined) return whole(across / width) * whole(up / height);
  const inLayer = whole(across / diameter);
  const layers = 1 + whole((up / diameter - 1) / Math.sin(Math.PI / 3));
  const sunk = Math.ceil(layers / 2) * inLayer + Math.floor(layers / 2) * whole(across / diameter - 0.5);
  return Math.max(inLayer * whole(up / diameter), sunk);
}

function sizeOf({ diameter, width = 0, height = 0 }: Wire): string {
  return diameter === undefined ? `${millimetres(width)} x ${millimetres(height)}` : millimetres(diameter);
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

/** Whether a single wire goes into the leg, flat wire either way round. */
function checkWireSize({ wire, thickness }: Winding, legWidth: number, report: Report): boolean {
  const sides = [wire.diameter ?? wire.width ?? Number.NaN, wire.diameter ?? wire.height ?? Number.NaN];
  const room = [legWidth, thickness];
  const tooThick = Math.min(...sides) > Math.min(...room) || Math.max(...sides) > Math.max(...room);
  if (!tooThick || !(Math.min(...room) > 0)) return !tooThick;
  const wrong = `wire of ${sizeOf(wire)} is thicker than the leg, ${millimetres(legWidth)} x ${millimetres(thickness)}`;
  report.fault(['winding', 'wire'], 'wire-too-thick', wrong, 'give thinner wire and more strands in hand');
  return false;
}
