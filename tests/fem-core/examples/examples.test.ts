import { execFileSync } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';

const folder = new URL('../../../packages/fem-core/examples/', import.meta.url);
const programs = readdirSync(folder).filter((name) => name.endsWith('.js'));

test('there are ten, numbered without a gap', () => {
  const numbers = programs.map((name) => Number(name.slice(0, 2)));
  expect(numbers).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]);
});

test.concurrent.each(programs)('%s runs, and its number is that of the law it names', async (name) => {
  const lines = execFileSync(process.execPath, [fileURLToPath(new URL(name, folder))], { encoding: 'utf8' })
    .trim()
    .split('\n');
  const check = /^check: (.+) = (\S+), got (\S+), within (\S+)$/.exec(lines.at(-1) ?? '');
  expect(check, lines.join('\n')).not.toBeNull();
  const [expected, got, within] = (check ?? []).slice(2).map(Number);
  expect(Math.abs(got - expected)).toBeLessThanOrEqual(within * Math.abs(expected));
  expect(within).toBeLessThanOrEqual(0.2);
});
