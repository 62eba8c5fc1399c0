import { readFile, rm, writeFile } from 'node:fs/promises';
import { hostname } from 'node:os';
import { basename, dirname, join } from 'node:path';

interface Holder {
  readonly pid: number;
  readonly host: string;
}

/** A test file held by this program, so that a second one is told. */
export interface Lock {
  readonly release: () => Promise<void>;
}

/** Where the lock of a test file lies. */
export function lockPath(testPath: string): string {
  return join(dirname(testPath), `.${basename(testPath)}.lock`);
}

/**
 * Takes the lock of a test file. A lock left by a program that no longer runs on this machine is taken over.
 * @returns the lock, or one sentence saying who holds it
 */
export async function takeLock(
  testPath: string,
  isAlive: (pid: number) => boolean = processIsAlive,
): Promise<Lock | string> {
  const path = lockPath(testPath);
  const mine = JSON.stringify({ pid: process.pid, host: hostname() } satisfies Holder);
  for (let attempt = 0; attempt < 2; attempt++) {
    try {
      await writeFile(path, mine, { flag: 'wx' });
      return { release: () => rm(path, { force: true }) };
    } catch (error) {
      const code = error instanceof Error && 'code' in error ? error.code : '';
      if (code !== 'EEXIST') return 'this folder cannot be written to';
    }
    const holder = await readHolder(path);
    if (holder && holder.host !== hostname())
      return `it is open in Dwellbook on ${holder.host} (if not, delete ${path})`;
    if (holder && holder.pid !== process.pid && isAlive(holder.pid))
      return `it is open in another Dwellbook on this machine (process ${holder.pid})`;
    await rm(path, { force: true });
  }
  return 'another Dwellbook is opening it at this moment';
}

async function readHolder(path: string): Promise<Holder | null> {
  try {
    const raw: unknown = JSON.parse(await readFile(path, 'utf8'));
    if (typeof raw !== 'object' || raw === null || !('pid' in raw) || !('host' in raw)) return null;
    return typeof raw.pid === 'number' && typeof raw.host === 'string'
      ? { pid: raw.pid, host: raw.host }
      : null;
  } catch {
    return null; // torn or gone: nobody's
  }
}

function processIsAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM';
  }
}
