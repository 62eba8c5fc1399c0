import { appendFile, mkdtemp, readdir, readFile, rm, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import type { Edit } from '../../src/testfile/edit-schema.ts';
import { applyEdit, emptyTest } from '../../src/testfile/edits.ts';
import { Journal, journalPath, recover, textHash, unsavedEdits } from '../../src/testfile/journal.ts';
import { writeTest } from '../../src/testfile/write-test.ts';

let folder = '';
let path = '';
const base = emptyTest('before');
const baseText = writeTest(base);
const titles = ['one', 'two', 'three'].map((title): Edit => ({ kind: 'title', title }));

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-journal-'));
  path = join(folder, 'a.dwellbook');
  await writeFile(path, baseText);
});
afterEach(() => rm(folder, { recursive: true, force: true }));

async function journalOfTitles(): Promise<Journal> {
  const journal = new Journal(path);
  await journal.start(textHash(baseText));
  await Promise.all(titles.map((edit) => journal.append(edit)));
  return journal;
}

it('edits appended at once are kept in order and applied when the file is opened again', async () => {
  await (await journalOfTitles()).close();
  const { test, recovered } = await recover(path, baseText, base);
  expect([test.title, recovered]).toEqual(['three', 3]);
});

it('cut at any byte, the journal gives every edit whose line is whole', async () => {
  await (await journalOfTitles()).close();
  const whole = await readFile(journalPath(path), 'utf8');
  const ends = [...whole.matchAll(/\n/g)].map((match) => match.index);
  for (let bytes = whole.length; bytes > (ends[0] ?? 0); bytes--) {
    await truncate(journalPath(path), bytes);
    const cut = await readFile(journalPath(path), 'utf8');
    const complete = ends.slice(1).filter((end) => end <= bytes).length;
    expect(unsavedEdits(cut, textHash(baseText))).toEqual(titles.slice(0, complete));
  }
});

it('killed between the save and the fresh journal, nothing is applied twice', async () => {
  const journal = await journalOfTitles();
  const saved = titles.reduce(applyEdit, base);
  const savedText = writeTest(saved);
  await journal.noteSaving(textHash(savedText));
  await journal.append({ kind: 'title', title: 'after the save' });
  await journal.close();
  expect((await recover(path, savedText, saved)).recovered).toBe(1);
});

it('killed before the save, all edits are applied although a save was announced', async () => {
  const journal = await journalOfTitles();
  await journal.noteSaving(textHash('never written'));
  await journal.close();
  expect((await recover(path, baseText, base)).recovered).toBe(3);
});

it('a journal of another state of the file is put aside, not applied and not lost', async () => {
  await (await journalOfTitles()).close();
  const { recovered, putAside, test } = await recover(path, 'edited elsewhere', base);
  expect([recovered, test]).toEqual([0, base]);
  expect(await readFile(putAside ?? '', 'utf8')).toContain('three');
});

it('finishing leaves no file behind', async () => {
  await (await journalOfTitles()).finish();
  expect(await readdir(folder)).toEqual(['a.dwellbook']);
});

it('lines that are no edits are passed over', async () => {
  await (await journalOfTitles()).close();
  await appendFile(journalPath(path), '{"edit":{"kind":"format-disk"}}\nnull\n[1]\n{"edit":7}\n');
  expect((await recover(path, baseText, base)).recovered).toBe(3);
});
