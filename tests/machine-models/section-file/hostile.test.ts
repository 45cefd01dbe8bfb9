import fc from 'fast-check';
import { expect, test } from 'vitest';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { readSection } from '../../../packages/machine-models/src/section-file/read-section.js';
import { scrapped } from '../../helpers/scraps.js';
import { YOKE } from './yoke.js';

/** Reads the text; anything but a section or an InputError fails the test. Returns the faults. */
function readAnything(text: string): InputError | undefined {
  try {
    const { problem } = readSection(text, { file: 'yoke.yaml' });
    const finite = JSON.stringify(problem, (_, v) => (typeof v === 'number' && !Number.isFinite(v) ? 'BAD' : v));
    expect(finite).not.toContain('"BAD"');
    return undefined;
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return error as InputError;
  }
}

const VALUES = ['-1', '1e308', '.nan', '.inf', 'true', 'null', ' mm', ' deg', ' A'];

test('the yoke with random scraps in random places is a section or an InputError with places', () => {
  fc.assert(
    fc.property(scrapped(YOKE, VALUES), (text) => {
      const error = readAnything(text);
      for (const fault of error?.faults ?? []) expect(fault.at?.line).toBeGreaterThanOrEqual(1);
      for (const line of error?.message.split('\n') ?? []) expect(line).not.toMatch(/\p{Cc}|NaN|undefined|\[object/u);
    }),
    { seed: 11, numRuns: 300 },
  );
});

test('any word of the file in place of any other is a section or an InputError', () => {
  const words = YOKE.split(/([\s,[\]{}:]+)/);
  const places = words.flatMap((word, i) => (i % 2 === 0 && word !== '' ? [i] : []));
  const value = fc.oneof(
    fc.constantFrom(...words.filter((_, i) => i % 2 === 0)),
    fc.constantFrom('[]', '{}', '[[]]', 'all', 'open', 'repeating', '{radial: outward}', '{turning: 2}', 'air', 'DC01'),
    fc.double({ noDefaultInfinity: true, noNaN: true }).map(String),
  );
  fc.assert(
    fc.property(fc.array(fc.tuple(fc.constantFrom(...places), value), { minLength: 1, maxLength: 6 }), (changes) => {
      const text = [...words];
      for (const [i, to] of changes) text[i] = to;
      expect(readAnything(text.join(''))?.message ?? '').not.toMatch(/NaN|undefined|\[object/);
    }),
    { seed: 12, numRuns: 400 },
  );
});

const region = (i: number): string =>
  `{name: r${i}, material: m${i}, shape: {circle: {centre: [${i} mm, 0 mm], radius: 1 mm}}}`;

test.each([
  ['regions', `regions: [${Array.from({ length: 6000 }, (_, i) => region(i)).join(', ')}]\n`],
  ['unknown materials', `regions: [${Array.from({ length: 4900 }, (_, i) => region(i)).join(', ')}]\n`],
  ['empty regions', `regions: [${'{}, '.repeat(30_000)}]\n`],
  [
    'unknown sides',
    `edges: [${Array.from({ length: 990 }, (_, i) => `{side: s${i}, condition: closed}`).join(', ')}]\n`,
  ],
  ['sides in one entry', `edges: [{condition: closed, side: [${'a, '.repeat(50_000)}]}]\n`],
  ['probes', `probes: [${'{name: a, mean_over: [b, c, d]}, '.repeat(990)}]\n`],
  [
    'points of lines',
    `probes: [${'{name: a, line: {from: [0 m, 0 m], to: [1 m, 0 m], points: 10000}}, '.repeat(99)}]\n`,
  ],
  ['corners', `regions: [{name: a, material: air, shape: {polygon: [${'[1 mm, 1], '.repeat(20_000)}]}}]\n`],
  ['a long word', `name: ${'x'.repeat(3_000_000)}\n`],
])('many or long %s end in a bounded list of faults', (_, text) => {
  const error = readAnything(
    `format: gapwright-section/1\nbackground: air\noutline: {circle: {centre: [0 m, 0 m], radius: 9 m}}\n${text}`,
  );
  expect(error?.faults.length).toBeGreaterThan(0);
  expect(error?.faults.length).toBeLessThanOrEqual(201);
  expect(error?.message.length).toBeLessThan(200_000);
});
