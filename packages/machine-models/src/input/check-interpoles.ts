import type { Magnets } from '../machine.js';
import { leastRoom } from '../rotor/interpole-shape.js';
import { atMostMillimetres, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { RotorFile } from './schema-rotor.js';

const PATH = ['rotor', 'interpoles'] as const;

/** Whether the interpoles find room between the main magnets, and in the disc behind them. */
export function checkInterpoles(rotor: RotorFile, magnets: Magnets, report: Report): void {
  const { interpoles } = rotor;
  if (interpoles === undefined) return;
  if (rotor.magnets.segments > 1) {
    const remedy = 'leave them out, or give segments: 1';
    report.fault(PATH, 'no-room', 'a Halbach array fills the pole pitch: there is no room between its poles', remedy);
    return;
  }
  checkRoom(interpoles.width, magnets, rotor.poles, report);
  checkDepth(interpoles.depth, rotor, report);
}

function checkRoom(width: number | 'fill', magnets: Magnets, poles: number, report: Report): void {
  const { room, radius } = leastRoom(magnets, poles);
  const where = `between the main magnets at ${millimetres(radius)}`;
  if (room <= HAIR) {
    report.fault(PATH, 'no-room', `there is no room ${where}`, 'make the main magnets narrower');
  } else if (width !== 'fill' && width > room + HAIR) {
    const wrong = `must be at most the ${millimetres(room)} ${where}, got ${millimetres(width)}`;
    report.fault([...PATH, 'width'], 'too-wide', wrong, `give at most ${atMostMillimetres(room)}, or fill`);
  }
}

function checkDepth(depth: number | 'through', { disc, magnets }: RotorFile, report: Report): void {
  const path = [...PATH, 'depth'];
  if (disc.material === 'none') {
    if (depth === 'through') {
      report.fault(path, 'needless', 'there is no disc to go through', 'give a size, for example that of the magnets');
    } else if (depth > magnets.thickness + HAIR) {
      const wrong = `must be at most the magnets' ${millimetres(magnets.thickness)} where there is no disc, got ${millimetres(depth)}`;
      report.fault(path, 'too-deep', wrong, `give at most ${atMostMillimetres(magnets.thickness)}`);
    }
    return;
  }
  const whole = magnets.thickness + (disc.thickness ?? Number.NaN);
  if (depth === 'through' || !(depth > whole + HAIR)) return;
  const wrong = `magnets and disc are ${millimetres(whole)} thick together, got ${millimetres(depth)}`;
  report.fault(path, 'too-deep', wrong, `give at most ${atMostMillimetres(whole)}, or through`);
}
