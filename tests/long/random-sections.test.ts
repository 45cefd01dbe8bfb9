import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  openSections,
  proveOpenSection,
  proveSection,
  randomSections,
  smallSections,
} from '../fem-core/mesh/random-sections.js';

/** The same as in the default run, of many more sections, in pieces of two minutes: `npm run test:long -- -t 'piece 3'`. */
describe.each([1, 2, 3, 4, 5, 6, 7, 8])('piece %i', (seed) => {
  test.each([
    ['five thousand random sections', randomSections],
    ['five thousand small ones', smallSections],
  ])('%s', (_, sections) => {
    const outcomes = new Map<string, number>();
    fc.assert(
      fc.property(sections, (one) => {
        const outcome = proveSection(one);
        outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
      }),
      { seed, numRuns: 5000, endOnFailure: true },
    );
    const meshed = outcomes.get('meshed') ?? 0;
    const outside = outcomes.get('outside-outline') ?? 0;
    expect(meshed).toBeGreaterThan(4500);
    expect(meshed + outside).toBeGreaterThan(4990);
  });

  test('a thousand sections in unbounded air', () => {
    fc.assert(fc.property(openSections, proveOpenSection), { seed, numRuns: 1000, endOnFailure: true });
  });
});
