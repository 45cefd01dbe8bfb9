import type { Winding } from '../machine.js';
import { isBalanced } from '../winding/coil-places.js';
import { legCut } from '../winding/leg-cut.js';
import { checkCopper, checkWire } from './check-copper.js';
import { checkLegs } from './check-legs.js';
import { atLeastMillimetres, atMostMillimetres, figure, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { Surroundings } from './resolve-winding.js';
import type { WindingFile } from './schema-winding.js';

/** Share of the pole's flux that a coil embraces, sin of half its electrical span: below the one it is refused. */
const LEAST_PITCH_FACTOR = 0.05;
const LOW_PITCH_FACTOR = 0.6;

/** Everything about the winding that one key alone does not tell. */
export function checkWinding(file: WindingFile, winding: Winding, around: Surroundings, report: Report): void {
  checkCoilCount(file, around, report);
  checkThickness(winding, around, report);
  const hasWire = checkWire(file, report);
  if (!checkLegs(file, winding, around, report)) return;
  checkSpan(winding, around, report);
  if (hasWire) checkCopper(winding, around, report);
}

function checkCoilCount({ layout, coils, phases, paths }: WindingFile, { poles }: Surroundings, report: Report): void {
  if (phases !== 3 || poles % 2 !== 0 || Number.isNaN(coils)) return; // told elsewhere
  const path = ['winding', 'coils'];
  if (layout === 'overlapped' && coils !== (phases * poles) / 2) {
    const wanted = (phases * poles) / 2;
    const wrong = `overlapped coils are phases x poles / 2 = ${wanted} on ${poles} poles, got ${coils}`;
    report.fault(path, 'coil-count', wrong, `give ${wanted}`);
  } else if (layout === 'concentrated' && !isBalanced(coils, poles)) {
    const wrong = `${coils} coils on ${poles} poles make no balanced set of three phases`;
    report.fault(path, 'coil-count', wrong, `give ${nearestBalanced(coils, poles).join(' or ')} coils`);
  } else if ((coils / phases) % paths > 0) {
    const perPhase = coils / phases;
    const divisors = Array.from({ length: perPhase }, (_, i) => i + 1).filter((i) => perPhase % i === 0);
    const wrong = `${perPhase} coils per phase cannot be shared among ${paths} parallel paths`;
    report.fault(['winding', 'paths'], 'path-count', wrong, `give one of ${divisors.slice(0, 10).join(', ')}`);
  }
}

/** The balanced counts next below and above. Every multiple of 3^(v+1) is, 3^v dividing poles/2: the search ends. */
function nearestBalanced(coils: number, poles: number): readonly number[] {
  const below = Array.from({ length: coils }, (_, i) => coils - i).find((count) => isBalanced(count, poles));
  let above = coils;
  while (!isBalanced(above, poles)) above++;
  return below === undefined ? [above] : [below, above];
}

function checkThickness({ thickness, clearance }: Winding, { gap }: Surroundings, report: Report): void {
  const room = gap - 2 * clearance;
  if (room <= HAIR) {
    const wrong = `${millimetres(clearance)} on each side leave no room for a winding in a gap of ${millimetres(gap)}`;
    const remedy = `give less than ${millimetres(gap / 2)}, or a larger rotor.gap`;
    report.fault(['winding', 'clearance'], 'no-room', wrong, remedy);
  } else if (thickness > room + HAIR) {
    const wrong =
      `the winding is thicker than its room: ${millimetres(thickness)}, but a gap of ${millimetres(gap)} less ` +
      `${millimetres(clearance)} on each side leaves ${millimetres(room)}`;
    const needed = atLeastMillimetres(thickness + 2 * clearance);
    const remedy = `give at most ${atMostMillimetres(room)}, or a rotor.gap of at least ${needed}`;
    report.fault(['winding', 'thickness'], 'too-thick', wrong, remedy);
  }
}

/** Coils as wide as a whole pole pair embrace as much north as south. */
function checkSpan(winding: Winding, { poles, inner, outer }: Surroundings, report: Report): void {
  const meanRadius = (inner + outer) / 2;
  const halfSpan = (poles / 2) * legCut(winding, poles, meanRadius, meanRadius).halfSpan;
  const factor = Math.abs(Math.sin(halfSpan));
  const told = `the coils span ${figure((halfSpan * 360) / Math.PI)} electrical degrees at the mean radius, pitch factor ${figure(factor)}`;
  if (factor < LEAST_PITCH_FACTOR) {
    const remedy = 'give coils and opening such that a coil spans about 180 electrical degrees';
    report.fault(['winding', 'coils'], 'no-flux', `${told}: north and south cancel`, remedy);
  } else if (factor < LOW_PITCH_FACTOR) {
    report.warn(['winding', 'coils'], `${told}: much of the flux cancels; 180 degrees would be best`);
  }
}
