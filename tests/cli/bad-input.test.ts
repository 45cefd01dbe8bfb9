import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { makeFolder, readFolder, run, writeMachine } from './run.js';

describe('a machine file at fault', () => {
  test('is told fault by fault, one a line, each with its place; status 2, nothing else said or written', async () => {
    const file = writeMachine(
      ['gap: 19 mm', 'gap: 19'],
      ['poles: 16', 'poles: 15\n  pols: 16'],
      ['length: 55 mm', 'length: 55 kg'],
    );
    const out = join(makeFolder(), 'out');
    const result = await run(['solve', file, '--out', out, '--json']);
    expect([result.status, result.out]).toEqual([2, '']);
    const lines = result.err.trimEnd().split('\n');
    for (const line of lines) {
      expect(line.startsWith(`${file}:`)).toBe(true);
      expect(line.slice(file.length)).toMatch(/^:\d+:\d+: [a-z_.]+: .+; .+/);
    }
    for (const key of ['rotor.gap', 'rotor.poles', 'rotor.pols', 'rotor.magnets.length']) {
      expect(lines.some((line) => line.includes(` ${key}: `))).toBe(true);
    }
    expect(() => readFolder(out)).toThrow(/ENOENT/);
    expect((await run(['check', file])).err).toBe(result.err);
  });

  test.each([
    ['missing', () => join(makeFolder(), 'none.yaml'), ' cannot be read: no such file or folder'],
    ['a folder', () => makeFolder(), ' is a folder'],
    ['inside a file', () => join(writeMachine(), 'x.yaml'), ' cannot be read: a part of the path is not a folder'],
    ['not UTF-8', () => write(Uint8Array.from([0x6e, 0xff, 0xfe, 0x00])), ' is not UTF-8 text'],
    [
      'huge',
      () => write(new Uint8Array(5.03 * 1024 * 1024).fill(0x20)),
      '1:1: has 5.1 MB, more than the 4 MB that are',
    ],
    ['endless', () => '/dev/zero', '1:1: has more than the 4 MB that are read; check that it is the right file; if '],
  ])('%s is refused in plain words', async (_, make, words) => {
    const file = make();
    const { status, out, err } = await run(['solve', file]);
    expect([status, out]).toEqual([2, '']);
    expect(err.startsWith(`${file}:${words}`)).toBe(true);
    expect(err.trimEnd()).not.toContain('\n');
  });

  test.each([
    ['empty', ''],
    ['a bare word', 'machine'],
    ['broken YAML', 'a: [1, 2'],
    ['NUL bytes', '\0\0\0'],
  ])('that is %s is an input fault, not one of the program', async (_, text) => {
    const { status, err } = await run(['check', write(new TextEncoder().encode(text))]);
    expect(status).toBe(2);
    expect(err).not.toContain('    at ');
  });

  test('with thousands of aliases is refused at once', async () => {
    const layers = Array.from(
      { length: 30 },
      (_, k) => `l${k + 1}: &l${k + 1} [${Array(9).fill(`*l${k}`).join(', ')}]`,
    );
    const began = performance.now();
    const { status } = await run(['check', write(new TextEncoder().encode(['l0: &l0 x', ...layers].join('\n')))]);
    expect(status).toBe(2);
    expect(performance.now() - began).toBeLessThan(10_000);
  });

  test('cannot read tables outside its folder', async () => {
    const parent = makeFolder();
    mkdirSync(join(parent, 'inner'));
    writeFileSync(join(parent, 'secret.csv'), 'H,B\n0,0\n100,secret\n');
    for (const name of ['../secret.csv', join(parent, 'secret.csv'), 'a/../../secret.csv']) {
      const file = writeMachine([/^materials:.*$/m, `materials:\n  plate: { kind: steel, bh_file: "${name}" }`]);
      const { status, err } = await run(['check', file]);
      expect(status).toBe(2);
      expect(err).toContain("leads out of the machine file's folder");
      expect(err).toContain('materials.plate.bh_file: ');
    }
  });

  test('cannot act on the terminal: control characters in its texts are written out', async () => {
    const name = '"\\e]0;owned\\a\\e[2J\\u202egnp\\u2028x"';
    const file = writeMachine(['Hut hydro, 106 V link', name]);
    // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for
    const acting = /[\x00-\x09\x0b-\x1f\x7f-\x9f\u202a-\u202e\u2028]/;
    for (const argv of [
      ['check', file],
      ['solve', file, '--set', 'model.radii=1'],
      ['check', file, '--set', '\x1b[2J=1'],
    ]) {
      const { out, err } = await run(argv);
      expect(out + err).not.toMatch(acting);
    }
    expect((await run(['check', file])).err).toContain('u{1b}]0;owned');
  });
});

function write(bytes: Uint8Array): string {
  const path = join(makeFolder(), 'machine.yaml');
  writeFileSync(path, bytes);
  return path;
}
