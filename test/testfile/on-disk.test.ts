import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { clipPath, loadTest, saveTest, writeWhole } from '../../src/testfile/on-disk.ts';

let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-'));
});
afterEach(async () => {
  await rm(folder, { recursive: true, force: true });
});

it('saves a test whole, and loads it again as it was', async () => {
  const path = join(folder, 'a.dwellbook');
  await writeFile(path, '{"format":"dwellbook-test","version":1,"title":"T"}');
  const test = await loadTest(path);
  await saveTest(path, { ...test, title: 'U' });
  expect((await loadTest(path)).title).toBe('U');
  expect(await readdir(folder)).toEqual(['a.dwellbook']);
});

it('a file that cannot be written leaves the old content and no half file', async () => {
  const taken = join(folder, 'taken');
  await mkdir(taken);
  await writeFile(join(taken, 'inside'), 'x');
  await expect(writeWhole(taken, 'new')).rejects.toThrow(
    /cannot be written: it is a folder|cannot be written: .*Choose another place/,
  );
  expect(await readdir(folder)).toEqual(['taken']);
  expect(await readFile(join(taken, 'inside'), 'utf8')).toBe('x');
});

it.each([
  ['missing.dwellbook', /cannot be read: there is no such file or folder/],
  ['.', /is a folder: name the test file in it/],
])('%s is refused in one sentence', async (name, expected) => {
  await expect(loadTest(join(folder, name))).rejects.toThrow(expected);
});

it('a clip path is relative to the test file unless absolute', () => {
  const clip = { id: 'c', setup: 's', file: 'clips/a.mp4' };
  expect(clipPath(join(folder, 'a.dwellbook'), clip)).toBe(join(folder, 'clips', 'a.mp4'));
  expect(clipPath(join(folder, 'a.dwellbook'), { ...clip, file: '/abs/a.mp4' })).toBe('/abs/a.mp4');
});
