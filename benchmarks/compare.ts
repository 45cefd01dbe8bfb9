/**
 * Ours beside native general-purpose libraries on the same data, samples alternating, one thread each: only the ratios mean
 * anything. What each part includes on either side is told in peers/README.md.
 */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { compareField } from './compare-field.js';
import { compareMesher } from './compare-mesher.js';
import { compareCold, compareSparse } from './compare-sparse.js';
import type { Comparison, Row } from './comparison.js';
import { printRows } from './comparison.js';

const GROUPS: Readonly<Record<string, (comparison: Comparison) => Promise<void>>> = {
  sparse: compareSparse,
  field: compareField,
  mesher: compareMesher,
  cold: compareCold,
};

export interface CompareOptions {
  readonly runs: number;
  readonly maxUnknowns: number;
  /** The group to run; all if absent. */
  readonly only?: string | undefined;
}

export async function compare({ runs, maxUnknowns, only }: CompareOptions): Promise<void> {
  console.log(`\nbeside native peers (medians of ${runs} alternating samples)`);
  const groups = Object.entries(GROUPS).filter(([name]) => only === undefined || name === only);
  if (groups.length === 0) throw new Error(`no group "${only}": there are ${Object.keys(GROUPS).join(', ')}`);
  const folder = mkdtempSync(join(tmpdir(), 'gapwright-peers-'));
  const rows: Row[] = [];
  try {
    for (const [name, run] of groups) {
      try {
        await run({ runs, maxUnknowns, folder, add: (row) => rows.push(row) });
      } catch (error) {
        console.log(`  ${name} ended early: ${error instanceof Error ? error.message : String(error)}`);
        process.exitCode = 1;
      }
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
  printRows(rows);
}
