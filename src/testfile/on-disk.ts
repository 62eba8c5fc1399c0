import { open, readFile, rename, rm, stat } from 'node:fs/promises';
import { basename, dirname, isAbsolute, join, resolve } from 'node:path';
import { InputError } from '../errors.ts';
import { readTest } from './read-test.ts';
import type { ClipSpec, TestFile } from './schema.ts';
import { writeTest } from './write-test.ts';

const LARGEST_TEST_BYTES = 64 * 1024 * 1024; // 10,000 dwells need some 4 MB; beyond this it is no test file

function codeOf(error: unknown): string {
  return error instanceof Error && 'code' in error ? String(error.code) : '';
}

/** Says in words what a file operation failed with. */
export function fileTrouble(error: unknown): string {
  switch (codeOf(error)) {
    case 'ENOENT':
      return 'there is no such file or folder';
    case 'EACCES':
    case 'EPERM':
      return 'there is no permission';
    case 'EROFS':
      return 'the disk is read-only';
    case 'ENOSPC':
      return 'the disk is full';
    case 'EISDIR':
      return 'it is a folder';
    case 'ENOTDIR':
      return 'a part of the path is not a folder';
    case 'EMFILE':
      return 'too many files are open';
    case 'ENAMETOOLONG':
      return 'the name is too long';
    default:
      return error instanceof Error ? error.message : String(error);
  }
}

/**
 * Loads a test file from disk.
 * @throws InputError when it cannot be read or is not a test file.
 */
export async function loadTest(path: string): Promise<TestFile> {
  let text: string;
  try {
    const facts = await stat(path);
    if (facts.isDirectory()) throw new InputError(`${path} is a folder: name the test file in it.`);
    if (facts.size > LARGEST_TEST_BYTES)
      throw new InputError(`${path} is too large to be a test file (${facts.size} bytes).`);
    text = await readFile(path, 'utf8');
  } catch (error) {
    if (error instanceof InputError) throw error;
    throw new InputError(`The test file ${path} cannot be read: ${fileTrouble(error)}.`);
  }
  return readTest(text, basename(path));
}

/**
 * Writes a file so that either the old or the new content is there whatever happens in between:
 * a temporary file beside it, flushed to the disk, then renamed over it.
 * @throws InputError when the place cannot be written to; the old content is then untouched.
 */
export async function writeWhole(path: string, content: string | Uint8Array): Promise<void> {
  const temporary = join(dirname(path), `.${basename(path)}.${process.pid}.${counter++}.partial`);
  try {
    const handle = await open(temporary, 'w');
    try {
      await handle.writeFile(content);
      await handle.sync();
    } finally {
      await handle.close();
    }
    await rename(temporary, path);
  } catch (error) {
    await rm(temporary, { force: true }).catch(() => undefined);
    throw new InputError(
      `${path} cannot be written: ${fileTrouble(error)}. Choose another place or free it, then try again.`,
    );
  }
}
let counter = 0;

/** Saves a test file whole or not at all. */
export async function saveTest(path: string, test: TestFile): Promise<void> {
  await writeWhole(path, writeTest(test));
}

/** Where a clip lies: its path is relative to the test file unless absolute. */
export function clipPath(testPath: string, clip: ClipSpec): string {
  return isAbsolute(clip.file) ? clip.file : resolve(dirname(testPath), clip.file);
}
