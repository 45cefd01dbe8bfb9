import fc from 'fast-check';
import { expect, test } from 'vitest';
import { formatFault } from '../../../packages/fem-core/src/base/fault.js';
import { type Document, placeOf, plainValue } from '../../../packages/fem-core/src/io/document.js';
import { applySettings } from '../../../packages/fem-core/src/io/settings.js';
import { readDocument } from '../../../packages/fem-core/src/io/yaml.js';

const FILE = 'rotor: { gap: 19 mm, poles: 16 }\ntolerances: [{ key: a, normal: 1 mm }]\nempty:\n';

function set(...settings: readonly (readonly [key: string, value: string])[]): Document {
  return applySettings(
    readDocument(FILE, 'a.yaml'),
    settings.map(([key, value]) => ({ key, value })),
  );
}

const plain = (document: Document): unknown => JSON.parse(JSON.stringify(plainValue(document.root)));
const faults = (document: Document): string[] => document.faults.map(formatFault);

test('a setting replaces one value and leaves the rest alone', () => {
  expect(plain(set(['rotor.gap', '20 mm']))).toEqual({
    rotor: { gap: '20 mm', poles: 16 },
    tolerances: [{ key: 'a', normal: '1 mm' }],
    empty: null,
  });
});

test('values are YAML: numbers, lists and groups; later settings go on earlier ones', () => {
  expect(plain(set(['rotor.poles', '12'], ['model.radii', '[1 mm, 2 mm]'], ['model.accuracy', '1 %']))).toMatchObject({
    rotor: { gap: '19 mm', poles: 12 },
    model: { radii: ['1 mm', '2 mm'], accuracy: '1 %' },
  });
});

test('entries of lists are counted from 0, and a list may grow by one', () => {
  expect(plain(set(['tolerances.0.normal', '2 mm'], ['tolerances.1.key', 'b'], ['empty.new', '1']))).toMatchObject({
    tolerances: [{ key: 'a', normal: '2 mm' }, { key: 'b' }],
    empty: { new: 1 },
  });
});

test('a set value stands in its setting, others where they were', () => {
  const document = set(['rotor.gap', '{ a: 1 }']);
  expect(placeOf(document, ['rotor', 'gap', 'a'])).toEqual({ file: '--set rotor.gap', line: 1, column: 6 });
  expect(placeOf(document, ['rotor', 'poles'])).toEqual({ file: 'a.yaml', line: 1, column: 29 });
});

test.each([
  ['rotor.gap.x', '1', '--set rotor.gap.x:1:1: rotor.gap.x: rotor.gap holds 19 mm, not a group of keys; set the whole'],
  ['tolerances.5.key', '1', 'tolerances is a list of 1; give a number from 0 to 1, 1 to add an entry'],
  ['tolerances.key', '1', 'tolerances is a list of 1'],
  ['', '1', 'is no way into a file; give keys with one dot between each two'],
  ['rotor..gap', '1', 'is no way into a file'],
  ['__proto__.polluted', '1', 'is no way into a file'],
  ['rotor.__proto__', '{ polluted: 1 }', 'is no way into a file'],
  ['rotor.gap', '[1', '--set rotor.gap:1:3: rotor.gap: is not YAML'],
  ['rotor.gap', '', '--set rotor.gap:1:1: rotor.gap: is empty; give it a value'],
  ['rotor.gap', '{ a: 1, a: 2 }', '--set rotor.gap:1:9: rotor.gap.a: is given twice'],
])('%s=%s is told as a fault of the document', (key, value, message) => {
  const told = faults(set([key, value]));
  expect(told).toHaveLength(1);
  expect(told[0]).toContain(message);
  expect(({} as Record<string, unknown>).polluted).toBeUndefined();
});

test('no setting throws, and none changes the document it is given', () => {
  const key = fc.array(fc.constantFrom('rotor', 'gap', 'tolerances', '0', '1', '', '__proto__', 'constructor', 'x'));
  fc.assert(
    fc.property(key, fc.string({ maxLength: 20 }), (steps, value) => {
      const before = readDocument(FILE, 'a.yaml');
      applySettings(before, [{ key: steps.join('.'), value }]);
      expect(before).toEqual(readDocument(FILE, 'a.yaml'));
    }),
  );
});
