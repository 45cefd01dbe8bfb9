import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { describe, expect, test } from 'vitest';
import { makeFolder, readFolder, run, writeMachine } from './run.js';

/** What no text of ours may hold: characters a terminal acts upon. */
// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for
const acting = /[\x00-\x09\x0b-\x1f\x7f-\x9f\u202a-\u202e\u2028]/;

interface Figures {
  readonly name: string;
  readonly kind: string;
  readonly source: string;
  readonly [key: string]: unknown;
}

const widest = (text: string): number => Math.max(...text.split('\n').map((line) => [...line].length));

function write(name: string, text: string): string {
  const path = join(makeFolder(), name);
  writeFileSync(path, text);
  return path;
}

describe('the list', () => {
  test('shows every material of --json once, aligned under its group, on lines of 100 characters', async () => {
    const { status, out, err } = await run(['materials']);
    expect([status, err]).toEqual([0, '']);
    expect(widest(out)).toBeLessThanOrEqual(100);
    const json = await run(['materials', '--json']);
    const { format, materials } = JSON.parse(json.out) as { format: string; materials: readonly Figures[] };
    expect(format).toBe('gapwright-materials/1');
    const listed = out.split('\n').flatMap((line) => /^ {2}(\S+(?: \S+)*)/.exec(line)?.[1] ?? []);
    for (const { name } of materials) expect(listed.filter((entry) => entry === name)).toHaveLength(1);
    const rows = out.split('\n').filter((line) => /^ {2}N\d/.test(line));
    expect(new Set(rows.map((line) => line.length)).size).toBe(1);
  });

  test('names a source for each', async () => {
    const { materials } = JSON.parse((await run(['materials', '--json'])).out) as { materials: readonly Figures[] };
    for (const { source } of materials) expect(source.length).toBeGreaterThan(10);
  });

  test('begins with what a file describes', async () => {
    const file = write('m.yaml', 'materials:\n  foil: { kind: nonmagnetic, density: 2.7 g/cm3 }\n');
    const { out } = await run(['materials', '--file', file]);
    expect(out.split('\n').slice(0, 3)).toEqual([
      `Of ${file}`,
      expect.stringContaining('kg/m3'),
      expect.stringMatching(/^ {2}foil +2700$/),
    ]);
  });
});

describe('one material', () => {
  test('at 20 degC, at its limit and at the temperature asked for: remanence and coercivity by their slopes', async () => {
    const { status, out } = await run(['materials', 'N42', '--temperature', '60degC', '--json']);
    expect(status).toBe(0);
    const { at } = JSON.parse(out) as { at: readonly Record<string, number>[] };
    expect(at.map((row) => row.temperature_C)).toEqual([20, 60, 80]);
    for (const { temperature_C, remanence_T, coercivity_intrinsic_A_per_m, knee_H_A_per_m } of at) {
      expect(remanence_T).toBeCloseTo(1.305 * (1 - 0.0012 * (temperature_C - 20)), 12);
      expect(coercivity_intrinsic_A_per_m).toBeCloseTo(955e3 * (1 - 0.006 * (temperature_C - 20)), 6);
      expect(knee_H_A_per_m).toBe(-coercivity_intrinsic_A_per_m);
    }
  });

  test('has its rows in --json', async () => {
    const { bh } = JSON.parse((await run(['materials', 'AISI 1008', '--json'])).out) as {
      bh: { H_A_per_m: readonly number[]; B_T: readonly number[] };
    };
    expect(bh.H_A_per_m[bh.B_T.indexOf(1)]).toBeCloseTo(382.1364, 4);
  });

  test.each(['N42', 'Y30', 'Sm2Co17-33', 'AISI 1008', 'M470-50A', 'cast iron'])(
    '%s has a curve as wide as the terminal, within its lines',
    async (name) => {
      for (const [columns, widthMost] of [
        ['60', 60],
        ['90', 90],
        ['1', 40],
        ['1000000', 120],
        ['x', 100],
      ] as const) {
        const { out } = await run(['materials', name], { env: { COLUMNS: columns } });
        const dots = out.split('\n').filter((line) => /[\u2801-\u28ff]/u.test(line) && /[│┤]/.test(line));
        expect(dots.length).toBeGreaterThan(10);
        expect(widest(dots.join('\n'))).toBeLessThanOrEqual(widthMost);
        const axis = out.split('\n').find((line) => line.includes('└')) ?? '';
        expect([...axis]).toHaveLength(widthMost - 1);
        expect(out).toMatch(/H in k?A\/m/);
      }
    },
  );

  test('of steel rises from left to right in the terminal; a magnet’s flux density too', async () => {
    for (const name of ['AISI 1008', 'N42SH']) {
      const { out } = await run(['materials', name]);
      const dots = out.split('\n').filter((line) => /[│┤]/.test(line));
      const ends = dots.map((line) => line.search(/[\u2801-\u28ff][^\u2801-\u28ff]*$/u));
      const places = ends.filter((place) => place >= 0);
      expect([...places].sort((a, b) => b - a)).toEqual(places);
    }
  });

  test.each(['copper', 'air'])('%s has no curve', async (name) => {
    const folder = join(makeFolder(), 'out');
    const { status, out } = await run(['materials', name, '--out', folder]);
    expect(status).toBe(0);
    expect(out).not.toMatch(/[\u2800-\u28ff]/u);
    expect(Object.keys(readFolder(folder))).toEqual(['results.json']);
  });

  test('above the limit of its grade, or ferrite in the cold, is warned of; steel at a temperature too', async () => {
    const hot = await run(['materials', 'N42', '--temperature', '81 degC']);
    expect(hot.err).toMatch(/^warning: --temperature: 81 degC is above the usual limit of 80 degC/);
    expect(hot.out).toContain('Warnings');
    expect((await run(['materials', 'N42', '--temperature', '80degC'])).err).toBe('');
    expect((await run(['materials', 'Y30', '--temperature', '-20degC'])).err).toContain('in the cold');
    expect((await run(['materials', 'DC01', '--temperature', '50degC'])).err).toContain('not used');
    expect((await run(['materials', 'N42', '--temperature', '81 degC', '--quiet'])).err).toBe('');
  });
});

