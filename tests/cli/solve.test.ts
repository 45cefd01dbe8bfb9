import { existsSync, mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Engine } from '@gapwright/cli';
import type { MachineResult } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { machineEngine } from '../../packages/cli/src/solve-machine.js';
import { hutHydro, makeFolder, readFolder, run, writeMachine } from './run.js';

const quick = ['--set', 'model.radii=1'];
/** With one warning. */
const warned = ['--set', 'model.end_correction=off'];

async function solveToJson(...more: readonly string[]): Promise<MachineResult> {
  const { out, status } = await run(['solve', hutHydro, '--json', ...more]);
  expect(status).toBe(0);
  return JSON.parse(out);
}

describe('gapwright solve', () => {
  test('prints the datasheet of the hut hydro set, warnings apart on standard error', async () => {
    const { status, out, err } = await run(['solve', hutHydro, ...warned]);
    expect(status).toBe(0);
    expect(out).toMatch(/^Hut hydro, 106 V link\n/);
    for (const heading of [
      'Machine',
      'Slices',
      'EMF with no load',
      'Winding',
      'Merit',
      'Pull and masses',
      'Cautions',
    ]) {
      expect(out).toContain(`\n${heading}\n`);
    }
    expect(out.indexOf('\nCautions\n')).toBeGreaterThan(out.indexOf('\nPull and masses\n'));
    expect(out).toMatch(/Phase, rms +[\d.]+ V +± [\d.]+ %/);
    expect(err).toMatch(/^warning: model\.end_correction: /m);
    expect(err).toMatch(/^3 slices solved in [\d.]+ s/m);
  });

  test('keeps every line of the datasheet within 100 characters, even where the name is longer', async () => {
    const file = writeMachine(['Hut hydro, 106 V link', 'n'.repeat(200)]);
    const { out, status } = await run(['solve', file, ...quick]);
    expect(status).toBe(0);
    expect(Math.max(...out.split('\n').map((line) => line.length))).toBeLessThanOrEqual(100);
  });

  test('with --json prints the result and nothing else on standard output', async () => {
    const result = await solveToJson(...quick);
    expect(result.format).toBe('gapwright-result/1');
    expect(result.machine).toBe('Hut hydro, 106 V link');
    expect(result.slices).toHaveLength(1);
  });

  test('scales the EMF with the speed that --set gives, exactly', async () => {
    const [slow, fast] = [await solveToJson(...quick), await solveToJson(...quick, '--set', 'operation.speed=840 rpm')];
    expect(fast.emf.phase.rms_V / slow.emf.phase.rms_V).toBeCloseTo(2, 12);
    expect(fast.emf.frequency_Hz / slow.emf.frequency_Hz).toBeCloseTo(2, 12);
  });

  test('takes an input digest over file, side files and settings: it changes with each', async () => {
    const plain = await solveToJson(...quick);
    expect((await solveToJson(...quick)).input_sha256).toBe(plain.input_sha256);
    const others = [
      await solveToJson('--set', 'model.radii= 1'),
      await solveToJson(...quick, '--set', 'rotor.gap=19.0mm'),
    ];
    expect(others[0].input_sha256).toBe(plain.input_sha256);
    expect(others[1].input_sha256).not.toBe(plain.input_sha256);
    const table = (b: string) => `H,B\n0,0\n500,1.2\n2000,${b}\n20000,1.9\n`;
    const digests = [];
    for (const b of ['1.5', '1.6']) {
      const file = writeMachine(
        [/^materials:.*$/m, 'materials:\n  plate: { kind: steel, bh_file: plate.csv, density: 7850 kg/m3 }'],
        [/AISI 1008/g, 'plate'],
      );
      writeFileSync(join(file, '..', 'plate.csv'), table(b));
      const { out, status, err } = await run(['solve', file, '--json', ...quick]);
      expect([status, err.match(/^(?!warning|1 slice).*$/m)?.[0]]).toEqual([0, '']);
      digests.push(JSON.parse(out).input_sha256);
    }
    expect(digests[0]).not.toBe(digests[1]);
  });

  test('says nothing on standard error with --quiet', async () => {
    expect((await run(['solve', hutHydro, '--quiet', ...quick])).err).toBe('');
  });

  test('shows progress only to a terminal, and there no warning twice', async () => {
    const piped = await run(['solve', hutHydro, ...quick]);
    expect(piped.err).not.toContain('slice 1 of 1');
    const shown = await run(['solve', hutHydro, ...quick, ...warned], { terminal: true });
    expect(shown.err).toMatch(/^slice 1 of 1, radius 128 mm: \d+ triangles/m);
    expect(shown.err).not.toContain('warning:');
    expect(shown.out).toContain('model.end_correction');
  });

  test('colours a terminal only, and neither against NO_COLOR nor --no-colour', async () => {
    const colour = '\x1b[';
    const plain = ['solve', hutHydro, ...quick];
    expect((await run(plain, { terminal: true })).out).toContain(colour);
    expect((await run(plain)).out).not.toContain(colour);
    expect((await run(plain, { terminal: true, env: { NO_COLOR: '1' } })).out).not.toContain(colour);
    expect((await run(plain, { terminal: true, env: { NO_COLOR: '' } })).out).toContain(colour);
    expect((await run([...plain, '--no-colour'], { terminal: true })).out).not.toContain(colour);
  });
});

