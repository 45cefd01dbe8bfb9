import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { type Engine, main, type SectionEngine } from '@gapwright/cli';
import { afterAll } from 'vitest';

export const hutHydro = fileURLToPath(new URL('../../packages/cli/scenarios/hut-hydro.yaml', import.meta.url));

export interface Run {
  readonly status: number;
  readonly out: string;
  readonly err: string;
}

export interface RunOptions {
  readonly engine?: Engine;
  readonly sections?: SectionEngine;
  readonly env?: Readonly<Record<string, string>>;
  readonly signal?: AbortSignal;
  /** Both streams pass for a terminal. */
  readonly terminal?: boolean;
}

/** Runs a command in this process and gathers what it says. */
export async function run(argv: readonly string[], options: RunOptions = {}): Promise<Run> {
  const said = { out: '', err: '' };
  const stream = (name: 'out' | 'err') => ({
    isTTY: options.terminal ?? false,
    write: (text: string) => {
      said[name] += text;
    },
  });
  const surroundings = {
    stdout: stream('out'),
    stderr: stream('err'),
    env: options.env ?? {},
    signal: options.signal ?? new AbortController().signal,
  };
  const status = await main(argv, surroundings, options.engine, options.sections);
  return { status, ...said };
}

const folders: string[] = [];
afterAll(() => {
  for (const folder of folders) rmSync(folder, { recursive: true, force: true });
});

/** A new empty folder that goes away with the file's tests. */
export function makeFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'gapwright-test-'));
  folders.push(folder);
  return folder;
}

/** A machine file in a new folder: the hut hydro set with parts of its text replaced. */
export function writeMachine(...replacements: readonly (readonly [from: string | RegExp, to: string])[]): string {
  const text = replacements.reduce(
    (before, [from, to]) => before.replace(from, () => to),
    readFileSync(hutHydro, 'utf8'),
  );
  const path = join(makeFolder(), 'machine.yaml');
  writeFileSync(path, text);
  return path;
}

/** Content of all files of a folder by name. */
export function readFolder(folder: string): Record<string, string> {
  return Object.fromEntries(
    readdirSync(folder)
      .sort()
      .map((name) => [name, readFileSync(join(folder, name), 'utf8')]),
  );
}
