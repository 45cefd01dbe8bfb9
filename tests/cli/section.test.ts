import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { SectionEngine } from '@gapwright/cli';
import type { ProbeResult, SectionResult } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { sectionEngine } from '../../packages/cli/src/section-engine.js';
import { MU0 } from '../../packages/fem-core/src/base/constants.js';
import { makeFolder, readFolder, run } from './run.js';

/** A bar of round copper in a round steel tube, off its axis, so that a force draws it to the steel. */
const BAR = `format: gapwright-section/1
name: Bar in a tube
depth: 50 mm
materials: { tube_steel: { kind: steel, mu_r: 500 } }
outline: { circle: { centre: [0 mm, 0 mm], radius: 40 mm } }
background: air
regions:
  - { name: tube, material: tube_steel, shape: { circle: { centre: [0 mm, 0 mm], radius: 30 mm } } }
  - { name: space, material: air, shape: { circle: { centre: [0 mm, 0 mm], radius: 20 mm } } }
  - { name: bar, material: copper, shape: { circle: { centre: [0 mm, 4 mm], radius: 5 mm } }, turns: 4, current: 25 A }
probes:
  - { name: near, point: [10 mm, 0 mm] }
  - { name: outwards, line: { from: [0 mm, 0 mm], to: [60 mm, 0 mm], points: 13 } }
  - { name: hold, force_on: bar }
  - { name: linkage, linkage_of: bar }
  - { name: gap flux, flux_through: { from: [5 mm, 0 mm], to: [20 mm, 0 mm] } }
  - { name: steel, mean_over: tube }
model: { accuracy: 1 % }
`;

function writeSection(text = BAR): string {
  const path = join(makeFolder(), 'section.yaml');
  writeFileSync(path, text);
  return path;
}

