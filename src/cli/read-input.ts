import { closeSync, fstatSync, openSync, readFileSync, readSync, realpathSync } from 'node:fs';
import { basename, dirname, join, relative, resolve, sep } from 'node:path';
import type { Case } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import { readCase } from '../case/read-case.ts';

/** Largest files that are read at all, in bytes (CASE.md, details). */
export const largestCase = 10_000_000;
export const largestDrawing = 5_000_000;

/** A case as it came from disk, with the files it names: what a solving thread is given. */
export interface CaseInput {
  readonly theCase: Case;
  readonly text: string;
  readonly file: string;
  readonly files: Readonly<Record<string, string>>;
}

/**
 * Reads a case file and the drawing it names; `-` is standard input, with files relative to the current folder.
 *
 * @throws {CaseError} with the place, when a file is missing, too large, no text, or not a case
 */
export function readInput(path: string): CaseInput {
  const fromInput = path === '-';
  const text = readText(fromInput ? 0 : path, fromInput ? 'standard input' : path, largestCase, 'case file');
  const file = fromInput ? 'standard input' : basename(path);
  const folder = fromInput ? process.cwd() : dirname(resolve(path));
  const files: Record<string, string> = {};
  const readFile = (name: string): string => {
    const content = readText(inside(folder, name), name, largestDrawing, 'drawing');
    files[name] = content;
    return content;
  };
  return { theCase: readCase(text, { file, folder, readFile }), text, file, files };
}

/** The real path of a file that a case names; it must not lead out of the case's folder, by links either. */
function inside(folder: string, name: string): string {
  const wanted = join(folder, name);
  let real: string;
  try {
    real = realpathSync(wanted);
  } catch (cause) {
    throw missing(name, cause);
  }
  const way = relative(realpathSync(folder), real);
  if (way === '' || way === '..' || way.startsWith(`..${sep}`)) {
    throw new CaseError(
      'FILE_OUTSIDE',
      `the drawing "${name}" lies outside the folder of the case`,
      { key: 'drawing.file', file: name },
      'Put it beside the case file or in a folder below it',
    );
  }
  return real;
}

function missing(name: string, cause: unknown): CaseError {
  return new CaseError(
    'FILE_NOT_READ',
    `there is no file "${name}" that can be read`,
    { file: name },
    'Check the path, and that the file may be read',
    cause,
  );
}

/** Text of a file or, for 0, of standard input; its size is looked at before anything is read. */
function readText(source: string | 0, name: string, largest: number, what: string): string {
  let bytes: Buffer;
  try {
    bytes = source === 0 ? readUpTo(0, largest + 1) : readOpened(source, name, largest, what);
  } catch (error) {
    if (error instanceof CaseError) throw error;
    throw missing(name, error);
  }
  if (bytes.length > largest) throw tooLarge(name, undefined, largest, what);
  if (bytes.includes(0)) {
    throw new CaseError(
      'FILE_NOT_TEXT',
      `this ${what} is not text: byte ${bytes.indexOf(0) + 1} is zero`,
      { file: name },
      `Give a ${what} in UTF-8 text`,
    );
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch (cause) {
    throw new CaseError(
      'FILE_NOT_TEXT',
      `this ${what} is not UTF-8 text`,
      { file: name },
      'Save it as UTF-8',
      cause,
    );
  }
}

function readOpened(path: string, name: string, largest: number, what: string): Buffer {
  const handle = openSync(path, 'r');
  try {
    const facts = fstatSync(handle);
    if (facts.isDirectory()) {
      throw new CaseError('FILE_NOT_READ', `"${name}" is a folder`, { file: name }, `Name a ${what} in it`);
    }
    if (facts.size > largest) throw tooLarge(name, facts.size, largest, what);
    return facts.isFile() ? readFileSync(handle) : readUpTo(handle, largest + 1);
  } finally {
    closeSync(handle);
  }
}

/** Reads a pipe to its end or to `most` bytes, whichever is first. */
function readUpTo(handle: number, most: number): Buffer {
  const parts: Buffer[] = [];
  let total = 0;
  while (total < most) {
    const part = Buffer.allocUnsafe(65_536);
    const got = readSome(handle, part);
    if (got === 0) break;
    parts.push(part.subarray(0, got));
    total += got;
  }
  return Buffer.concat(parts);
}

function readSome(handle: number, part: Buffer): number {
  for (;;) {
    try {
      return readSync(handle, part);
    } catch (error) {
      // A pipe that has nothing yet; its end is a read of 0 bytes, or EOF on some systems.
      const { code } = error as NodeJS.ErrnoException;
      if (code === 'EOF') return 0;
      if (code !== 'EAGAIN') throw error;
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 10);
    }
  }
}

function tooLarge(name: string, size: number | undefined, largest: number, what: string): CaseError {
  const has = size === undefined ? `is larger than ${largest / 1e6} MB` : `has ${(size / 1e6).toFixed(1)} MB`;
  return new CaseError(
    largest === largestCase ? 'CASE_TOO_LARGE' : 'DRAWING_TOO_LARGE',
    `this ${what} ${has}; at most ${largest / 1e6} MB are read`,
    { file: name },
    'Leave out what is not part of the compartment',
  );
}
