import { createHash } from 'node:crypto';
import { dirname, join } from 'node:path';
import { InputError } from '@gapwright/fem-core';
import type { Setting } from '@gapwright/fem-core/text';
import type { ReadOptions, ReadResult } from '@gapwright/machine-models';
import type { Engine } from './engine.js';
import { readFileBeside, readTextFile } from './files.js';

/** A machine file read and judged, with the digest of all that went into it. */
export interface MachineInput extends ReadResult {
  readonly sha256: string;
}

/**
 * Reads a machine file with its side files.
 *
 * @throws InputError with all faults found
 */
export function readMachineFile(engine: Engine, path: string, settings: readonly Setting[]): MachineInput {
  const { read, sha256 } = readInputFile(path, settings, engine.read);
  return { ...read, sha256 };
}

/**
 * Reads an input file of any kind with its side files. The digest covers the bytes of the file, then of each side file in
 * the order of reading, then the settings; without the latter two it is the plain SHA-256 of the file.
 *
 * @throws InputError with all faults found
 */
export function readInputFile<T>(
  path: string,
  settings: readonly Setting[],
  reader: (text: string, options: ReadOptions) => T,
): { readonly read: T; readonly sha256: string } {
  const { bytes, text } = readTextFile(path);
  const digest = createHash('sha256').update(bytes);
  const sideFiles = new Set<string>();
  const readBeside = (name: string): string => {
    const beside = readFileBeside(path, name);
    digest.update(`\0file ${name}\0`).update(beside.bytes);
    sideFiles.add(name);
    return beside.text;
  };
  const read = withPaths(sideFiles, dirname(path), () => reader(text, { file: path, settings, readBeside }));
  for (const { key, value } of settings) digest.update(`\0set ${key}=${value}`);
  return { read, sha256: digest.digest('hex') };
}

/** Tells faults of side files by the path from where the user stands, not from the machine file's folder. */
function withPaths<T>(sideFiles: ReadonlySet<string>, folder: string, read: () => T): T {
  try {
    return read();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    throw new InputError(
      error.faults.map((fault) =>
        fault.at !== undefined && sideFiles.has(fault.at.file)
          ? { ...fault, at: { ...fault.at, file: join(folder, fault.at.file) } }
          : fault,
      ),
    );
  }
}
