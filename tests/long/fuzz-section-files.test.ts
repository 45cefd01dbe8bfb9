import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bytesOf, judgeSectionFile, newTally, type Tally } from '../helpers/judge-section-file.js';
import { brokenSectionFiles, oddSectionFiles, sectionFiles } from '../helpers/section-files.js';

/**
 * The same as tests/fuzz in the default run, of many more files, in pieces of some four minutes: `npm run test:long -- -t 'piece 3'`.
 * Tells what became of them.
 */

function prove(files: fc.Arbitrary<string>, seed: number, numRuns: number, maxMeshes: number): Tally {
  const tally = newTally();
  fc.assert(
    fc.property(files, (text) => {
      judgeSectionFile(text, tally, maxMeshes);
    }),
    { seed: 1000 + seed, numRuns, endOnFailure: true },
  );
  const told = [...tally.counts].sort(([, p], [, q]) => q - p).map(([outcome, count]) => `${count} ${outcome}`);
  console.log(`${told.join(', ')}; the slowest took ${tally.slowest.ms.toFixed(0)} ms`);
  return tally;
}

describe.each([1, 2, 3, 4, 5, 6, 7, 8])('piece %i', (seed) => {
  test('five hundred random sections', () => {
    const { counts } = prove(sectionFiles, seed, 500, 2);
    expect((counts.get('accurate') ?? 0) + (counts.get('not reached') ?? 0)).toBeGreaterThan(300);
  });

  test('fifteen hundred sections with numbers far off', () => {
    expect(prove(oddSectionFiles, seed, 1500, 1).counts.get('accurate') ?? 0).toBeGreaterThan(150);
  });

  test('ten thousand files changed at random', () => {
    expect(prove(brokenSectionFiles, seed, 10_000, 1).counts.size).toBeGreaterThan(30);
  });

  test('fifty files twice, byte for byte', () => {
    fc.assert(
      fc.property(fc.oneof(sectionFiles, oddSectionFiles), (text) => {
        expect(bytesOf(text)).toBe(bytesOf(text));
      }),
      { seed: 2000 + seed, numRuns: 50, endOnFailure: true },
    );
  });
});
