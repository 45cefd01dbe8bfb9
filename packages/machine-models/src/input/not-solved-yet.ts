import type { Path } from '@gapwright/fem-core/text';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';

/** What is read and judged, but only leaves figures out: one warning each. */
export function warnLeftOut(file: MachineFile, report: Report): void {
  const { load, prime_mover: mover } = file.operation;
  if (mover !== undefined && mover.kind !== 'table') leftOut(['operation', 'prime_mover'], report);
  if (load !== undefined && file.winding.phases !== 3) {
    report.warn(['operation', 'load'], 'loads are worked out for three phases; left out');
  }
  if (file.tolerances !== undefined) leftOut(['tolerances'], report);
  if (file.measured !== undefined) {
    report.warn(['measured'], 'taken for the load and the short circuit; all other figures stay as computed');
  }
  if (file.model.end_correction === 'off') {
    report.warn(['model', 'end_correction'], 'off: voltages are those of the slices alone, some percent too high');
  }
}

function leftOut(path: Path, report: Report): void {
  report.warn(path, 'read and checked; what follows from it is not worked out by this version yet and left out');
}
