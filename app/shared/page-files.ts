import { readFile, realpath } from 'node:fs/promises';
import { join } from 'node:path';
import { pageFileType } from './content-policy.ts';
import { isInside } from './list-folder.ts';

/** A file of the built page. */
export interface PageFile {
  readonly type: string;
  readonly body: Buffer;
}

/**
 * A file of the built page by the path of its address.
 * @param folder the built page, `dist/page`
 * @param pathname as in the address, percent signs undone or not
 * @returns null for what is not there, what leads out of the folder, and endings that no page file has
 */
export async function pageFile(folder: string, pathname: string): Promise<PageFile | null> {
  let plain: string;
  try {
    plain = decodeURIComponent(pathname);
  } catch {
    return null;
  }
  if (plain.includes('\0') || plain.includes('\\')) return null;
  const path = join(folder, plain === '/' || plain === '' ? 'index.html' : plain);
  const type = pageFileType(path);
  if (type === null || !isInside(path, folder)) return null;
  try {
    const [real, realFolder] = await Promise.all([realpath(path), realpath(folder)]);
    return isInside(real, realFolder) ? { type, body: await readFile(real) } : null;
  } catch {
    return null;
  }
}
