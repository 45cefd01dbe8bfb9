import type { Path } from '@gapwright/fem-core';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';

/** What the format knows and this version does not: refused where the answer would be wrong without it. */
export function refuseUnsolved(file: MachineFile, report: Report): void {
  const { rotor, winding, model } = file;
  const refuse = (path: Path, what: string, remedy: string): void =>
    report.fault(path, 'not-solved-yet', `${what} not solved by this version yet`, remedy);
  if (rotor.arrangement === 'keeper') {
    refuse(['rotor', 'arrangement'], 'a keeper is', 'give twin: magnets on both discs');
  }
  if (rotor.disc.material === 'none') refuse(['rotor', 'disc', 'material'], 'an ironless rotor is', 'name a steel');
  if (rotor.magnets.shape === 'round')
    refuse(['rotor', 'magnets', 'shape'], 'round magnets are', 'give block or sector');
  if (rotor.magnets.segments > 1) refuse(['rotor', 'magnets', 'segments'], 'a Halbach array is', 'give 1');
  if (rotor.interpoles !== undefined) refuse(['rotor', 'interpoles'], 'interpoles are', 'leave them out');
  if (winding.phases !== 3 && !Number.isNaN(winding.phases)) {
    refuse(['winding', 'phases'], `${winding.phases} phases are`, 'give 3');
  }
  if (model.radii === 'auto')
    refuse(['model', 'radii'], 'a choice of its own is', 'give a number of slices, for example 3');
}

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
  const told = 'voltages are those of the slices alone, some percent too high';
  report.warn(
    ['model', 'end_correction'],
    file.model.end_correction === 'on'
      ? `the end factor is not worked out by this version yet: ${told}`
      : `off: ${told}`,
  );
}

function leftOut(path: Path, report: Report): void {
  report.warn(path, 'read and checked; what follows from it is not worked out by this version yet and left out');
}