describe('gapwright solve --out', () => {
  test('writes the same bytes each time, whatever --workers says', async () => {
    const [a, b] = [join(makeFolder(), 'new', 'a'), join(makeFolder(), 'b')];
    const first = await run(['solve', hutHydro, '--out', a, '--vtu', '--json']);
    expect(first.status).toBe(0);
    expect((await run(['solve', hutHydro, '--out', b, '--vtu', '--workers', '4'])).status).toBe(0);
    const files = readFolder(a);
    expect(Object.keys(files)).toEqual([
      'report.html',
      'results.json',
      'slice-1-100.5mm.svg',
      'slice-1-100.5mm.vtu',
      'slice-2-128mm.svg',
      'slice-2-128mm.vtu',
      'slice-3-155.5mm.svg',
      'slice-3-155.5mm.vtu',
      'waveforms.csv',
    ]);
    expect(readFolder(b)).toEqual(files);
    expect(files['results.json']).toBe(first.out);
    for (const [name, content] of Object.entries(files)) {
      if (name.endsWith('.svg')) expect(content.length).toBeLessThan(300_000);
    }
  });

  test('writes waveforms that are those of the result', async () => {
    const folder = makeFolder();
    await run(['solve', hutHydro, '--out', folder, ...quick]);
    const files = readFolder(folder);
    const { emf }: MachineResult = JSON.parse(files['results.json']);
    const [head, ...lines] = files['waveforms.csv'].trimEnd().split('\n');
    expect(head).toBe('electrical_deg,phase_V,line_V,rectified_V');
    expect(lines).toHaveLength(emf.waveform.electrical_deg.length);
    const peak = Math.max(...lines.map((line) => Math.abs(Number(line.split(',')[1]))));
    expect(peak / emf.phase.peak_V).toBeGreaterThan(0.995);
    expect(peak / emf.phase.peak_V).toBeLessThan(1 + 1e-6);
  });

  test.each([
    ['a file in its way', (folder: string) => writeFileSync(join(folder, 'out'), ''), 'out'],
    ['a file above it', (folder: string) => writeFileSync(join(folder, 'file'), ''), join('file', 'out')],
    [
      'a folder where a file belongs',
      (folder: string) => mkdirSync(join(folder, 'out', 'report.html'), { recursive: true }),
      'out',
    ],
  ])('is refused before solving when there is %s', async (_, prepare, name) => {
    const folder = makeFolder();
    prepare(folder);
    let solved = false;
    const engine: Engine = {
      ...machineEngine,
      solve: (machine, options) => {
        solved = true;
        return machineEngine.solve(machine, options);
      },
    };
    const { status, out, err } = await run(['solve', hutHydro, '--out', join(folder, name)], { engine });
    expect([status, out, solved]).toEqual([2, '', false]);
    expect(err).toMatch(/--out\n$/);
  });

  test('does not overwrite the machine file, by whatever path it is named', async () => {
    const folder = makeFolder();
    const file = join(folder, 'results.json');
    writeFileSync(file, JSON.stringify({ not: 'a machine' }));
    const engine: Engine = {
      ...machineEngine,
      read: () => machineEngine.read(hutHydroText, { file: 'x', settings: [], readBeside: () => '' }),
    };
    const { status, err } = await run(['solve', file, '--out', join(folder, '.', 'sub', '..')], { engine });
    expect(status).toBe(2);
    expect(err).toContain('would be overwritten');
    expect(readFolder(folder)).toEqual({ 'results.json': '{"not":"a machine"}' });
  });
});

const hutHydroText = readFolder(join(hutHydro, '..'))['hut-hydro.yaml'];

describe('exit statuses', () => {
  const withAnswers = (change: { readonly converged?: boolean; readonly accurate?: boolean }): Engine => ({
    ...machineEngine,
    solve: async (machine, options) => {
      const solved = await machineEngine.solve(machine, options);
      return { ...solved, answers: solved.answers.map((answer) => ({ ...answer, ...change })) };
    },
  });

  test('3 when a slice did not converge, with everything there is printed and written all the same', async () => {
    const folder = makeFolder();
    const engine = withAnswers({ converged: false, accurate: false });
    const { status, out, err } = await run(['solve', hutHydro, '--out', folder, '--quiet', ...quick], { engine });
    expect(status).toBe(3);
    expect(out).toContain('EMF with no load');
    expect(err).toMatch(/^not reached: the slice at radius 128 mm did not converge in \d+ Newton steps/);
    expect(Object.keys(readFolder(folder))).toContain('report.html');
  });

  test('3 when the accuracy was not met', async () => {
    const { status, err } = await run(['solve', hutHydro, '--quiet', ...quick], {
      engine: withAnswers({ accurate: false }),
    });
    expect(status).toBe(3);
    expect(err).toContain('did not reach the wanted accuracy of 0.20 %');
  });

  test('1 for a fault of its own, on one line; the stack only on request; nothing written', async () => {
    const folder = makeFolder();
    const engine: Engine = {
      ...machineEngine,
      solve: () => Promise.reject(new Error('an invariant\nis broken')),
    };
    const argv = ['solve', hutHydro, '--quiet', '--out', folder];
    const { status, out, err } = await run(argv, { engine });
    expect([status, out]).toEqual([1, '']);
    expect(err).toBe("a fault of Gapwright's own: an invariant is broken, please report\n");
    expect(readFolder(folder)).toEqual({});
    const traced = await run(argv, { engine, env: { GAPWRIGHT_TRACE: '1' } });
    expect(traced.err).toMatch(/\n +at /);
  });

  test('130 when interrupted, with nothing written', async () => {
    const parent = makeFolder();
    const interruption = new AbortController();
    const engine: Engine = {
      ...machineEngine,
      solve: (machine, options) =>
        machineEngine.solve(machine, {
          ...options,
          onSlice: (_, index) => {
            if (index === 1) interruption.abort();
          },
        }),
    };
    const out = join(parent, 'out');
    const result = await run(['solve', hutHydro, '--out', out], { engine, signal: interruption.signal });
    expect([result.status, result.out]).toEqual([130, '']);
    expect(existsSync(out)).toBe(false);
    expect(readFolder(parent)).toEqual({});
  });
});
