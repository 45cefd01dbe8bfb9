import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { InputError } from '@gapwright/fem-core';
import { bareName, writeNewFile } from '../files.js';
import { plainText, wrapText } from '../plain-text.js';
import { exitStatus, type Surroundings } from '../surroundings.js';

export interface NewOptions {
  readonly scenario: string;
  readonly list?: boolean;
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
    for (const name of names) {
      const lines = wrapText(titleOf(name), 98 - column);
      stdout.write(`${name.padEnd(column)}  ${lines.join(`\n${' '.repeat(column + 2)}`)}\n`);
    }
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

/** The first sentence of the file's opening comment. */
function titleOf(name: string): string {
  const comment = /^(?:#.*\n)+/.exec(scenarioText(name))?.[0] ?? '';
  const text = comment.replace(/^# ?/gm, '').replaceAll('\n', ' ').trim();
  return /^.*?[.](?= |$)/.exec(text)?.[0] ?? text;
}
