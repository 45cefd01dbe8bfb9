import fc from 'fast-check';
import { expect, test } from 'vitest';
import { proveSection, randomSections } from './random-sections.js';

test('random sections: areas of the overlay, conformity, Delaunay, matched sides, 25 degrees away from sharp corners', () => {
  let meshed = 0;
  fc.assert(
    fc.property(randomSections, (one) => {
      const outcome = proveSection(one);
      if (outcome === 'meshed') meshed++;
      else expect(outcome).toBe('outside-outline');
    }),
    { seed: 91, numRuns: 300 },
  );
  expect(meshed).toBeGreaterThan(280);
});
