import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { InputError, type Probe, type Section, type Setup, solveProbes } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { makeFolder, run } from '../cli/run.js';

/** Input that cannot be right, kind by kind: each is told clearly, at its place, or solved where that is sound. */

const HEAD = `format: gapwright-section/1
depth: 40 mm
materials:
  plate: { kind: steel, mu_r: 2000 }
`;
const BOX = 'outline: { rectangle: { from: [0 mm, 0 mm], to: [100 mm, 100 mm] } }\nbackground: air\n';
const COIL =
  '  - { name: coil, material: copper, current: 5 A, shape: { rectangle: { from: [20 mm, 20 mm], to: [40 mm, 40 mm] } } }\n';
const BACK = COIL.replace('coil', 'back')
  .replace('5 A', '-5 A')
  .replaceAll('[20 mm', '[60 mm')
  .replaceAll('[40 mm', '[80 mm');
const MODEL = 'model: { accuracy: 5 %, max_triangles: 3000 }\n';

interface Told {
  readonly status: number;
  readonly err: string;
  /** Line of the file that the first fault names, and the text from its column on. */
  readonly at: string;
  readonly result: Record<string, unknown>;
}

async function section(text: string): Promise<Told> {
  const path = join(makeFolder(), 'section.yaml');
  writeFileSync(path, text);
  const { status, out, err } = await run(['section', path, '--json', '--quiet']);
  expect(err).not.toMatch(/own fault|NaN,|undefined|\[object/);
  const [, line, column] = /section\.yaml:(\d+):(\d+): /.exec(err) ?? [];
  const at = line === undefined ? '' : text.split('\n')[Number(line) - 1].slice(Number(column) - 1);
  return { status, err, at, result: out === '' ? {} : JSON.parse(out) };
}

const region = (shape: string, more = 'material: plate'): string => `  - { name: bad, ${more}, shape: ${shape} }\n`;
const withRegion = (line: string): string => `${HEAD}${BOX}regions:\n${COIL}${line}${MODEL}`;

/** A file whose fault stands where `at` begins, and says `words`. */
async function expectRefused(text: string, at: string, words: RegExp): Promise<void> {
  const told = await section(text);
  expect(told.err).toMatch(words);
  expect(told.status).toBe(2);
  expect(told.at.slice(0, at.length)).toBe(at);
}

describe('shapes', () => {
  test('an outline that crosses itself', () =>
    expectRefused(
      `${HEAD}outline: { polygon: [[0 mm, 0 mm], [100 mm, 100 mm], [100 mm, 0 mm], [0 mm, 100 mm]] }\nbackground: air\n`,
      '',
      /cross/,
    ));

  test('a region that crosses itself', () =>
    expectRefused(
      withRegion(region('{ polygon: [[50 mm, 50 mm], [90 mm, 90 mm], [90 mm, 50 mm], [50 mm, 90 mm]] }')),
      '{ polygon',
      /cross/,
    ));

  test('a region outside the outline', () =>
    expectRefused(withRegion(region('{ circle: { centre: [300 mm, 50 mm], radius: 5 mm } }')), '{', /outside/));

  test('a sliver without area', () =>
    expectRefused(
      withRegion(region('{ polygon: [[50 mm, 50 mm], [90 mm, 90 mm], [70 mm, 70 mm]] }')),
      '',
      /area|line/,
    ));

  test('a rectangle without width', () =>
    expectRefused(
      withRegion(region('{ rectangle: { from: [50 mm, 50 mm], to: [50 mm, 90 mm] } }')),
      '',
      /width|area|size/,
    ));

  test('corners that are one point', () =>
    expectRefused(
      withRegion(region('{ polygon: [[50 mm, 50 mm], [50 mm, 50 mm], [50 mm, 50 mm], [50 mm, 50 mm]] }')),
      '',
      /corner|point|area/,
    ));

  test('a corner given twice in a row is one corner', async () => {
    const twice = withRegion(region('{ polygon: [[50 mm, 50 mm], [90 mm, 50 mm], [90 mm, 50 mm], [90 mm, 90 mm]] }'));
    const { status, err, at } = await section(twice);
    if (status === 2) {
      expect(err).toMatch(/corner|point/);
      expect(at).not.toBe('');
    } else expect(status).toBe(0);
  });

  test('a polygon of a million corners, in a file', async () => {
    const corners = Array.from({ length: 1_000_000 }, (_, i) => `[${i}m,1m]`).join(',');
    await expectRefused(
      withRegion(region(`{ polygon: [${corners}] }`)),
      'format:',
      /section\.yaml:1:1: has 12\.3 MB, more than the 4 MB that are read; .* fewer corners/,
    );
  }, 30_000);

  test('a polygon of a million corners, through the library', () => {
    const corners = Array.from({ length: 1_000_000 }, (_, i): [number, number] => {
      const angle = (2 * Math.PI * i) / 1_000_000;
      return [0.5 + 0.3 * Math.cos(angle), 0.5 + 0.3 * Math.sin(angle)];
    });
    const faults = refusal(drawing([{ name: 'fine', shape: { kind: 'polygon', corners } }]));
    expect(faults[0]).toMatchObject({ wrong: expect.stringMatching(/1000000|1e\+?6|200000/) });
  });

  test.each(['nm', '1e-9', '1e9'])('coordinates of %s m are solved or refused with the range', async (size) => {
    const scale = size === 'nm' ? '0.001 um' : `${size} m`;
    const [value, unit] = scale.split(' ');
    const to = (share: number): string => `${share * Number(value)} ${unit}`;
    const text = `${HEAD}outline: { rectangle: { from: [${to(0)}, ${to(0)}], to: [${to(1)}, ${to(1)}] } }
background: air
regions:
  - { name: bar, material: copper, current: 1 A, shape: { circle: { centre: [${to(0.5)}, ${to(0.5)}], radius: ${to(0.2)} } } }
${MODEL}`;
    const { status, result } = await section(text);
    expect(status).toBe(0);
    expect(result.energy_J_per_m).toBeGreaterThan(0);
  });

  test('sizes beyond the stated range are refused with it', async () => {
    const far = `${HEAD}outline: { circle: { centre: [0 m, 0 m], radius: 1e-12 m } }\nbackground: air\n`;
    const { status, err, at } = await section(far);
    expect([status, at === '']).toEqual([2, false]);
    expect(err).toMatch(/1e-10/);
  });

  test('arcs that lie almost on each other end soon, solved or refused', async () => {
    for (const shift of [1e-3, 1e-5, 1e-6, 1e-8]) {
      const circle = (x: number, name: string): string =>
        `  - { name: ${name}, material: plate, shape: { circle: { centre: [${x} mm, 50 mm], radius: 20 mm } } }\n`;
      const { status, err, at } = await section(
        `${HEAD}${BOX}regions:\n${circle(50, 'a')}${circle(50 + 100 * shift, 'b')}${MODEL}`,
      );
      expect([0, 2, 3]).toContain(status);
      if (status === 2) expect([err !== '', at !== '']).toEqual([true, true]);
    }
  });
});

describe('conditions', () => {
  const crossing = 'edges:\n  - { side: all, condition: crossing }\n';
  const repeating =
    'edges:\n  - { side: [left, right], condition: repeating }\n  - { side: [bottom, top], condition: repeating }\n';
  const PROBE = 'probes:\n  - { name: flux, flux_through: { from: [30 mm, 30 mm], to: [70 mm, 30 mm] } }\n';

  test.each([
    ['crossing', crossing],
    ['repeating', repeating],
  ])('nothing but %s sides: one value is fixed where the currents return', async (_, edges) => {
    const { status, result } = await section(`${HEAD}${BOX}regions:\n${COIL}${BACK}${edges}${PROBE}${MODEL}`);
    expect(status).toBe(0);
    expect(result.energy_J_per_m).toBeGreaterThan(0);
  });

  test.each([
    ['crossing', crossing],
    ['repeating', repeating],
  ])('nothing but %s sides and a current without return is refused', (_, edges) =>
    expectRefused(`${HEAD}${BOX}regions:\n${COIL}${edges}${MODEL}`, '', /currents sum to/),
  );

  test('a current without return in a repeating section, top and bottom crossed', () =>
    expectRefused(
      `${HEAD}${BOX}regions:\n${COIL}edges:\n  - { side: [left, right], condition: repeating }\n  - { side: [bottom, top], condition: crossing }\n${MODEL}`,
      '',
      /currents sum to/,
    ));

  test('a current in a region that later regions cover', () =>
    expectRefused(
      `${HEAD}${BOX}regions:\n${COIL}${region('{ rectangle: { from: [10 mm, 10 mm], to: [90 mm, 90 mm] } }')}${MODEL}`,
      '5 A',
      /cover/,
    ));

  test('sides that hold different values where they meet', () =>
    expectRefused(
      `${HEAD}${BOX}regions:\n${COIL}edges:\n  - { side: left, condition: applied, field: [1 T, 0 T] }\n  - { side: top, condition: closed }\n`,
      'left',
      /holds A/,
    ));

  test('one side with two conditions', () =>
    expectRefused(
      `${HEAD}${BOX}edges:\n  - { side: left, condition: closed }\n  - { side: left, condition: crossing }\n`,
      'left',
      /has a condition already/,
    ));

  test('sides that repeat but do not match', () =>
    expectRefused(
      `${HEAD}${BOX}regions:\n${COIL}edges:\n  - { side: [left, top], condition: repeating }\n`,
      '[left',
      /equal length and direction/,
    ));
});

describe('numbers', () => {
  test.each(['NaN mm', '.nan', '.inf', '1e999 mm', '-5 mm'])('a radius of %s', (radius) =>
    expectRefused(
      withRegion(region(`{ circle: { centre: [50 mm, 50 mm], radius: ${radius} } }`)),
      radius.slice(0, 3),
      /radius/,
    ),
  );

  test.each([
    ['a negative mu_r', 'mu_r: -3', '-3', /at least 1/],
    ['a mu_r that is no number', 'mu_r: .nan', '.nan', /mu_r/],
    ['a curve whose B falls', 'bh: [[0, 0], [100, 1], [200, 0.8]]', '', /B|rise/],
    ['a curve whose H falls', 'bh: [[0, 0], [100, 1], [50, 1.2]]', '', /H|rise/],
    ['a stacking factor above 1', 'mu_r: 100, stacking_factor: 1.4', '1.4', /stacking_factor/],
  ])('%s', (_, steel, at, words) =>
    expectRefused(
      `${HEAD}  odd: { kind: steel, ${steel} }\n${BOX}regions:\n${region('{ circle: { centre: [50 mm, 50 mm], radius: 9 mm } }', 'material: odd')}`,
      at,
      words,
    ),
  );

  test('an accuracy beyond reach stops at a limit, and what there is is told', async () => {
    const { status, err, result } = await section(withRegion('').replace('5 %', '1e-15'));
    expect(status).toBe(3);
    expect(err).toMatch(/did not reach the wanted accuracy/);
    expect(result.energy_J_per_m).toBeGreaterThan(0);
    expect(result.accurate).toBe(false);
  }, 30_000);
});

const drawing = (regions: Section['regions']): Section => ({
  outline: { kind: 'rectangle', from: [0, 0], to: [1, 1] },
  background: 'air',
  regions,
});

/** The faults for which the library refuses to solve. */
function refusal(section: Section, setup: Partial<Setup> = {}, probes: readonly Probe[] = []): InputError['faults'] {
  const materials = Object.fromEntries(
    ['air', ...section.regions.map(({ name }) => name)].map((name) => [name, { kind: 'linear', muR: 1 }] as const),
  );
  try {
    solveProbes(section, { materials, ...setup }, probes, { accuracy: 0.1, maxMeshes: 2, maxTriangles: 3000 });
  } catch (error) {
    if (error instanceof InputError) return error.faults;
    throw error;
  }
  return [];
}

describe('through the library', () => {
  const ball: Section['regions'][number] = { name: 'ball', shape: { kind: 'circle', centre: [0.5, 0.5], radius: 0.2 } };
  const round = (radius: number, x = 0.5): Section =>
    drawing([{ name: 'ball', shape: { kind: 'circle', centre: [x, 0.5], radius } }]);

  test.each([Number.NaN, Infinity, -1, 0])('a radius of %d is refused by key', (radius) => {
    expect(refusal(round(radius))[0]?.key).toMatch(/^regions\.ball/);
  });

  test.each([Number.NaN, Infinity, 1e300])('a centre at %d is refused by key', (x) => {
    expect(refusal(round(0.1, x))[0]?.key).toMatch(/^regions\.ball/);
  });

  test.each([Number.NaN, -5, 0, Infinity])('mu_r of %d is refused', (muR) => {
    const materials = { air: { kind: 'linear', muR: 1 }, ball: { kind: 'linear', muR } } as const;
    expect(refusal(drawing([ball]), { materials })).not.toEqual([]);
  });

  test.each([Number.NaN, Infinity])('a current of %d is refused', (current) => {
    expect(refusal(drawing([ball]), { current: { ball: current } })).not.toEqual([]);
    expect(refusal(drawing([ball]), { currentDensity: { ball: current } })).not.toEqual([]);
  });

  test('an applied field that is no number is refused', () => {
    expect(refusal(drawing([ball]), { edges: { left: { kind: 'applied', field: [Number.NaN, 0] } } })).not.toEqual([]);
  });
});
