import { execFile } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { expect, test } from 'vitest';

const folder = new URL('../../../packages/fem-core/examples/', import.meta.url);
const programs = readdirSync(folder).filter((name) => name.endsWith('.js'));

test('there are ten, numbered without a gap', () => {
  const numbers = programs.map((name) => Number(name.slice(0, 2)));
  expect(numbers).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]);
});

const runProgram = promisify(execFile);

test.concurrent.each(programs)(
  '%s runs, and its numbers are those of the laws it names',
  async (name) => {
    const { stdout } = await runProgram(process.execPath, [fileURLToPath(new URL(name, folder))]);
    const checks = stdout.split('\n').filter((line) => line.startsWith('check: '));
    expect(checks, stdout).not.toEqual([]);
    for (const line of checks) {
      const parts = /^check: .+ = (\S+), got (\S+), within (\S+)$/.exec(line) ?? [];
      const [expected, got, within] = parts.slice(1).map(Number);
      expect(Math.abs(got - expected), line).toBeLessThanOrEqual(within * Math.abs(expected));
      expect(within, line).toBeLessThanOrEqual(0.01);
    }
  },
  300_000,
);
