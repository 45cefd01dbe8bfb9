import { InputError } from '@gapwright/fem-core';
import { applySettings, plainValue, readDocument, type Setting } from '@gapwright/fem-core/text';
import type { Machine, Warning } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import { buildMachine, buildMagnets } from './build-machine.js';
import { checkLayers } from './check-layers.js';
import { gatherMaterials, type ReadBeside } from './check-materials.js';
import { checkOperation } from './check-operation.js';
import { checkRotor } from './check-rotor.js';
import { checkWinding } from './check-winding.js';
import { chooseSlices } from './choose-slices.js';
import { refuseOtherFormat, SECTION_FORMAT } from './file-format.js';
import { warnLeftOut } from './not-solved-yet.js';
import { readSchema } from './read-schema.js';
import { type OpenReport, openReport } from './report.js';
import { resolveWinding } from './resolve-winding.js';
import { type MachineFile, machineFile, measuredFile } from './schema.js';

export interface ReadOptions {
  /** The name to tell in places. */
  readonly file: string;
  /** Values said anew from outside, `--set KEY=VALUE`. */
  readonly settings?: readonly Setting[];
  /** The text of a file that lies beside the machine file; without it, `bh_file` is refused. */
  readonly readBeside?: ReadBeside;
}

export interface ReadResult {
  readonly machine: Machine;
  readonly warnings: readonly Warning[];
}

/**
 * Reads a machine file (format gapwright-machine/1; YAML 1.2, so JSON too) into SI units, `fit`, `fill` and defaults
 * worked out.
 *
 * Three passes gather everything that is wrong before anything is thrown: the writing (`readDocument`), each key by the
 * schema, and how the values go together; where a value is unreadable, the checks that need it keep silent.
 *
 * @throws InputError with every fault and its place; YAML syntax errors come alone
 */
export function readMachine(text: string, options: ReadOptions): ReadResult {
  const document = applySettings(readDocument(text, options.file), options.settings ?? []);
  const report = openReport(document);
  const raw = plainValue(document.root);
  refuseOtherFormat(raw, SECTION_FORMAT, ['says that this is a section file', 'use gapwright section'], report);
  if (isMeasuredOnly(raw)) {
    for (const found of readSchema(measuredFile, raw).problems) report.add(found);
    const remedy = 'describe its rotor and winding';
    report.fault(
      ['measured'],
      'not-solved-yet',
      'a machine known only by measurement is not solved by this version yet',
      remedy,
    );
    throw new InputError(report.faults());
  }
  const { value: file, problems } = readSchema(machineFile, raw);
  for (const found of problems) report.add(found);
  const machine = file && judge(file, options, report);
  const faults = report.faults();
  if (faults.length > 0 || machine === undefined) throw new InputError(faults);
  return { machine, warnings: report.warnings() };
}

function isMeasuredOnly(raw: unknown): boolean {
  return typeof raw === 'object' && raw !== null && 'measured' in raw && !('rotor' in raw) && !('winding' in raw);
}

/** How the values go together; a machine where nothing at all is wrong. */
function judge(file: MachineFile, options: ReadOptions, report: OpenReport): Machine | undefined {
  warnLeftOut(file, report);
  checkOperation(file, report);
  const materials = gatherMaterials(file.materials, options.readBeside, report);
  const { rotor, model } = file;
  const magnets = buildMagnets(rotor.magnets);
  checkRotor(file, magnets, materials, report);
  const radii = magnetReach(magnets);
  const around = { poles: rotor.poles, gap: rotor.gap, ...radii };
  const winding = resolveWinding(file.winding, around);
  checkWinding(file.winding, winding, around, report);
  checkLayers(rotor, magnets, winding, report);
  const slices = chooseSlices(model, magnets, report);
  if (report.faults().length > 0) return undefined;
  return buildMachine(file, { materials, winding, slices });
}
