import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { readMachine } from '../../../packages/machine-models/src/input/read-machine.js';
import { legCut } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { scrapped } from '../../helpers/scraps.js';
import { HUT } from './hut.js';

/** Reads the text; anything but a machine or an InputError fails the test. Returns the faults. */
function readAnything(text: string): InputError | undefined {
  try {
    const { machine } = readMachine(text, { file: 'hut.yaml' });
    // What is read holds its promises: no number that is not one, and legs on every circle of the slices.
    const { winding, rotor, model } = machine;
    const finite = JSON.stringify(machine, (_, v) => (typeof v === 'number' && !Number.isFinite(v) ? 'BAD' : v));
    expect(finite).not.toContain('BAD');
    for (const { radius } of model.slices) {
      expect(legCut(winding, rotor.poles, rotor.magnets.meanRadius, radius).width).toBeGreaterThan(0);
    }
    return undefined;
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return error as InputError;
  }
}

const VALUES = [
  ...['1', '-1', '1e308', '999999999', '1e-9', '.nan', '.inf', 'true', 'null', ' mm', ' in', ' V', ' %', ' degC'],
  ...['fill', 'fit', 'auto', 'none', 'steel', 'round', 'overlapped', 'tapered', 'delta', 'keeper'],
];

/** Machines of other kinds: keeper, interpoles, overlapped legs, Halbach array, round magnets. */
const OTHERS = ['lab-rig', 'canal-launch', 'orchard-cart'].map((name) =>
  readFileSync(new URL(`../../../packages/cli/scenarios/${name}.yaml`, import.meta.url), 'utf8'),
);

test.each(OTHERS)('so is any other machine with random scraps: %#', (file) => {
  fc.assert(
    fc.property(scrapped(file, [...VALUES, 'through', 'N42', '2', '5', '6']), (text) => {
      const error = readAnything(text);
      for (const line of error?.message.split('\n') ?? []) expect(line).not.toMatch(/\p{Cc}|NaN|undefined|\[object/u);
    }),
    { numRuns: 150 },
  );
});

test('the hut with random scraps in random places is a machine or an InputError with places', () => {
  fc.assert(
    fc.property(scrapped(HUT, VALUES), (text) => {
      const error = readAnything(text);
      for (const fault of error?.faults ?? []) {
        expect(fault.at?.line).toBeGreaterThanOrEqual(1);
        expect(fault.at?.column).toBeGreaterThanOrEqual(1);
      }
      for (const line of error?.message.split('\n') ?? []) expect(line).not.toMatch(/\p{Cc}|NaN|undefined|\[object/u);
    }),
    { numRuns: 500 },
  );
});

test('any value in place of any other is a machine or an InputError', () => {
  const lines = HUT.split('\n');
  const keys = lines.flatMap((line, i) => (/^ +\w+: [^#]+/.test(line) ? [i] : []));
  const value = fc.oneof(
    fc.constantFrom(
      '',
      '[]',
      '{}',
      '[[]]',
      'fill',
      'fit',
      'none',
      'auto',
      'on',
      'round',
      'sector',
      'overlapped',
      'tapered',
      'N42',
      'air',
      'DC01',
    ),
    fc
      .tuple(
        fc.double({ noDefaultInfinity: true, noNaN: true }),
        fc.constantFrom('', ' mm', ' m', ' in', ' rpm', ' T', ' %', ' degC'),
      )
      .map(([n, unit]) => `${n}${unit}`),
    fc
      .tuple(fc.integer({ min: -2, max: 400 }), fc.constantFrom('', ' mm', ' rpm', ' T', ' %', ' degC'))
      .map(([n, unit]) => `${n}${unit}`),
  );
  fc.assert(
    fc.property(fc.array(fc.tuple(fc.constantFrom(...keys), value), { minLength: 1, maxLength: 6 }), (changes) => {
      const text = [...lines];
      for (const [i, to] of changes) text[i] = text[i].replace(/: [^#]*/, () => `: ${to} `);
      const message = readAnything(text.join('\n'))?.message ?? '';
      expect(message).not.toMatch(/NaN|undefined|\[object/);
    }),
    { numRuns: 1000 },
  );
});

test.each([
  ['unknown keys', Array.from({ length: 40_000 }, (_, i) => `key_${i}: 1\n`).join('')],
  ['materials', `materials:\n${Array.from({ length: 20_000 }, (_, i) => `  m${i}: {}\n`).join('')}`],
  ['one long key', `${'k'.repeat(1000)}: 1\n`],
  ['tolerances', `tolerances: [${'{}, '.repeat(30_000)}]\n`],
  ['a long table', `materials: { p: { kind: steel, bh: [${'[1, 1], '.repeat(15_000)}] } }\n`],
  ['a long word', `name: ${'x'.repeat(3_000_000)}\n`],
])('many or long %s end in a bounded list of faults', (_, text) => {
  const start = performance.now();
  const error = readAnything(`format: gapwright-machine/1\n${text}`);
  expect(error?.faults.length).toBeGreaterThan(0);
  expect(error?.faults.length).toBeLessThanOrEqual(201);
  expect(error?.message.length).toBeLessThan(200_000);
  expect(performance.now() - start).toBeLessThan(20_000); // a hang, not a benchmark
});
