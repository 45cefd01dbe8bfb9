import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';

const root = fileURLToPath(new URL('..', import.meta.url));
const readme = readFileSync(join(root, 'README.md'), 'utf8');

/** The fenced block that follows a marker comment. */
function blockAfter(marker: string): string {
  const block = new RegExp(`<!-- ${marker}:[^>]*-->\\s*\`\`\`\\w*\\n([\\s\\S]*?)\`\`\``).exec(readme)?.[1];
  if (block === undefined) throw new Error(`README has no block marked ${marker}`);
  return block;
}

test('the datasheet in README is what the program prints today', () => {
  const scenario = 'packages/cli/scenarios/hut-hydro.yaml';
  const printed = execFileSync(process.execPath, ['packages/cli/gapwright.js', 'solve', scenario, '--quiet'], {
    cwd: root,
    encoding: 'utf8',
  });
  expect(blockAfter('datasheet')).toBe(printed);
});

test('the embedding example in README gives the closed-form field of a bar magnet', () => {
  const source = blockAfter('embed');
  expect(source.trim().split('\n').length).toBeLessThanOrEqual(10);
  // Types are not for Node 20 to run: `as const` is the only one in the block.
  const folder = mkdtempSync(join(root, 'packages/cli/dist/.readme-'));
  try {
    writeFileSync(join(folder, 'bar.mjs'), source.replaceAll(' as const', ''));
    const printed = Number(execFileSync(process.execPath, [join(folder, 'bar.mjs')], { encoding: 'utf8' }));
    // Rectangle of 30 mm x 10 mm, 1.25 T, recoil 1, 10 mm above its centre: two current sheets (any electromagnetics text).
    expect(Math.abs(printed - 0.184479522)).toBeLessThan(5e-4);
  } finally {
    rmSync(folder, { recursive: true });
  }
});
