import type { Path } from '@gapwright/fem-core/text';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';

/** What is read and judged, but only leaves figures out: one warning each. */
export function warnLeftOut(file: MachineFile, report: Report): void {
  for (const key of ['load', 'cable', 'drag', 'cooling', 'prime_mover'] as const) {
    if (file.operation[key] !== undefined) leftOut(['operation', key], report);
  }
  for (const key of ['limits', 'prices', 'tolerances'] as const) {
    if (file[key] !== undefined) leftOut([key], report);
  }
  if (file.measured !== undefined) {
    report.warn(['measured'], 'read and checked, but not worked out by this version yet: the computed figures stand');
  }
  if (file.model.end_correction === 'off') {
    report.warn(['model', 'end_correction'], 'off: voltages are those of the slices alone, some percent too high');
  }
}

function leftOut(path: Path, report: Report): void {
  report.warn(path, 'read and checked; what follows from it is not worked out by this version yet and left out');
}
