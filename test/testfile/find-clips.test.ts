import { mkdir, mkdtemp, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { CancelledError } from '../../src/errors.ts';
import { clipsInFolder, contentHash, findClips, looksLikeClip } from '../../src/testfile/find-clips.ts';

let folder = '';

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-find-'));
  await mkdir(join(folder, 'deep/er'), { recursive: true });
});
afterEach(() => rm(folder, { recursive: true, force: true }));

async function put(name: string, content: string): Promise<string> {
  await writeFile(join(folder, name), content);
  return join(folder, name);
}

// SHA-256 of the message "abc", FIPS 180-2, appendix B.1.
const ABC = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';

it('FIPS 180-2, B.1: the content hash of "abc"', async () => {
  expect(await contentHash(await put('a.mp4', 'abc'))).toBe(ABC);
});

it('a clip that was renamed and moved is found by its content', async () => {
  await put('2.4Hz.mp4', 'another clip under the old name');
  const path = await put('deep/er/renamed.mov', 'abc');
  const found = await findClips(folder, [{ id: 'c1', file: 'clips/2.4Hz.mp4', sha256: ABC }]);
  expect(found).toEqual([{ id: 'c1', path, by: 'content' }]);
});

it('a file of the right name with other content is not taken', async () => {
  await put('2.4Hz.mp4', 'replaced');
  expect(await findClips(folder, [{ id: 'c1', file: 'clips/2.4Hz.mp4', sha256: ABC }])).toEqual([]);
});

it('without a kept hash the name decides, whichever slash the path was written with', async () => {
  const path = await put('deep/x.mp4', 'anything');
  const found = await findClips(folder, [{ id: 'c1', file: 'D:\\clips\\x.mp4' }]);
  expect(found).toEqual([{ id: 'c1', path, by: 'name' }]);
});

it('clips are listed in the order of their numbers; hidden files, other files and links are not', async () => {
  for (const name of ['10Hz.mp4', '9Hz.MOV', 'notes.txt', '.hidden.mp4', 'mp4']) await put(name, 'x');
  await symlink(folder, join(folder, 'loop'));
  const names = (await clipsInFolder(folder)).map((path) => path.slice(folder.length + 1));
  expect(names).toEqual(['9Hz.MOV', '10Hz.mp4']);
  expect(looksLikeClip('a.tar.mp4')).toBe(true);
});

it('stops when asked', async () => {
  await put('a.mp4', 'abc');
  await expect(
    findClips(folder, [{ id: 'c', file: 'b.mp4' }], { signal: AbortSignal.abort() }),
  ).rejects.toThrow(CancelledError);
});