describe('--out', () => {
  test.each(['N42', 'AISI 1008', 'C8', 'M400-50A'])(
    '%s: results.json as printed and a well-formed picture, the same bytes each time',
    async (name) => {
      const [one, two] = [join(makeFolder(), 'a'), join(makeFolder(), 'b')];
      const argv = ['materials', name, '--temperature', '60degC', '--json', '--quiet'];
      const printed = await run([...argv, '--out', one]);
      await run([...argv, '--out', two]);
      const files = readFolder(one);
      expect(Object.keys(files)).toEqual(['curve.svg', 'results.json']);
      expect(files).toEqual(readFolder(two));
      expect(files['results.json']).toBe(printed.out);
      expect(XMLValidator.validate(files['curve.svg'])).toBe(true);
      expect(files['curve.svg']).not.toMatch(/NaN|Infinity|undefined/);
      const { svg } = new XMLParser().parse(files['curve.svg']) as { svg: { title: string } };
      expect(svg.title).toContain(name);
    },
  );

  test('draws nothing outside the frame', async () => {
    for (const name of ['N42', 'N38EH', 'Y30BH', 'DC01', 'cast iron']) {
      const folder = join(makeFolder(), 'out');
      await run(['materials', name, '--temperature', '100degC', '--out', folder]);
      const curves = readFolder(folder)['curve.svg'].matchAll(/<path d="M([^"hv]+)" stroke="#(?:1f5fa8|c2410c)"/g);
      const places = [...curves].flatMap(([, d]) => d.split('L').map((place) => place.split(' ').map(Number)));
      expect(places.length).toBeGreaterThan(3);
      for (const [x, y] of places) {
        expect(x).toBeGreaterThanOrEqual(66);
        expect(x).toBeLessThanOrEqual(736);
        expect(y).toBeGreaterThanOrEqual(44);
        expect(y).toBeLessThanOrEqual(458);
      }
    }
  });
});

