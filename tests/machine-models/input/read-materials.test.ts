import { expect, test } from 'vitest';
import { readMaterials } from '../../../packages/machine-models/src/input/read-materials.js';
import { faultsOf } from './hut.js';

const read = (text: string) => readMaterials(text, { file: 'any.yaml' });

test('the materials alone are read, in their order, of any file and however unsound its rest', () => {
  const text = [
    'format: gapwright-section/1',
    'rotor: nonsense',
    'materials:',
    '  plate: { kind: steel, mu_r: 2000 }',
    '  N42: { kind: magnet, remanence: 1.31 T, recoil: 1.4 }',
    '  toString: { kind: nonmagnetic }',
  ].join('\n');
  const { own, warnings, locate } = read(text);
  expect(Object.keys(own)).toEqual(['plate', 'N42', 'toString']);
  expect(own.N42).toMatchObject({ kind: 'magnet', remanence: 1.31 });
  expect(warnings.map((warning) => [warning.key, locate(warning)?.line])).toEqual([['materials.N42.recoil', 5]]);
});

test.each(['name: x', 'materials: {}'])('%j has none of its own', (text) => {
  expect(read(text).own).toEqual({});
});

test.each(['', 'just a word', '[1, 2]', 'materials: 3'])('%j is told as a fault', (text) => {
  expect(faultsOf(() => read(text))).toHaveLength(1);
});

test('all that is wrong with them is told with its place', () => {
  const text = 'materials:\n  a: { kind: steel, mu: 3 }\n  b: { kind: magnet }\n  c: 7\n';
  expect(faultsOf(() => read(text))).toEqual([
    expect.stringMatching(/^any\.yaml:2:6: materials\.a: says nothing of its magnetisation/),
    expect.stringMatching(/^any\.yaml:2:21: materials\.a\.mu: is not a known key/),
    expect.stringMatching(/^any\.yaml:3:\d+: materials\.b\.remanence: is missing/),
    expect.stringMatching(/^any\.yaml:4:\d+: materials\.c: must be a group of keys/),
  ]);
});
