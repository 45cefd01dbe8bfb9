import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { hutHydro, makeFolder, readFolder, run } from './run.js';

describe('the command line', () => {
  test.each([
    ['no command', [], /Usage: gapwright/],
    ['an unknown command, with the nearest one', ['slove', hutHydro], /unknown command 'slove'[\s\S]*solve/],
    ['an unknown option', ['solve', hutHydro, '--jsno'], /unknown option '--jsno'[\s\S]*--json/],
    ['no file', ['solve'], /missing required argument 'FILE'/],
    ['too many files', ['solve', hutHydro, hutHydro], /too many arguments/],
    ['a setting without a value', ['check', hutHydro, '--set', 'rotor.gap'], /KEY=VALUE/],
    ['a setting without a key', ['check', hutHydro, '--set', '=3'], /KEY=VALUE/],
    ['no worker', ['solve', hutHydro, '--workers', '0'], /whole number, 1 or more/],
    ['half a worker', ['solve', hutHydro, '--workers', '1.5'], /whole number, 1 or more/],
    ['many a worker', ['solve', hutHydro, '--workers', '1e9'], /whole number, 1 or more/],
  ])('with %s is refused on standard error, status 2', async (_, argv, words) => {
    const { status, out, err } = await run(argv);
    expect([status, out]).toEqual([2, '']);
    expect(err).toMatch(words);
    expect(err).not.toContain('    at ');
  });

  test('explains itself on standard output when asked', async () => {
    for (const argv of [['--help'], ['solve', '--help'], ['help', 'check']]) {
      const { status, out, err } = await run(argv);
      expect([status, err]).toEqual([0, '']);
      expect(out).toMatch(/^Usage: gapwright/);
    }
    expect((await run(['--version'])).out).toMatch(/^\d+\.\d+\.\d+\n$/);
  });
});

describe('gapwright new', () => {
  test('writes a starter file that check and solve accept, and never over another', async () => {
    const folder = join(makeFolder(), 'not', 'there');
    const first = await run(['new', folder, '--scenario', 'hut-hydro']);
    expect(first.status).toBe(0);
    const file = join(folder, 'hut-hydro.yaml');
    expect(first.out).toContain(file);
    expect((await run(['check', file])).status).toBe(0);
    const before = readFolder(folder);
    const second = await run(['new', folder]);
    expect(second.status).toBe(2);
    expect(second.err).toContain('exists already');
    expect(readFolder(folder)).toEqual(before);
  });

  test('lists the scenarios, each with what it is', async () => {
    const { status, out } = await run(['new', '--list']);
    expect(status).toBe(0);
    expect(out).toMatch(/^hut-hydro {2,}\S.{20,}/m);
    for (const line of out.trimEnd().split('\n')) expect(line).toMatch(/^([a-z-]+| +) {2,}\S.{0,96}$/);
  });

  test.each(['../hut-hydro', 'hut', '', 'hut-hydro.yaml'])('knows no scenario %j', async (scenario) => {
    const folder = makeFolder();
    const { status, err } = await run(['new', folder, '--scenario', scenario]);
    expect(status).toBe(2);
    expect(err).toContain('choose one of: ');
    expect(readFolder(folder)).toEqual({});
  });
});

/** With one warning. */
const warned = ['--set', 'model.end_correction=off'];

describe('gapwright check', () => {
  test('judges a sound file in one line, its warnings on standard error', async () => {
    const { status, out, err } = await run(['check', hutHydro, ...warned]);
    expect(status).toBe(0);
    expect(out.trimEnd().split('\n')).toHaveLength(1);
    expect(out).toContain('16 poles, 12 coils, gap 19 mm, 420 rpm, slices at 100.5, 128, 155.5 mm');
    const warnings = err.trimEnd().split('\n');
    expect(warnings.every((line) => line.startsWith('warning: '))).toBe(true);
    expect(out).toContain(`${warnings.length} warning`);
    expect((await run(['check', hutHydro, '--quiet'])).err).toBe('');
  });

  test('gives its judgement as JSON alone with --json', async () => {
    const { out } = await run(['check', hutHydro, '--json', ...warned]);
    const judged: { format: string; input_sha256: string; warnings: { key: string; text: string }[] } = JSON.parse(out);
    expect(judged.format).toBe('gapwright-check/1');
    expect(judged.input_sha256).toMatch(/^[0-9a-f]{64}$/);
    expect(judged.warnings.map(({ key }) => key)).toContain('model.end_correction');
  });
});
