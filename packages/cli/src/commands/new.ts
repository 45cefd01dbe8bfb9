import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { InputError } from '@gapwright/fem-core';
import { bareName, writeNewFile } from '../files.js';
import { plainText } from '../plain-text.js';
import { exitStatus, type Surroundings } from '../surroundings.js';

export interface NewOptions {
  readonly scenario: string;
  readonly list: boolean;
}

const folder = fileURLToPath(new URL('../../scenarios/', import.meta.url));

/** `gapwright new [DIR]`: writes a starter machine file, never over an existing one. */
export function runNew(directory: string, options: NewOptions, { stdout }: Surroundings): number {
  const names = readdirSync(folder)
    .filter((name) => name.endsWith('.yaml'))
    .map(bareName)
    .sort();
  if (options.list) {
    const column = Math.max(...names.map((name) => name.length));
    for (const name of names) stdout.write(`${name.padEnd(column)}  ${titleOf(name)}\n`);
    return exitStatus.done;
  }
  if (!names.includes(options.scenario)) {
    const wrong = `there is no scenario ${JSON.stringify(options.scenario)}`;
    const remedy = `choose one of: ${names.join(', ')}`;
    throw new InputError([{ code: 'unknown-scenario', key: '--scenario', wrong, remedy }]);
  }
  const path = join(directory, `${options.scenario}.yaml`);
  writeNewFile(path, scenarioText(options.scenario));
  stdout.write(`${plainText(path)} written; next: gapwright solve ${plainText(path)}\n`);
  return exitStatus.done;
}

const scenarioText = (name: string): string => readFileSync(join(folder, `${name}.yaml`), 'utf8');

/** What the file's first comment says it is. */
const titleOf = (name: string): string => /^#\s*(.*)$/m.exec(scenarioText(name))?.[1] ?? '';
