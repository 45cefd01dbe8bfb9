import { createHash } from 'node:crypto';
import type { Setting } from '@gapwright/fem-core';
import type { Engine, ReadMachine } from './engine.js';
import { readFileBeside, readTextFile } from './files.js';

/** A machine file read and judged, with the digest of all that went into it. */
export interface MachineInput extends ReadMachine {
  readonly sha256: string;
}

/**
 * Reads a machine file with its side files. The digest covers the bytes of the file, then of each side file in the
 * order of reading, then the settings; without the latter two it is the plain SHA-256 of the file.
 *
 * @throws InputError with all faults found
 */
export function readMachineFile(engine: Engine, path: string, settings: readonly Setting[]): MachineInput {
  const { bytes, text } = readTextFile(path);
  const digest = createHash('sha256').update(bytes);
  const readBeside = (name: string): string => {
    const beside = readFileBeside(path, name);
    digest.update(`\0file ${name}\0`).update(beside.bytes);
    return beside.text;
  };
  const read = engine.read(text, { file: path, settings, readBeside });
  for (const { key, value } of settings) digest.update(`\0set ${key}=${value}`);
  return { ...read, sha256: digest.digest('hex') };
}
