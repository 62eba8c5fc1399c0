import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';

/** Makes a folder for the calling test file and removes it when the file's tests are through. */
export function tempFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'dwellbook-test-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}
