import { randomBytes } from 'node:crypto';
import {
  closeSync,
  fstatSync,
  mkdirSync,
  mkdtempSync,
  openSync,
  readSync,
  realpathSync,
  renameSync,
  rmdirSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { basename, dirname, isAbsolute, join, resolve } from 'node:path';
import { InputError } from '@gapwright/fem-core';

/** No machine file or table comes near it; what does is not meant for this program. */
const largestFile = 4 * 1024 * 1024;

/** A file read whole. */
export interface TextFile {
  readonly bytes: Uint8Array;
  readonly text: string;
}

/**
 * Reads a whole text file, pipes included.
 *
 * @param shown  how to name the file in messages
 * @throws InputError where there is no such file, it is a folder, unreadable, over 4 MB or not UTF-8
 */
export function readTextFile(path: string, shown = path): TextFile {
  const bytes = readCapped(path, shown);
  try {
    return { bytes, text: new TextDecoder('utf-8', { fatal: true }).decode(bytes) };
  } catch {
    throw fileFault('not-text', shown, 'is not UTF-8 text', 'save it as plain UTF-8 text');
  }
}

function readCapped(path: string, shown: string): Uint8Array {
  let file: number | undefined;
  try {
    file = openSync(path, 'r');
    if (fstatSync(file).isDirectory()) throw fileFault('folder', shown, 'is a folder', 'name a file in it');
    // Size as told cannot be trusted (pipes and devices say 0), so one byte too many is asked for.
    const buffer = Buffer.alloc(largestFile + 1);
    let length = 0;
    for (let got = -1; got !== 0 && length < buffer.length; length += got) {
      got = readSync(file, buffer, length, Math.min(buffer.length - length, 1 << 20), null);
    }
    if (length > largestFile) throw tooBig(shown, fstatSync(file).size);
    return buffer.subarray(0, length);
  } catch (error) {
    if (error instanceof InputError) throw error;
    throw fileFault('unreadable', shown, `cannot be read: ${reasonOf(error)}`, 'check the path and its permissions');
  } finally {
    if (file !== undefined) closeSync(file);
  }
}

/** @param size  as the system tells it, bytes; pipes and devices say 0 */
function tooBig(shown: string, size: number): InputError {
  const megabytes = (bytes: number): string => `${Math.ceil((10 * bytes) / 1024 / 1024) / 10} MB`;
  const limit = megabytes(largestFile);
  const wrong =
    size > largestFile
      ? `has ${megabytes(size)}, more than the ${limit} that are read`
      : `has more than the ${limit} that are read`;
  const remedy = 'check that it is the right file; if it is, give its outlines fewer corners and its tables fewer rows';
  return new InputError([{ code: 'too-big', at: { file: shown, line: 1, column: 1 }, key: '', wrong, remedy }]);
}

/**
 * Reads a file that stands beside another, as a machine file names its tables. Faults name the file in their text, not
 * as their key, which is that of the machine file.
 *
 * @throws InputError as readTextFile does, and where the name leads out of the folder
 */
export function readFileBeside(file: string, name: string): TextFile {
  try {
    if (isAbsolute(name) || name.split(/[\\/]/).includes('..')) {
      throw fileFault(
        'outside',
        name,
        "leads out of the machine file's folder",
        'put the file beside the machine file',
      );
    }
    return readTextFile(join(dirname(file), name), name);
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    throw new InputError(
      error.faults.map(({ code, wrong, remedy }) => ({ code, key: '', wrong: `${name} ${wrong}`, remedy })),
    );
  }
}

/**
 * Makes sure, before any work is done, that files can be written into `folder` and that none of them is `input`.
 * Leaves nothing behind.
 *
 * @throws InputError
 */
export function checkOutputFolder(folder: string, names: readonly string[], input: string): void {
  let probe: string | undefined;
  try {
    probe = mkdtempSync(join(nearestFolder(resolve(folder)), '.gapwright-'));
  } catch (error) {
    throw outputFault(folder, error);
  } finally {
    if (probe !== undefined) rmdirSync(probe);
  }
  const blocked = names.find((name) => statSync(join(folder, name), { throwIfNoEntry: false })?.isDirectory() === true);
  if (blocked !== undefined) {
    throw fileFault(
      'folder',
      join(folder, blocked),
      'is a folder where a file is to be written',
      'name another folder with --out',
    );
  }
  if (names.some((name) => sameFile(join(folder, name), input))) {
    throw fileFault('same-file', input, 'would be overwritten by the results', 'name another folder with --out');
  }
}

/** `path`, or the first of its parents that exists. */
function nearestFolder(path: string): string {
  const found = statSync(path, { throwIfNoEntry: false });
  if (found === undefined && dirname(path) !== path) return nearestFolder(dirname(path));
  if (found?.isDirectory() !== true) throw new Error(`${path} is not a folder`);
  return path;
}

function sameFile(a: string, b: string): boolean {
  try {
    return realpathSync(a) === realpathSync(b);
  } catch {
    return false; // one of them does not exist
  }
}

/**
 * Writes all files into `folder`, which is made where it does not exist: first under a temporary folder in it, then
 * moved into place, so that a file is either there in full or not at all. On any fault nothing new is left.
 *
 * @param files  content by file name
 * @throws InputError where the folder cannot be written to
 */
export function writeFiles(folder: string, files: ReadonlyMap<string, string>): void {
  let made: string | undefined;
  let temporary: string | undefined;
  try {
    made = makeFolders(resolve(folder));
    temporary = join(folder, `.gapwright-${randomBytes(6).toString('hex')}`);
    mkdirSync(temporary);
    for (const [name, content] of files) writeFileSync(join(temporary, name), content, { flag: 'wx' });
    for (const name of files.keys()) renameSync(join(temporary, name), join(folder, name));
    rmdirSync(temporary);
  } catch (error) {
    if (temporary !== undefined) rmSync(temporary, { recursive: true, force: true });
    if (made !== undefined) removeEmptyFolders(resolve(folder), resolve(made));
    throw outputFault(folder, error);
  }
}

/** Makes the folder and the parents it lacks, and returns the topmost one made. (Node's own way never ends under /proc.) */
function makeFolders(folder: string): string | undefined {
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory() === true) return undefined;
  const top = dirname(folder) === folder ? undefined : makeFolders(dirname(folder));
  mkdirSync(folder);
  return top ?? folder;
}

