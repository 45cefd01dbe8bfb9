import fc from 'fast-check';
import { expect, test } from 'vitest';
import { proveSection, randomSections } from '../fem-core/mesh/random-sections.js';

/** The same as in the default run, of many more sections. */
test.each([1, 2, 3, 4, 5, 6, 7, 8])(
  'five thousand random sections, seed %i',
  (seed) => {
    const outcomes = new Map<string, number>();
    fc.assert(
      fc.property(randomSections, (one) => {
        const outcome = proveSection(one);
        outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
      }),
      { seed, numRuns: 5000, endOnFailure: true },
    );
    const meshed = outcomes.get('meshed') ?? 0;
    const outside = outcomes.get('outside-outline') ?? 0;
    expect(meshed).toBeGreaterThan(4500);
    expect(meshed + outside).toBeGreaterThan(4990);
  },
  900_000,
);
