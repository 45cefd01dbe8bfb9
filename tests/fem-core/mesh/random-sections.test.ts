import fc from 'fast-check';
import { expect, test } from 'vitest';
import { proveSection, randomSections, smallSections } from './random-sections.js';

/** Many more of them in tests/long. */
test.each([
  ['eighteen hundred small', smallSections, 92, 1800],
  ['three hundred', randomSections, 91, 300],
] as const)(
  '%s random sections: areas of the overlay, conformity, Delaunay, matched sides, 25 degrees away from sharp corners',
  (_, sections, seed, numRuns) => {
    let meshed = 0;
    fc.assert(
      fc.property(sections, (one) => {
        const outcome = proveSection(one);
        if (outcome === 'meshed') meshed++;
        else expect(outcome).toBe('outside-outline');
      }),
      { seed, numRuns },
    );
    expect(meshed).toBeGreaterThan(0.93 * numRuns);
  },
  300_000,
);
