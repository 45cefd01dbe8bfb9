import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Peer } from './peer.js';
import { startPeer } from './peer.js';
import { ms, printTable } from './timing.js';

/** One line of the comparison: what was measured of ours and of a peer, and the ratio that is wanted. */
export interface Row {
  readonly part: string;
  readonly peer: string;
  readonly size: string;
  /** Milliseconds, or numbers of things where `count` is set; undefined for what does not exist yet. */
  readonly ours?: number;
  readonly theirs?: number;
  readonly count?: boolean;
  /** Wanted ratios ours / peer; absent where none is set. */
  readonly must?: number;
  readonly aim?: number;
  /** By which a wrong answer would show. */
  readonly check: string;
}

/** What the groups of rows share. */
export interface Comparison {
  /** Samples of either side per row. */
  readonly runs: number;
  /** Larger systems are left out. */
  readonly maxUnknowns: number;
  /** A folder for the files that hand the data over. */
  readonly folder: string;
  readonly add: (row: Row) => void;
}

const here = fileURLToPath(new URL('..', import.meta.url)); // benchmarks
const serve = fileURLToPath(new URL('./serve.js', import.meta.url));

/** The program of a peer built by peers/build.sh; undefined, and said so, where it is not there. */
export function builtPath(name: string): string | undefined {
  const path = join(here, 'peers/out', name);
  if (existsSync(path)) return path;
  console.log(`  left out: what needs ${name}, which is not built (benchmarks/peers/build.sh)`);
  return undefined;
}

export function builtPeer(name: string): Peer | undefined {
  const path = builtPath(name);
  return path === undefined ? undefined : startPeer(path);
}

export const fieldPeer = (): Peer => startPeer('/usr/bin/python3', [join(here, 'peers/field.py')]);

/** Ours as a process of its own. */
export const ownProcess = (...args: readonly string[]): Peer => startPeer(process.execPath, [serve, ...args]);

export function printRows(rows: readonly Row[]): void {
  const order = [...new Set(rows.map((row) => row.part))];
  const sorted = order.flatMap((part) => rows.filter((row) => row.part === part));
  printTable([
    ['part', 'peer', 'size', 'ours', 'theirs', 'ratio', 'must', 'aim', 'reached', 'check'],
    ...sorted.map((row) => {
      const { ours, theirs, must, aim } = row;
      const show = (value: number | undefined): string =>
        value === undefined ? '-' : row.count === true ? `${value}` : ms(value);
      const ratio = ours === undefined || theirs === undefined ? undefined : ours / theirs;
      return [
        row.part,
        row.peer,
        row.size,
        ours === undefined ? 'not yet' : show(ours),
        show(theirs),
        ratio?.toFixed(3) ?? '-',
        must?.toFixed(2) ?? '-',
        aim?.toFixed(2) ?? '-',
        reached(ratio, must, aim),
        row.check,
      ];
    }),
  ]);
  console.log('  ours, theirs: medians in ms, or counts; ratio: ours / theirs');
}

function reached(ratio: number | undefined, must: number | undefined, aim: number | undefined): string {
  if (ratio === undefined || must === undefined) return '-';
  if (aim !== undefined && ratio <= aim) return 'aim';
  return ratio <= must ? 'must' : 'MISSED';
}

/** A target that depends on the size: that of the last step whose size is reached, rising; none below the first. */
export function targetAt(
  size: number,
  steps: readonly (readonly [from: number, must: number, aim: number])[],
): { readonly must?: number; readonly aim?: number } {
  const reachedSteps = steps.filter(([from]) => size >= 0.9 * from);
  if (reachedSteps.length === 0) return {};
  const [, must, aim] = reachedSteps[reachedSteps.length - 1];
  return { must, aim };
}