/** Takes back what `mkdir` made: from `folder` upwards to `top`, as long as they are empty. */
function removeEmptyFolders(folder: string, top: string): void {
  try {
    rmdirSync(folder);
    if (folder !== top) removeEmptyFolders(dirname(folder), top);
  } catch {
    // Somebody put something there meanwhile: it stays.
  }
}

/**
 * Writes one new file.
 *
 * @throws InputError where it exists already or cannot be written
 */
export function writeNewFile(path: string, content: string): void {
  let begun = false;
  try {
    makeFolders(resolve(dirname(path)));
    const file = openSync(path, 'wx');
    begun = true;
    try {
      writeFileSync(file, content);
    } finally {
      closeSync(file);
    }
  } catch (error) {
    if (begun) rmSync(path, { force: true });
    if (codeOf(error) === 'EEXIST' && statSync(dirname(path), { throwIfNoEntry: false })?.isDirectory() === true) {
      throw fileFault('exists', path, 'exists already and is not overwritten', 'name another folder, or move the file');
    }
    throw fileFault('unwritable', path, `cannot be written: ${reasonOf(error)}`, 'name a folder you may write to');
  }
}

function outputFault(folder: string, error: unknown): InputError {
  return fileFault(
    'unwritable',
    folder,
    `cannot be written to: ${reasonOf(error)}`,
    'name a folder you may write to with --out',
  );
}

function fileFault(code: string, shown: string, wrong: string, remedy: string): InputError {
  return new InputError([{ code, key: shown, wrong, remedy }]);
}

const codeOf = (error: unknown): string | undefined => (error as NodeJS.ErrnoException | undefined)?.code;

/** Why the system refused, in words. */
function reasonOf(error: unknown): string {
  const code = codeOf(error);
  switch (code) {
    case 'ENOENT':
      return 'no such file or folder';
    case 'EACCES':
    case 'EPERM':
      return 'permission denied';
    case 'EROFS':
      return 'the disk is read-only';
    case 'ENOSPC':
      return 'the disk is full';
    case 'ENOTDIR':
      return 'a part of the path is not a folder';
    case 'EISDIR':
      return 'it is a folder';
    case 'EEXIST':
      return 'a file of that name is in the way';
    case 'ENAMETOOLONG':
      return 'the name is too long';
    default:
      return code ?? (error instanceof Error ? error.message : String(error));
  }
}

/** File name without folder and extension. */
export const bareName = (path: string): string => basename(path).replace(/\.[^.]*$/, '');
