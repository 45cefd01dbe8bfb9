import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { hutHydro, makeFolder } from './run.js';

const bin = fileURLToPath(new URL('../../packages/cli/dist/bin.js', import.meta.url));

describe('the program itself', () => {
  test('solves, and passes its status on', () => {
    const good = spawnSync(process.execPath, [bin, 'solve', hutHydro, '--json', '--quiet', '--set', 'model.radii=1'], {
      encoding: 'utf8',
    });
    expect([good.status, good.stderr]).toEqual([0, '']);
    expect(JSON.parse(good.stdout).format).toBe('gapwright-result/1');
    expect(spawnSync(process.execPath, [bin, 'solve', 'none.yaml']).status).toBe(2);
    expect(spawnSync(process.execPath, [bin, 'nonsense']).status).toBe(2);
  });

  test('digests a file without settings to its plain SHA-256', () => {
    const { stdout } = spawnSync(process.execPath, [bin, 'check', hutHydro, '--json'], { encoding: 'utf8' });
    const plain = createHash('sha256').update(readFileSync(hutHydro)).digest('hex');
    expect(JSON.parse(stdout).input_sha256).toBe(plain);
  });

  test('takes a reader that goes away for no fault, and still writes its files', () => {
    const out = join(makeFolder(), 'out');
    const command = `"$1" "$2" solve "$3" --json --quiet --out "$4" | head -c 20 >/dev/null; echo "\${PIPESTATUS[0]}"`;
    const { stdout, stderr } = spawnSync('bash', ['-c', command, 'bash', process.execPath, bin, hutHydro, out], {
      encoding: 'utf8',
    });
    expect([stdout, stderr]).toEqual(['0\n', '']);
    expect(readdirSync(out)).toContain('report.html');
  });

  test('interrupted, ends with 130 and leaves nothing', async () => {
    const folder = makeFolder();
    const out = join(folder, 'out');
    const child = spawn(process.execPath, [
      bin,
      'solve',
      hutHydro,
      '--set',
      'model.radii=101',
      '--set',
      'model.end_correction=off',
      '--out',
      out,
    ]);
    // The warnings come after the file is read and before the first slice.
    child.stderr.once('data', () => child.kill('SIGINT'));
    const status = await new Promise((resolve) => child.once('close', resolve));
    expect(status).toBe(130);
    expect(existsSync(out)).toBe(false);
    expect(readdirSync(folder)).toEqual([]);
  });
});
