import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { median, ms, printTable, timed } from './timing.js';

const root = fileURLToPath(new URL('../..', import.meta.url));

/** The whole command in a process of its own, from start to exit. */
export function benchCommand(scenario: string): void {
  console.log('\nthe whole command, a process of its own (median of 5)');
  const bin = join(root, 'packages/cli/dist/bin.js');
  if (!existsSync(bin)) {
    console.log('  left out: packages/cli is not built (npm run build)');
    return;
  }
  const folder = mkdtempSync(join(tmpdir(), 'gapwright-bench-'));
  try {
    const run = (args: readonly string[]): number => {
      const { ms: time, result } = timed(() => spawnSync(process.execPath, args, { encoding: 'utf8' }));
      if (result.status !== 0) throw new Error(`${args.join(' ')} ended with ${result.status}: ${result.stderr}`);
      return time;
    };
    const five = (args: readonly string[]): string => ms(median(Array.from({ length: 5 }, () => run(args))));
    const solve = [bin, 'solve', scenario, '--quiet'];
    printTable([
      ['command', 'ms'],
      ['node alone', five(['-e', '0'])],
      ['solve', five(solve)],
      ['solve --json', five([...solve, '--json'])],
      ['solve --out DIR', five([...solve, '--out', join(folder, 'out')])],
    ]);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
