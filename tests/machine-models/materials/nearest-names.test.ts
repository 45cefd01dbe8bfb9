import { expect, test } from 'vitest';
import { MATERIAL_LIBRARY } from '../../../packages/machine-models/src/materials/library.js';
import { nearestNames } from '../../../packages/machine-models/src/materials/nearest-names.js';

const known = Object.keys(MATERIAL_LIBRARY);

test.each([
  ['n42', 'N42'],
  ['N43', 'N40'],
  ['AISI1008', 'AISI 1008'],
  ['aisi', 'AISI 1008'],
  ['m400', 'M400-50A'],
  ['SmCo', 'SmCo5-18'],
  ['2co17', 'Sm2Co17-26'],
  ['Cast Iron', 'cast iron'],
])('%s was probably meant to be %s', (name, nearest) => {
  expect(nearestNames(name, known)[0]).toBe(nearest);
});

test('names of any length, and none at all, get three suggestions', () => {
  for (const name of ['', 'x'.repeat(1e6), '\u0000', '__proto__']) expect(nearestNames(name, known)).toHaveLength(3);
});
