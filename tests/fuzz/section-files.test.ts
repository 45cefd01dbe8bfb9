import fc from 'fast-check';
import { expect, test } from 'vitest';
import { bytesOf, judgeSectionFile, newTally } from '../helpers/judge-section-file.js';
import { brokenSectionFiles, sectionFiles } from '../helpers/section-files.js';

test('random sections are solved, or refused for what the drawing shows, at a place in the file', () => {
  const tally = newTally();
  fc.assert(
    fc.property(sectionFiles, (text) => {
      judgeSectionFile(text, tally);
    }),
    { seed: 7, numRuns: 250, endOnFailure: true },
  );
  if (process.env.SHOW) console.log(tally.counts, tally.slowest);
  const solved = (tally.counts.get('accurate') ?? 0) + (tally.counts.get('not reached') ?? 0);
  expect(solved).toBeGreaterThan(150);
});

test('files changed at random are solved, or refused with a place, in words', () => {
  const tally = newTally();
  fc.assert(
    fc.property(brokenSectionFiles, (text) => {
      judgeSectionFile(text, tally);
    }),
    { seed: 8, numRuns: 2500, endOnFailure: true },
  );
  if (process.env.SHOW) console.log(tally.counts, tally.slowest);
  expect(tally.counts.size).toBeGreaterThan(20);
});

test('the same file twice gives the same bytes', () => {
  fc.assert(
    fc.property(sectionFiles, (text) => {
      expect(bytesOf(text)).toBe(bytesOf(text));
    }),
    { seed: 9, numRuns: 20, endOnFailure: true },
  );
});
