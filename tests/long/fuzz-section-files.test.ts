import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bytesOf, judgeSectionFile, newTally, type Tally } from '../helpers/judge-section-file.js';
import { brokenSectionFiles, oddSectionFiles, sectionFiles } from '../helpers/section-files.js';

/** The same as tests/fuzz in the default run, of many more files; tells what became of them. */

const SEEDS = [1, 2, 3, 4];

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

describe.each(SEEDS)('seed %i', (seed) => {
  test('a thousand random sections', () => {
    const { counts } = prove(sectionFiles, seed, 1000, 2);
    expect((counts.get('accurate') ?? 0) + (counts.get('not reached') ?? 0)).toBeGreaterThan(600);
  });

  test('three thousand sections with numbers far off', () => {
    expect(prove(oddSectionFiles, seed, 3000, 1).counts.get('accurate') ?? 0).toBeGreaterThan(300);
  });

  test('twenty thousand files changed at random', () => {
    expect(prove(brokenSectionFiles, seed, 20_000, 1).counts.size).toBeGreaterThan(30);
  });

  test('a hundred files twice, byte for byte', () => {
    fc.assert(
      fc.property(fc.oneof(sectionFiles, oddSectionFiles), (text) => {
        expect(bytesOf(text)).toBe(bytesOf(text));
      }),
      { seed: 2000 + seed, numRuns: 100, endOnFailure: true },
    );
  });
});
