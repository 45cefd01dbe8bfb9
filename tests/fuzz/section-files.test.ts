import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { makeFolder, readFolder, run } from '../cli/run.js';
import { bytesOf, judgeSectionFile, newTally } from '../helpers/judge-section-file.js';
import { brokenSectionFiles, oddSectionFiles, sectionFiles } from '../helpers/section-files.js';

/** See `judgeSectionFile` for what must hold of each; far more of them in tests/long. */

test('random sections are solved, or refused for what the drawing shows, at a place in the file', () => {
  const tally = newTally();
  fc.assert(
    fc.property(sectionFiles, (text) => {
      judgeSectionFile(text, tally);
    }),
    { seed: 7, numRuns: 50, endOnFailure: true },
  );
  const solved = (tally.counts.get('accurate') ?? 0) + (tally.counts.get('not reached') ?? 0);
  expect(solved).toBeGreaterThan(25);
});

test('sections with numbers far off are solved, or refused with a place', () => {
  const tally = newTally();
  fc.assert(
    fc.property(oddSectionFiles, (text) => {
      judgeSectionFile(text, tally, 1);
    }),
    { seed: 8, numRuns: 150, endOnFailure: true },
  );
  expect(tally.counts.get('accurate') ?? 0).toBeGreaterThan(20);
});

test('files changed at random are solved, or refused with a place, in words', () => {
  const tally = newTally();
  fc.assert(
    fc.property(brokenSectionFiles, (text) => {
      judgeSectionFile(text, tally, 1);
    }),
    { seed: 9, numRuns: 1600, endOnFailure: true },
  );
  expect(tally.counts.size).toBeGreaterThan(20);
});

test('the same file twice gives the same bytes', () => {
  fc.assert(
    fc.property(sectionFiles, (text) => {
      expect(bytesOf(text)).toBe(bytesOf(text));
    }),
    { seed: 10, numRuns: 10, endOnFailure: true },
  );
});

describe('gapwright section', () => {
  const path = join(makeFolder(), 'random.yaml');

  test.each([
    ['random', sectionFiles, 15],
    ['odd', oddSectionFiles, 15],
    ['broken', brokenSectionFiles, 60],
  ] as const)(
    '%s files end with status 0, 2 or 3, what is printed is JSON, and no file holds NaN',
    async (kind, files, numRuns) => {
      await fc.assert(
        fc.asyncProperty(files, async (text) => {
          const small = text.replace(/max_meshes: \d/, 'max_meshes: 1');
          writeFileSync(path, small);
          const out = makeFolder();
          const { status, out: printed, err } = await run(['section', path, '--json', '--out', out, '--vtu']);
          expect([0, 2, 3], err).toContain(status);
          if (status === 2) {
            expect(printed).toBe('');
            expect(err).toContain('random.yaml:');
          } else expect(JSON.parse(printed)).toMatchObject({ format: 'gapwright-section-result/1' });
          for (const text of kind === 'broken' ? [] : Object.values(readFolder(out))) // names may be anything there
            expect(text).not.toMatch(/NaN|Infinity|undefined/);
          for (const line of err.split('\n')) expect(line).not.toMatch(/\p{Cc}|undefined|\[object/u);
        }),
        { seed: 11, numRuns, endOnFailure: true },
      );
    },
  );
});
