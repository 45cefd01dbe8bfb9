import { formatFault, InputError, type Place } from '@gapwright/fem-core';
import type { Warning } from '@gapwright/machine-models';
import { writeFiles } from './files.js';
import type { CommonOptions } from './options.js';
import { plainText } from './plain-text.js';
import { type Surroundings, stopIfInterrupted } from './surroundings.js';

/** Options of the verbs that solve and write files. */
export interface OutputOptions extends CommonOptions {
  readonly out?: string;
  readonly vtu?: boolean;
}

/** @throws InputError where VTK XML is wanted and no folder is named for it */
export function refuseVtuAlone({ out, vtu }: OutputOptions): void {
  if (vtu !== true || out !== undefined) return;
  const remedy = 'name a folder with --out DIR';
  throw new InputError([{ code: 'no-folder', key: '--vtu', wrong: 'has nowhere to write to', remedy }]);
}

/** A terminal that shows the sheet shows the warnings there; anywhere else they would be missed. */
export function showWarnings(
  warnings: readonly Warning[],
  options: CommonOptions,
  { stdout, stderr }: Surroundings,
  locate?: Locate,
): void {
  if (!options.json && stdout.isTTY === true && stderr.isTTY === true) return;
  for (const warning of warnings) stderr.write(`warning: ${plainText(warningText(warning, locate))}\n`);
}

/** Where in its file stands what a warning is about. */
export type Locate = (warning: Warning) => Place | undefined;

/** `FILE:LINE:COLUMN: key: text`, leaving out what is not known. */
export function warningText(warning: Warning, locate?: Locate): string {
  const { key, text } = warning;
  return formatFault({ code: '', at: locate?.(warning), key, wrong: text, remedy: '' });
}

/**
 * Writes all files or none and says so.
 * @throws Interrupted once the user has interrupted, InputError where the folder cannot be written to
 */
export function writeOutputs(
  folder: string,
  files: ReadonlyMap<string, string>,
  { quiet }: CommonOptions,
  { stderr, signal }: Surroundings,
): void {
  stopIfInterrupted(signal);
  writeFiles(folder, files);
  const count = files.size === 1 ? '1 file' : `${files.size} files`;
  if (!quiet) stderr.write(`${count} written to ${plainText(folder)}\n`);
}
