import type { Winding } from '../machine.js';
import { coilPlaces, isBalanced, nearestCoils, nearestPoles, pathsAreAlike } from '../winding/coil-places.js';
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
  checkConnection(file, report);
  checkThickness(winding, around, report);
  const hasWire = checkWire(file, report);
  if (!checkLegs(file, winding, around, report)) return;
  checkSpan(winding, around, report);
  if (hasWire) checkCopper(winding, around, report);
}

const IN_WORDS = { 2: 'two', 3: 'three', 5: 'five', 6: 'six' };

function checkCoilCount(file: WindingFile, { poles }: Surroundings, report: Report): void {
  const { layout, coils, phases } = file;
  if (poles % 2 !== 0 || [phases, coils].some(Number.isNaN)) return; // told elsewhere
  const path = ['winding', 'coils'];
  if (layout === 'overlapped' && coils !== (phases * poles) / 2) {
    const wanted = (phases * poles) / 2;
    const wrong = `overlapped coils are phases x poles / 2 = ${wanted} on ${poles} poles, got ${coils}`;
    const others = coils % phases === 0 ? `, or ${(2 * coils) / phases} poles` : '';
    report.fault(path, 'coil-count', wrong, `give ${wanted}${others}`);
  } else if (layout === 'concentrated' && !isBalanced(coils, poles, phases)) {
    const wrong = `${coils} coils on ${poles} poles make no balanced set of ${IN_WORDS[phases]} phases`;
    const onOthers = nearestPoles(coils, poles, phases);
    const others = onOthers.length > 0 ? `, or ${onOthers.join(' or ')} poles` : '';
    report.fault(path, 'coil-count', wrong, `give ${nearestCoils(coils, poles, phases).join(' or ')} coils${others}`);
  } else {
    checkPaths(file, poles, report);
  }
}

/** Parallel paths of a phase: as many coils each, else refused; of one EMF, else warned of. The coils are balanced. */
function checkPaths({ layout, coils, phases, paths }: WindingFile, poles: number, report: Report): void {
  const path = ['winding', 'paths'];
  const perPhase = coils / phases;
  const divisors = Array.from({ length: perPhase }, (_, i) => i + 1).filter((i) => perPhase % i === 0);
  if (perPhase % paths > 0) {
    const wrong = `${perPhase} coils per phase cannot be shared among ${paths} parallel paths`;
    report.fault(path, 'path-count', wrong, `give one of ${divisors.slice(0, 10).join(', ')}`);
    return;
  }
  const places = coilPlaces({ layout, coils, phases }, poles);
  if (pathsAreAlike(places, poles, paths)) return;
  const fine = divisors.filter((count) => pathsAreAlike(places, poles, count));
  report.warn(
    path,
    `the ${perPhase} coils of a phase are not all in step and make no ${paths} parallel paths of equal EMF: current runs ` +
      `between the paths even with no load; ${fine.join(' or ')} would be equal`,
  );
}

function checkConnection({ connection, phases }: WindingFile, report: Report): void {
  if (connection !== 'delta' || phases === 3 || Number.isNaN(phases)) return;
  const wrong = `a delta joins three phases, got ${phases}`;
  report.fault(['winding', 'connection'], 'delta-phases', wrong, 'give star, or 3 phases');
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
