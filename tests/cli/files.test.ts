import { existsSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { InputError } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { readFileBeside, writeFiles } from '../../packages/cli/src/files.js';
import { makeFolder, readFolder } from './run.js';

test('files are written all or none: a failure half-way leaves nothing, not even the folder made for them', () => {
  const parent = makeFolder();
  const files = new Map([
    ['good.txt', 'good'],
    ['no/such/folder.txt', 'bad'],
  ]);
  expect(() => writeFiles(join(parent, 'a', 'b'), files)).toThrow(InputError);
  expect(existsSync(join(parent, 'a'))).toBe(false);
  writeFileSync(join(parent, 'good.txt'), 'old');
  expect(() => writeFiles(parent, files)).toThrow(InputError);
  expect(readFolder(parent)).toEqual({ 'good.txt': 'old' });
});

test('files replace older ones of their name and leave others alone', () => {
  const folder = makeFolder();
  writeFileSync(join(folder, 'result.txt'), 'old');
  writeFileSync(join(folder, 'mine.txt'), 'mine');
  writeFiles(folder, new Map([['result.txt', 'new']]));
  expect(readFolder(folder)).toEqual({ 'result.txt': 'new', 'mine.txt': 'mine' });
});

test('a file beside another is named in the text of its fault, whose key belongs to the other', () => {
  const file = join(makeFolder(), 'machine.yaml');
  try {
    readFileBeside(file, 'plate.csv');
    expect.unreachable();
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    expect((error as InputError).faults).toMatchObject([
      { key: '', wrong: expect.stringMatching(/^plate\.csv cannot be read: /) },
    ]);
  }
});
