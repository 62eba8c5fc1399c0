import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { pipeline } from 'node:stream/promises';
import { CancelledError, InputError } from '../errors.ts';

/**
 * SHA-256 of a file's content as 64 hexadecimal digits, read piece by piece. It finds a clip again that was moved or
 * renamed, and lets a report say which very file was measured. Throws InputError where the file cannot be read,
 * CancelledError when cancelled.
 */
export async function contentHash(path: string, signal?: AbortSignal): Promise<string> {
  const hash = createHash('sha256');
  try {
    await pipeline(createReadStream(path, { highWaterMark: 1 << 20 }), hash, signal ? { signal } : {});
  } catch (error) {
    if (signal?.aborted) throw new CancelledError();
    const code = (error as NodeJS.ErrnoException).code ?? String(error);
    throw new InputError(`${path} cannot be read (${code}); check the path and its permissions.`);
  }
  return hash.digest('hex');
}
