import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, rename, rm, stat } from 'node:fs/promises';
import { basename, join } from 'node:path';
import type { Readable } from 'node:stream';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { InputError } from '../../src/errors.ts';
import { contentHash, looksLikeClip } from '../../src/testfile/find-clips.ts';
import { fileTrouble } from '../../src/testfile/on-disk.ts';

/** Largest file taken, bytes: an hour of 4K from a phone is some 25 GB. */
export const LARGEST_UPLOAD_BYTES = 64 * 1024 ** 3;

let uploads = 0;

/**
 * Writes a dropped clip into a folder, whole or not at all. A clip that lies there already with the same content is
 * not written twice; another of the same name gets a number.
 * @returns the path of the clip
 * @throws InputError when the name is no clip's, the file is too large, or the folder cannot be written to
 */
export async function takeUpload(body: Readable, name: string, folder: string): Promise<string> {
  const plain = basename(name.replaceAll('\\', '/'));
  if (!looksLikeClip(plain) || plain.startsWith('.') || plain.length > 200)
    throw new InputError(`${plain} is not a clip: drop videos (.mp4, .mov ...).`);
  const partial = join(folder, `.${process.pid}.${uploads++}.partial`);
  const hash = createHash('sha256');
  let bytes = 0;
  const watch = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      hash.update(chunk);
      if (bytes > LARGEST_UPLOAD_BYTES) done(new InputError(`${plain} is too large to be taken in.`));
      else done(null, chunk);
    },
  });
  try {
    await mkdir(folder, { recursive: true });
    await pipeline(body, watch, createWriteStream(partial, { flags: 'wx' }));
    const sha256 = hash.digest('hex');
    for (let count = 1; ; count++) {
      const path = join(folder, count === 1 ? plain : numbered(plain, count));
      const there = await stat(path).catch(() => null);
      if (!there) {
        await rename(partial, path);
        return path;
      }
      if (there.isFile() && there.size === bytes && (await contentHash(path)) === sha256) {
        await rm(partial, { force: true });
        return path;
      }
    }
  } catch (error) {
    await rm(partial, { force: true }).catch(() => undefined);
    if (error instanceof InputError) throw error;
    throw new InputError(`${plain} could not be copied into ${folder}: ${fileTrouble(error)}.`);
  }
}

function numbered(name: string, count: number): string {
  const dot = name.lastIndexOf('.');
  return `${name.slice(0, dot)} ${count}${name.slice(dot)}`;
}
