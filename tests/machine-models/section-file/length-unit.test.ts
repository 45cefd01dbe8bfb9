import { describe, expect, test } from 'vitest';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { readDocument } from '../../../packages/fem-core/src/io/yaml.js';
import { checkSection } from '../../../packages/machine-models/src/section-file/check-section.js';
import { lengthUnitAt } from '../../../packages/machine-models/src/section-file/length-unit.js';
import { readYoke } from './yoke.js';

describe('the unit in which a file speaks', () => {
  const document = readDocument(
    'outline: { circle: { centre: [0 m, 1 in], radius: 9 cm } }\nregions: [{ name: 3 A, at: [7, 1.5e-3um, 2 mm] }, {}]',
    'f',
  );

  test('is that of the first length at a place, else of the first of the outline, else mm', () => {
    expect(lengthUnitAt(document, ['regions', 0])).toEqual({ name: 'um', metres: 1e-6 });
    expect(lengthUnitAt(document, ['outline', 'circle', 'centre', 1])).toEqual({ name: 'in', metres: 0.0254 });
    for (const path of [['regions', 1], ['regions', 5, 'shape'], ['depth'], []])
      expect(lengthUnitAt(document, path)).toEqual({ name: 'm', metres: 1 });
    expect(lengthUnitAt(readDocument('a: 3 kg', 'f'), ['a'])).toEqual({ name: 'mm', metres: 1e-3 });
  });
});

/** What is wrong with the drawing of the yoke, as told of the file. */
function wrongs(...settings: readonly string[]): readonly string[] {
  const { problem, place } = readYoke(settings);
  try {
    checkSection(problem);
  } catch (error) {
    if (error instanceof InputError) return place(error).faults.map(({ wrong }) => wrong);
    throw error;
  }
  return [];
}

test.each([
  [
    'regions.0.shape={polygon: [[20 mm, 20 mm], [90 mm, 35 mm], [90 mm, 20 mm], [20 mm, 35 mm]]}',
    'crosses or touches itself near (55, 27.5) mm, sides 1 and 3',
  ],
  [
    'regions.0.shape={polygon: [[1 in, 1 in], [2 in, 1 in], [2 in, 1 in], [1 in, 1.2 in]]}',
    'corners 2 and 3 are the same point, (2, 1) in',
  ],
  [
    'regions.0.shape={polygon: [[1 cm, 1 cm], [3 cm, 1 cm], [2 cm, 1 cm], [2 cm, 3 cm]]}',
    'runs back on itself at corner 2, (3, 1) cm',
  ],
  [
    'regions.3.shape={circle: {centre: [9 um, 9 um], radius: 1e-5 um}}',
    'is thinner than 0.00012 um, the distance within which points are one',
  ],
])('lengths in the faults of the solver are told in the unit of the culprit: %s', (setting, wrong) => {
  expect(wrongs(setting)).toEqual([wrong]);
});

test('the size of the outline and its range, in its own unit', () => {
  expect(
    wrongs('outline={circle: {centre: [0 um, 0 um], radius: 1e-5 um}}', 'regions=[]', 'probes=[]', 'edges=[]'),
  ).toEqual(['is 0.00002 um in size, not between 0.0001 um and 10000000000000000 um']);
});

test('a place where triangles pile up, in the unit of the file', () => {
  const limits = ['max_edge=0.05 mm', 'model.max_triangles=1000'];
  expect(wrongs(...limits)[0]).toMatch(/^the mesh would pass 2000 triangles, .* near \(\d+(\.\d+)?, \d+(\.\d+)?\) mm$/);
});