describe('materials of a file', () => {
  test('are shown by name, before those of the library, however unsound the machine is', async () => {
    const file = writeMachine(['gap: 19 mm', 'gap: 0 mm'], [/^ {2}magnet_42:/m, '  N52:']);
    const { status, out } = await run(['materials', 'N52', '--file', file, '--json']);
    expect(status).toBe(0);
    expect(JSON.parse(out)).toMatchObject({ group: `Of ${file}`, remanence_T: 1.3, source: 'the machine file' });
  });

  test('tables of their own are read beside the file, and faults told in them', async () => {
    const folder = makeFolder();
    const file = join(folder, 'm.yaml');
    writeFileSync(file, 'materials:\n  m: { kind: magnet, demagnetisation_file: m.csv, coercivity_slope: -0.5 %/K }\n');
    writeFileSync(join(folder, 'm.csv'), '0, 1.2\n-4e5, 0.67\n-4.2e5, 0.2\n');
    const { status, out } = await run(['materials', 'm', '--file', file, '--temperature', '60degC']);
    expect(status).toBe(0);
    expect(out).toMatch(/-400\.0 +0\.6700/);
    writeFileSync(join(folder, 'm.csv'), '0, 1.2\n-4e5, x\n');
    const { status: bad, err } = await run(['materials', 'm', '--file', file]);
    expect(bad).toBe(2);
    expect(err).toMatch(new RegExp(`^${join(folder, 'm.csv')}:2:1: materials\\.m\\.demagnetisation_file: `));
  });

  test('take --set', async () => {
    const file = writeMachine();
    const { out } = await run([
      'materials',
      'magnet_42',
      '--file',
      file,
      '--set',
      'materials.magnet_42.remanence=1.2 T',
      '--json',
    ]);
    expect(JSON.parse(out)).toMatchObject({ remanence_T: 1.2 });
  });

  test.each([
    ['{ kind: steel, mu_r: 2000 }', /Relative permeability +2000, without saturation/],
    ['{ kind: steel, bh: [[1e-8, 1e-12], [5e6, 8]] }', /H in A\/m/],
    ['{ kind: steel, bh: [[100, 0.1]] }', /H in A\/m/],
    ['{ kind: magnet, remanence: 1e-300 T }', /Remanence/],
    ['{ kind: magnet, demagnetisation: [[0, 1e-320], [-1e-318, -1e-319]] }', /Remanence/],
    ['{ kind: magnet, remanence: 0.01 T }', /H in kA\/m/],
    ['{ kind: magnet, remanence: 1 T, coercivity_intrinsic: 1e-300 A/m }', /Remanence/],
    ['{ kind: magnet, remanence: 2 T, coercivity_intrinsic: 1e7 A/m }', /H in kA\/m/],
    ['{ kind: magnet, remanence: 0.4 T, coercivity_intrinsic: 2 A/m }', /H in kA\/m/],
    ['{ kind: magnet, demagnetisation: [[0, 1.2], [-1e6, -0.5]], recoil: 2 }', /H in kA\/m/],
    ['{ kind: magnet, demagnetisation: [[0, 1.2], [-2, 1.1]] }', /H in kA\/m/],
  ])('%s', async (material, text) => {
    const folder = join(makeFolder(), 'out');
    const file = write('m.yaml', `materials:\n  odd: ${material}\n`);
    const { status, out } = await run(['materials', 'odd', '--file', file, '--out', folder]);
    expect(status).toBe(0);
    expect(out).toMatch(text);
    expect(out + Object.values(readFolder(folder)).join('')).not.toMatch(/NaN|Infinity|undefined/);
  });
});

describe('at fault', () => {
  test.each([
    [['materials', 'n42'], 'NAME: n42 is not a known material; the nearest names are N42, N42M, N42H'],
    [['materials', 'toString'], 'NAME: toString is not a known material'],
    [['materials', '__proto__'], 'NAME: __proto__ is not a known material'],
    [['materials', ''], 'is not a known material'],
    [['materials', 'x'.repeat(100_000)], 'is not a known material'],
    [['materials', '--temperature', '80degC'], '--temperature: goes with one material'],
    [['materials', 'N42', '--temperature', '80'], '--temperature: needs a unit, got 80'],
    [['materials', 'N42', '--temperature', '200degC'], "--temperature: leaves no coercivity by the material's slope"],
    [['materials', 'N42', '--temperature', '-300degC'], '--temperature: is below absolute zero'],
    [['materials', 'N42', '--temperature', '1e9degC'], '--temperature: is above 1000 degC, where no magnet works'],
    [['materials', 'N42', '--set', 'a=1'], '--set: has no file to change'],
    [['materials', 'N42', '--file', 'nowhere.yaml'], 'nowhere.yaml: cannot be read: no such file'],
    [['materials', 'N42', 'N45'], 'too many arguments'],
  ])('%j', async (argv, message) => {
    const { status, out, err } = await run(argv);
    expect([status, out]).toEqual([2, '']);
    expect(err).toContain(message);
    expect(err.length).toBeLessThan(1000);
    expect(err).not.toMatch(acting);
  });

  test('names that act on a terminal or break XML are written out', async () => {
    const name = '\\e]0;owned\\a\\e[2J\\u202e</text><script>"&';
    const file = write(
      'm.yaml',
      `materials:\n  ${JSON.stringify(name).replaceAll('\\\\', '\\')}: { kind: steel, bh: [[200, 0.5], [2000, 1.5]] }\n`,
    );
    const list = await run(['materials', '--file', file]);
    expect(list.status).toBe(0);
    expect(list.out).not.toMatch(acting);
    const json = JSON.parse((await run(['materials', '--file', file, '--json'])).out) as {
      materials: readonly Figures[];
    };
    const folder = join(makeFolder(), 'out');
    const { status, out } = await run(['materials', json.materials[0].name, '--file', file, '--out', folder]);
    expect(status).toBe(0);
    expect(out).not.toMatch(acting);
    const svg = readFolder(folder)['curve.svg'];
    expect(XMLValidator.validate(svg)).toBe(true);
    expect(svg).not.toContain('<script>');
    const unknown = await run(['materials', '\x1b[2J\u202e']);
    expect(unknown.err).not.toMatch(acting);
  });

  test('a folder that cannot be written to is told before anything is printed', async () => {
    const { status, out } = await run(['materials', 'N42', '--out', '/dev/null/x']);
    expect([status, out]).toEqual([2, '']);
  });
});
