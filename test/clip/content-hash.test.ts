import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { contentHash } from '../../src/clip/content-hash.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();

// NIST, FIPS 180-4 example messages for SHA-256.
test.each([
  ['abc', 'abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
  ['nothing', '', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
  ['a million a', 'a'.repeat(1e6), 'cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0'],
])('FIPS 180-4: %s', async (name, content, hash) => {
  const path = join(folder, name);
  writeFileSync(path, content);
  expect(await contentHash(path)).toBe(hash);
});

test('a missing file is the user’s to mend', async () => {
  const hashing = contentHash(join(folder, 'none'));
  await expect(hashing).rejects.toThrow(InputError);
  await expect(hashing).rejects.toThrow('cannot be read (ENOENT)');
});

test('cancel', async () => {
  const path = join(folder, 'a million a');
  await expect(contentHash(path, AbortSignal.abort())).rejects.toThrow(CancelledError);
});
