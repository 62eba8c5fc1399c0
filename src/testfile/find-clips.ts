import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readdir } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { CancelledError } from '../errors.ts';

const CLIP_EXTENSIONS = ['mp4', 'mov', 'm4v', 'avi', 'mkv', 'webm', 'mts', 'm2ts', '3gp', 'mpg', 'mpeg'];
const DEEPEST_FOLDER = 8; // a search below a whole disk would not end while someone waits
const MOST_FILES = 20_000;

/** Whether a file name ends like a video file's. */
export function looksLikeClip(fileName: string): boolean {
  return CLIP_EXTENSIONS.includes(fileName.split('.').at(-1)?.toLowerCase() ?? '') && fileName.includes('.');
}

/**
 * SHA-256 of a file's content, hexadecimal.
 * @throws CancelledError when stopped; the file system's own error when the file cannot be read
 */
export async function contentHash(path: string, signal?: AbortSignal): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path, { highWaterMark: 1 << 20 })) {
    if (signal?.aborted) throw new CancelledError();
    hash.update(chunk as Buffer);
  }
  return hash.digest('hex');
}

/** Clips in a folder and the folders below it, in the order of their names; links are not followed. */
export async function clipsInFolder(folder: string, signal?: AbortSignal): Promise<string[]> {
  const found: string[] = [];
  const walk = async (at: string, depth: number): Promise<void> => {
    if (signal?.aborted) throw new CancelledError();
    const entries = await readdir(at, { withFileTypes: true }).catch(() => []);
    entries.sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true }));
    for (const entry of entries) {
      if (found.length >= MOST_FILES || entry.name.startsWith('.')) continue;
      const path = join(at, entry.name);
      if (entry.isDirectory() && depth < DEEPEST_FOLDER) await walk(path, depth + 1);
      else if (entry.isFile() && looksLikeClip(entry.name)) found.push(path);
    }
  };
  await walk(folder, 0);
  return found;
}

/** A clip that is looked for: its file as the test file names it and, where known, its content's SHA-256. */
export interface WantedClip {
  readonly id: string;
  readonly file: string;
  readonly sha256?: string | undefined;
}

/** Where a wanted clip was found, and by what: its content, or only its name where no hash was kept. */
export interface FoundClip {
  readonly id: string;
  readonly path: string;
  readonly by: 'content' | 'name';
}

/**
 * Finds clips that moved: by the hash of their content whatever they are called now, files of the same name first;
 * a clip without a kept hash by its name alone. A file of the right name with other content is not taken.
 */
export async function findClips(
  folder: string,
  wanted: readonly WantedClip[],
  options: { signal?: AbortSignal; onProgress?: (looked: number, of: number) => void } = {},
): Promise<FoundClip[]> {
  const paths = await clipsInFolder(folder, options.signal);
  const names = new Set(wanted.map((each) => baseName(each.file)));
  paths.sort((a, b) => Number(names.has(basename(b))) - Number(names.has(basename(a))));
  const open = new Map(wanted.map((each) => [each.id, each]));
  const found: FoundClip[] = [];
  let looked = 0;
  for (const path of paths) {
    if (open.size === 0) break;
    const take = (id: string, by: FoundClip['by']): void => {
      found.push({ id, path, by });
      open.delete(id);
    };
    for (const { id, file, sha256 } of [...open.values()])
      if (sha256 === undefined && baseName(file) === basename(path)) take(id, 'name');
    const hashed = [...open.values()].filter((each) => each.sha256 !== undefined);
    if (hashed.length > 0) {
      const hash = await contentHash(path, options.signal).catch((error: unknown) => {
        if (error instanceof CancelledError) throw error;
        return null; // an unreadable file is not the clip that is looked for
      });
      for (const { id, sha256 } of hashed) if (sha256 === hash) take(id, 'content');
    }
    options.onProgress?.(++looked, paths.length);
  }
  return found;
}

/** The last part of a path of either kind of slash: a test file may come from another system. */
function baseName(file: string): string {
  return file.split(/[\\/]/).at(-1) ?? file;
}
