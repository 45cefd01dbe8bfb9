import { InputError, type Place } from '@gapwright/fem-core';
import { applySettings, placeOf, plainValue, readDocument } from '@gapwright/fem-core/text';
import * as z from 'zod';
import type { LibraryMaterial, Warning } from '../machine.js';
import { gatherMaterials } from './check-materials.js';
import type { ReadOptions } from './read-machine.js';
import { readSchema } from './read-schema.js';
import { openReport } from './report.js';
import { materials as materialsSchema } from './schema-materials.js';

export interface MaterialsReadResult {
  /** The materials that the file describes, by name, in its order. */
  readonly own: Readonly<Record<string, LibraryMaterial>>;
  readonly warnings: readonly Warning[];
  /** Where the file has what a warning is about. */
  readonly locate: (warning: Warning) => Place | undefined;
}

const materialsOnly = z.object({ materials: materialsSchema.optional() });

/**
 * Reads the materials of a machine file or a section file; what else stands in it is not looked at.
 *
 * @throws InputError with everything wrong with the writing and the materials, each with its place
 */
export function readMaterials(text: string, options: ReadOptions): MaterialsReadResult {
  const document = applySettings(readDocument(text, options.file), options.settings ?? []);
  const report = openReport(document);
  const { value: file, problems } = readSchema(materialsOnly, plainValue(document.root));
  for (const found of problems) report.add(found);
  const all = file === undefined ? {} : gatherMaterials(file.materials, options.readBeside, report);
  const faults = report.faults();
  if (faults.length > 0) throw new InputError(faults);
  const own = Object.fromEntries(Object.keys(file?.materials ?? {}).map((name) => [name, all[name]]));
  return { own, warnings: report.warnings(), locate: ({ key }) => placeOf(document, key.split('.')) };
}
