import { readFileSync } from 'node:fs';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { type ReadResult, readMachine } from '../../../packages/machine-models/src/input/read-machine.js';

/** The demonstration machine, as text. */
export const HUT = readFileSync(new URL('../../../packages/cli/scenarios/hut-hydro.yaml', import.meta.url), 'utf8');

/** Reads the hut with some keys set anew, each as `KEY=VALUE`. */
export function readHut(...settings: readonly string[]): ReadResult {
  return readText(HUT, settings);
}

export function readText(
  text: string,
  settings: readonly string[] = [],
  beside: Readonly<Record<string, string>> = {},
): ReadResult {
  return readMachine(text, {
    file: 'hut.yaml',
    settings: settings.map((setting) => {
      const at = setting.indexOf('=');
      return { key: setting.slice(0, at), value: setting.slice(at + 1) };
    }),
    readBeside: (name) => {
      if (!Object.hasOwn(beside, name)) throw new Error('there is no such file');
      return beside[name];
    },
  });
}

/** The lines of the InputError that reading must end in. */
export function faultsOf(read: () => unknown): readonly string[] {
  try {
    read();
  } catch (error) {
    if (error instanceof InputError) return error.message.split('\n');
    throw error;
  }
  throw new Error('nothing was found wrong');
}

/** The hut's text with one piece in place of another, and the line and column where the new piece stands. */
export function edit(from: string, to: string): { readonly text: string; readonly at: string } {
  const start = HUT.indexOf(from);
  if (start < 0 || HUT.indexOf(from, start + 1) >= 0) throw new Error(`${from} is not in the text just once`);
  const before = HUT.slice(0, start).split('\n');
  return {
    text: HUT.replace(from, () => to),
    at: `${before.length}:${(before.at(-1) ?? '').length + 1}`,
  };
}
