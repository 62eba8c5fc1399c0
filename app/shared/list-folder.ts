import { readdir, realpath } from 'node:fs/promises';
import { dirname, isAbsolute, join, relative, resolve } from 'node:path';
import { InputError } from '../../src/errors.ts';
import { looksLikeClip } from '../../src/testfile/find-clips.ts';
import { fileTrouble } from '../../src/testfile/on-disk.ts';
import type { FolderEntry, FolderListing } from './answers.ts';

const MOST_ENTRIES = 5000;

/** Whether a path lies in a folder or is it; both absolute and without links. */
export function isInside(path: string, folder: string): boolean {
  const way = relative(folder, path);
  return way === '' || (!way.startsWith('..') && !isAbsolute(way));
}

/**
 * Lists folders, test files and clips of a folder, by name; hidden ones and links that lead out are left out.
 * @param roots the folders that may be looked at, with what is below them
 * @throws InputError when the folder lies outside them or cannot be read
 */
export async function listFolder(path: string | undefined, roots: readonly string[]): Promise<FolderListing> {
  const realRoots: string[] = [];
  for (const root of roots) {
    const real = await realpath(root).catch(() => null);
    if (real !== null && !realRoots.includes(real)) realRoots.push(real);
  }
  const wanted = resolve(path ?? realRoots[0] ?? '.');
  const real = await realpath(wanted).catch((error: unknown) => {
    throw new InputError(`The folder ${wanted} cannot be read: ${fileTrouble(error)}.`);
  });
  if (!realRoots.some((root) => isInside(real, root)))
    throw new InputError(`The folder ${wanted} is outside the folders that can be looked at from here.`);
  const listed = await readdir(real, { withFileTypes: true }).catch((error: unknown) => {
    throw new InputError(`The folder ${wanted} cannot be read: ${fileTrouble(error)}.`);
  });
  const entries: FolderEntry[] = [];
  for (const entry of listed) {
    const kind = entry.isDirectory() ? 'folder' : entry.isFile() ? kindOfFile(entry.name) : null;
    if (kind && !entry.name.startsWith('.'))
      entries.push({ name: entry.name, path: join(real, entry.name), kind });
  }
  const rank = { folder: 0, test: 1, clip: 2 };
  entries.sort(
    (a, b) => rank[a.kind] - rank[b.kind] || a.name.localeCompare(b.name, 'en', { numeric: true }),
  );
  const parent = dirname(real);
  return {
    path: real,
    parent: parent !== real && realRoots.some((root) => isInside(parent, root)) ? parent : null,
    entries: entries.slice(0, MOST_ENTRIES),
    roots: realRoots,
  };
}

function kindOfFile(name: string): 'test' | 'clip' | null {
  if (name.toLowerCase().endsWith('.dwellbook')) return 'test';
  return looksLikeClip(name) ? 'clip' : null;
}