/** The bar on the axis, where Ampere's law tells all and no force is left. */
const COAXIAL = BAR.replace('[0 mm, 4 mm]', '[0 mm, 0 mm]').replace(/ {2}- \{ name: hold.*\n/, '');

async function solveToJson(text: string, ...more: readonly string[]): Promise<SectionResult> {
  const { out, status } = await run(['section', writeSection(text), '--json', ...more]);
  expect(status).toBe(0);
  return JSON.parse(out);
}

const current = 100;

describe('gapwright section', () => {
  test('--json holds the keys that are promised, each kind of probe its own', async () => {
    const result = await solveToJson(BAR);
    expect(result).toMatchObject({ format: 'gapwright-section-result/1', name: 'Bar in a tube', depth_m: 0.05 });
    const promised = ['energy_J_per_m', 'coenergy_J_per_m', 'mesh', 'newton_steps', 'rel_err', 'probes'];
    for (const key of promised) expect(result).toHaveProperty(key);
    expect(Object.keys(result.mesh)).toEqual(['nodes', 'triangles', 'min_angle_deg']);
    const at = ['A_Wb_per_m', 'Bx_T', 'By_T', 'Hx_A_per_m', 'Hy_A_per_m'];
    const keys: Record<ProbeResult['kind'], readonly string[]> = {
      point: at,
      line: [...at, 's_m'],
      force_on: ['Fx_N_per_m', 'Fy_N_per_m', 'torque_Nm_per_m'],
      linkage_of: ['linkage_Wb_per_m'],
      flux_through: ['flux_Wb_per_m'],
      mean_over: ['Bx_T', 'By_T', 'B_T'],
    };
    expect(result.probes.map(({ kind }) => kind)).toEqual(Object.keys(keys));
    for (const probe of result.probes) {
      for (const key of keys[probe.kind]) {
        expect(probe).toHaveProperty(key);
        if (!/^(s_m|H)/.test(key)) expect(probe).toHaveProperty(`${key}_rel_err`);
      }
    }
  });

  test('the figures are those of Ampere: H = I / (2 pi r), flux mu0 I / (2 pi) ln(r2/r1), and true within their errors', async () => {
    const { probes } = await solveToJson(COAXIAL);
    const probe = <K extends ProbeResult['kind']>(kind: K): ProbeResult & { readonly kind: K } => {
      const found = probes.find((one): one is ProbeResult & { readonly kind: K } => one.kind === kind);
      if (found === undefined) throw new Error(`no ${kind}`);
      return found;
    };
    const near = probe('point');
    const h = current / (2 * Math.PI * 0.01);
    expect(Math.abs(near.Hy_A_per_m / h - 1)).toBeLessThan(0.02);
    expect(near.By_T / near.Hy_A_per_m / MU0).toBeCloseTo(1, 9);
    const flux = probe('flux_through');
    // By along +x is positive: with A(from) - A(to) the flux counts along +y.
    // A turn of the bar links more than the flux in the air round it: there is that in the steel and in the bar.
    const expected = ((MU0 * current) / (2 * Math.PI)) * Math.log(4);
    expect(Math.abs(flux.flux_Wb_per_m / expected - 1)).toBeLessThan(Math.max(1e-9, flux.flux_Wb_per_m_rel_err));
    expect(flux.flux_Wb).toBeCloseTo(0.05 * flux.flux_Wb_per_m, 15);
    const linkage = probe('linkage_of');
    expect(linkage.linkage_Wb_per_m).toBeGreaterThan(4 * flux.flux_Wb_per_m);
    const line = probe('line');
    expect(line.s_m).toEqual(line.x_m);
    // Past the rim at 40 mm there is no field: null, not a number made up.
    expect(line.By_T.slice(9)).toEqual([null, null, null, null]);
  });

  test('prints a sheet of at most 100 characters a line, warnings apart on standard error', async () => {
    const { status, out, err } = await run(['section', writeSection(BAR.replace('Bar in a tube', 'n'.repeat(150)))]);
    expect(status).toBe(0);
    for (const heading of ['Section', 'Solution', 'Probes', 'Line: outwards']) expect(out).toContain(`\n${heading}\n`);
    expect(out).toMatch(/Energy +[\d.]+ mJ\/m +± [\d.]+ %/);
    expect(out).toMatch(/gap flux +flux [\d.]+ uWb\/m +± [\d.]+ %/);
    expect(out).not.toMatch(/NaN|undefined|Infinity/);
    expect(Math.max(...out.split('\n').map((line) => line.length))).toBeLessThanOrEqual(100);
    expect(err).toMatch(/^warning: \S+section\.yaml:13:29: probes\.1\.line: reaches beyond the outline/);
    expect(err).toMatch(/\nsolved in [\d.]+ s, all done in [\d.]+ s\n$/);
    expect(err).not.toContain('triangles');
  });

  test('shows each mesh on a terminal, unless it is to be quiet', async () => {
    const { err } = await run(['section', writeSection()], { terminal: true });
    expect(err).toMatch(/^mesh 1: \d+ triangles, error [\d.]+ %\n/);
    expect((await run(['section', writeSection(), '--quiet'], { terminal: true })).err).toBe('');
  });

  test('--set says values anew, and the digest tells', async () => {
    const twice = await solveToJson(
      COAXIAL,
      '--set',
      'regions.2.current=50 A',
      '--set',
      'probes.1.line.to=[40 mm, 0 mm]',
    );
    const once = await solveToJson(COAXIAL);
    expect(twice.energy_J_per_m / once.energy_J_per_m).toBeCloseTo(4, 9);
    expect([once.warnings.length, twice.warnings.length]).toEqual([1, 0]);
    expect(twice.input_sha256).not.toBe(once.input_sha256);
  });
});

describe('--out', () => {
  test('writes results, lines and the picture, and VTK XML on request; the same bytes each time', async () => {
    const file = writeSection();
    const folders = [join(makeFolder(), 'new', 'one'), makeFolder()];
    const runs = [];
    for (const folder of folders) runs.push(await run(['section', file, '--json', '--vtu', '--out', folder]));
    const [first, second] = folders.map(readFolder);
    expect(Object.keys(first)).toEqual(['lines.csv', 'results.json', 'section.svg', 'section.vtu']);
    expect(second).toEqual(first);
    expect(first['results.json']).toBe(runs[0].out);
    expect(first['section.svg']).toMatch(/^<svg[\s\S]*Bar in a tube[\s\S]*<\/svg>\n$/);
    expect(first['section.svg']).toContain('|B| in T');
    expect(first['section.vtu']).toContain('UnstructuredGrid');
    expect(runs[0].err).toContain('4 files written to ');
  });

  test('lines.csv has a row a point, names quoted where they must be, nothing where there is no field', async () => {
    const folder = makeFolder();
    const file = writeSection(BAR.replace('name: outwards', `name: 'out, "wards"'`));
    await run(['section', file, '--out', folder]);
    const rows = readFolder(folder)['lines.csv'].split('\n');
    expect(rows[0]).toBe('line,s_m,x_m,y_m,A_Wb_per_m,Bx_T,By_T,B_T,Hx_A_per_m,Hy_A_per_m');
    expect(rows).toHaveLength(15);
    expect(rows[2]).toMatch(/^"out, ""wards""",0\.005,0\.005,0,[\d.e-]+,/);
    expect(rows[13]).toBe('"out, ""wards""",0.06,0.06,0,,,,,,');
  });

  test('unbounded space is drawn as far as its circle, without the image of what lies beyond', async () => {
    const folder = makeFolder();
    const open = COAXIAL.replace('probes:', 'edges: [{ side: all, condition: open }]\nprobes:').replace(
      /model:.*\n/,
      '',
    );
    const argv = ['section', writeSection(open), '--json', '--vtu', '--set', 'model.accuracy=3 %', '--out', folder];
    const { status, out } = await run(argv);
    expect(status).toBe(0);
    const result: SectionResult = JSON.parse(out);
    const line = result.probes[1];
    if (line.kind !== 'line') throw new Error('the second probe is the line');
    expect(Math.abs(line.By_T[7] / ((MU0 * current) / (2 * Math.PI * 0.035)) - 1)).toBeLessThan(0.03);
    expect(result.warnings.map(({ text }) => text)).toEqual([expect.stringContaining('the currents sum to 100 A')]);
    const files = readFolder(folder);
    const cells = Number(/NumberOfCells="(\d+)"/.exec(files['section.vtu'])?.[1]);
    expect(cells).toBeGreaterThan(100);
    expect(cells).toBeLessThan(result.mesh.triangles);
    const points = /<Points>[\s\S]*?>([^<]+)<\/DataArray>/
      .exec(files['section.vtu'])?.[1]
      .trim()
      .split(/\s+/)
      .map(Number);
    expect(Math.max(...(points ?? [9]).map(Math.abs))).toBeLessThan(0.0401);
  });

  test('without lines there is no lines.csv; VTK XML needs a folder', async () => {
    const folder = makeFolder();
    const file = writeSection(BAR.replace(/ {2}- \{ name: outwards.*\n/, ''));
    await run(['section', file, '--out', folder]);
    expect(Object.keys(readFolder(folder))).toEqual(['results.json', 'section.svg']);
    const { status, err } = await run(['section', file, '--vtu']);
    expect([status, err]).toEqual([2, '--vtu: has nowhere to write to; name a folder with --out DIR\n']);
  });

  test('is refused before solving where a folder is in the way of a file', async () => {
    const folder = makeFolder();
    mkdirSync(join(folder, 'section.svg'));
    const engine: SectionEngine = { ...sectionEngine, solve: () => Promise.reject(new Error('solved')) };
    const { status, err } = await run(['section', writeSection(), '--out', folder], { sections: engine });
    expect(status).toBe(2);
    expect(err).toMatch(/is a folder where a file is to be written/);
  });
});

describe('exit statuses', () => {
  const withAnswer = (change: object, report: object = {}): SectionEngine => ({
    ...sectionEngine,
    solve: async (problem, options) => {
      const answer = await sectionEngine.solve(problem, options);
      const field = { ...answer.field, report: { ...answer.field.report, ...report } };
      return { ...answer, ...change, field };
    },
  });

  test('3 where the accuracy was not met; what there is, is printed and written', async () => {
    const folder = makeFolder();
    const argv = ['section', writeSection(), '--set', 'model={accuracy: 1e-7 %, max_meshes: 2}', '--out', folder];
    const { status, out, err } = await run(argv);
    expect(status).toBe(3);
    expect(out).toContain('\nProbes\n');
    expect(err).toMatch(/not reached: the section did not reach the wanted accuracy of 1\.0e-7 %, but [\d.]+ %/);
    expect(Object.keys(readFolder(folder))).toContain('section.svg');
  });

  test('3 where it did not converge, errors and figures that are not numbers as null', async () => {
    const sections = withAnswer({ accurate: false, energy: Number.NaN, energyError: Infinity }, { converged: false });
    const { status, out, err } = await run(['section', writeSection(), '--json'], { sections });
    expect(status).toBe(3);
    expect(JSON.parse(out)).toMatchObject({ converged: false, energy_J_per_m: null, energy_J_per_m_rel_err: null });
    expect(err).toMatch(/not reached: the section did not converge in \d+ Newton steps/);
    expect((await run(['section', writeSection()], { sections })).out).not.toMatch(/NaN|Infinity/);
  });

  test('2 with the places of all faults where the file is wrong; nothing else is said or written', async () => {
    const file = writeSection(BAR.replace('radius: 20 mm', 'radius: 20').replace('linkage_of: bar', 'linkage_of: bra'));
    const folder = join(makeFolder(), 'out');
    const { status, out, err } = await run(['section', file, '--out', folder]);
    expect([status, out]).toEqual([2, '']);
    expect(err.split('\n').map((line) => line.replace(file, 'FILE').split('; ')[0])).toEqual([
      'FILE:9:84: regions.1.shape.circle.radius: needs a unit, got 20',
      'FILE:15:34: probes.3.linkage_of: bra is no region',
      '',
    ]);
    expect(() => readFolder(folder)).toThrow(/ENOENT/);
    expect((await run(['check', file])).err).toBe(err);
  });

  test.each([
    [
      'a region outside',
      ['[0 mm, 0 mm], radius: 20 mm', '[90 mm, 0 mm], radius: 20 mm'],
      ':9:42: regions.1.shape: lies outside',
    ],
    ['a force on what touches steel', ['force_on: bar', 'force_on: space'], ': probes.2.force_on: '],
    ['a region that is covered', ['mean_over: tube', 'mean_over: hidden'], ': probes.5: '],
  ])('2 for what only the solver sees, told in the file: %s', async (_, [from, to], words) => {
    const hidden =
      '  - { name: hidden, material: air, shape: { circle: { centre: [0 mm, 4 mm], radius: 3 mm } } }\n  - { name: bar,';
    const file = writeSection(BAR.replace(from, to).replace('  - { name: bar,', hidden));
    const { status, out, err } = await run(['section', file]);
    expect([status, out]).toEqual([2, '']);
    expect(err).toContain(`${file}:`);
    expect(err).toContain(words);
    expect(err.trimEnd()).not.toContain('\n');
  });

  test('130 when interrupted, with nothing written or said of results', async () => {
    const folder = join(makeFolder(), 'out');
    const interruption = new AbortController();
    const sections: SectionEngine = {
      ...sectionEngine,
      solve: (problem, options) => sectionEngine.solve(problem, { ...options, onMesh: () => interruption.abort() }),
    };
    const argv = ['section', writeSection(), '--out', folder];
    const { status, out, err } = await run(argv, { sections, signal: interruption.signal });
    expect([status, out]).toEqual([130, '']);
    expect(err).toContain('interrupted; nothing was written');
    expect(() => readFolder(folder)).toThrow(/ENOENT/);
  });
});

describe('gapwright check', () => {
  test('judges a section file by its format, without solving it', async () => {
    const file = writeSection();
    const sections: SectionEngine = { ...sectionEngine, solve: () => Promise.reject(new Error('solved')) };
    const { status, out, err } = await run(['check', file], { sections });
    expect([status, out]).toEqual([0, `${file}: sound, 1 warning: Bar in a tube, 3 regions, 6 probes, depth 50 mm\n`]);
    expect(err).toMatch(/^warning: \S+section\.yaml:13:29: probes\.1\.line: /);
    expect(JSON.parse((await run(['check', file, '--json'], { sections })).out)).toMatchObject({
      format: 'gapwright-check/1',
      section: 'Bar in a tube',
    });
  });

  /** A magnet under the bar, all of it, and no source but that. */
  const hidden = BAR.replace(
    '  - { name: bar,',
    '  - { name: lost, material: N42, magnetised: 0 deg, shape: { circle: { centre: [0 mm, 4 mm], radius: 2 mm } } }\n  - { name: bar,',
  ).replace(', current: 25 A', '');

  test('doubts of the drawing are warnings with their places, the same when it is solved', async () => {
    const file = writeSection(hidden);
    const words = [
      /^warning: \S+section\.yaml:14:29: probes\.1\.line: reaches beyond/,
      /^warning: \S+section\.yaml:10:5: regions\.2: later regions cover all of it: this magnet does nothing; /,
      /^warning: \S+section\.yaml:8:3: regions: nothing makes a field: /,
    ];
    for (const command of ['check', 'section']) {
      const { status, err } = await run([command, file]);
      expect(status).toBe(0);
      words.forEach((word, i) => {
        expect(err.split('\n')[i]).toMatch(word);
      });
      const { out } = await run([command, file, '--json', '--quiet']);
      const { warnings } = JSON.parse(out);
      expect(warnings.map(({ key }: { readonly key: string }) => key)).toEqual([
        'probes.1.line',
        'regions.2',
        'regions',
      ]);
      expect(out).not.toContain('section.yaml'); // results do not depend on where the file lies
    }
  });

  test('refuses what section would, in the same words, before it solves', async () => {
    const onSteel = BAR.replace('force_on: bar', 'force_on: [space, bar]');
    const huge = `${BAR}max_edge: 0.02 mm\n`;
    const fine = BAR.replace('probes:', 'size_at: [{ point: [0 mm, 4 mm], max_edge: 1 nm }]\nprobes:').replace(
      '1 nm',
      '0.001 um',
    );
    const many = BAR.replace(
      'probes:',
      `size_at: [${Array.from({ length: 400 }, (_, i) => `{ point: [${(i % 20) - 10} mm, ${Math.floor(i / 20) - 10} mm], max_edge: 0.001 um }`).join(', ')}]\nprobes:`,
    );
    for (const [text, words] of [
      [onSteel, /section\.yaml:14:29: probes\.2\.force_on: touches another body/],
      [huge, /section\.yaml:6:13: background: the mesh would pass 400000 triangles, .* mm; /],
      [many, /section\.yaml:11:\d+: size_at\.\d+\.max_edge: the mesh would pass 400000 triangles, .* 0\.001 um near /],
    ] as const) {
      const file = writeSection(text);
      const check = await run(['check', file]);
      expect([check.status, check.out]).toEqual([2, '']);
      expect(check.err).toMatch(words);
      expect((await run(['section', file])).err).toBe(check.err);
    }
    expect((await run(['check', writeSection(fine)])).status).toBe(0); // one point, however fine, costs little
  });

  test('linear elements are told on the sheet', async () => {
    const { out } = await run([
      'section',
      writeSection(),
      '--set',
      'model.elements=linear',
      '--set',
      'model.accuracy=20 %',
    ]);
    expect(out).toMatch(/Elements +linear/);
    expect((await run(['section', writeSection()])).out).not.toContain('Elements');
  });

  test('each command sends the file of the other to it', async () => {
    expect((await run(['solve', writeSection()])).err).toMatch(
      /:1:9: format: says that this is a section file; use gapwright section\n$/,
    );
    const machine = writeSection('format: gapwright-machine/1\n');
    expect((await run(['section', machine])).err).toMatch(
      /:1:9: format: says that this is a machine file; use gapwright solve\n$/,
    );
  });

  test('finds what the drawing alone shows', async () => {
    const file = writeSection(BAR.replace('[0 mm, 0 mm], radius: 20 mm', '[90 mm, 0 mm], radius: 20 mm'));
    const { status, err } = await run(['check', file]);
    expect(status).toBe(2);
    expect(err).toMatch(/:9:42: regions\.1\.shape: lies outside the outline/);
  });
});
