import fc from 'fast-check';
import { expect, test } from 'vitest';
import { editDistance, findNearest } from '../../../packages/fem-core/src/io/nearest.js';

test.each([
  ['kitten', 'sitting', 3], // the textbook example of edit distance
  ['gap', 'gap', 0],
  ['gpa', 'gap', 1],
  ['', 'abc', 3],
  ['Gap', 'gap', 0.5],
])('from %j to %j it is %d slips', (from, to, slips) => {
  expect(editDistance(from, to)).toBe(slips);
});

test('the distance is symmetric, none only between equals, and at most the longer length', () => {
  const word = fc.string({ maxLength: 12 });
  fc.assert(
    fc.property(word, word, (a, b) => {
      expect(editDistance(a, b)).toBe(editDistance(b, a));
      expect(editDistance(a, b) === 0).toBe(a === b);
      expect(editDistance(a, b)).toBeLessThanOrEqual(Math.max(a.length, b.length));
    }),
  );
});

test('one slip is understood, another word is not', () => {
  const known = ['thickness', 'width', 'length', 'mean_radius', 'material'];
  expect(findNearest('thicknes', known)).toBe('thickness');
  expect(findNearest('mean-radius', known)).toBe('mean_radius');
  expect(findNearest('lenght', known)).toBe('length');
  expect(findNearest('colour', known)).toBeUndefined();
  expect(findNearest('x', ['y'])).toBeUndefined();
  expect(findNearest('w'.repeat(10_000), known)).toBeUndefined();
});
