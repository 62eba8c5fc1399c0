import { mkdir, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { emptyTest } from '../../src/testfile/edits.ts';
import { saveTest } from '../../src/testfile/on-disk.ts';

/**
 * Writes an empty test into a folder, under a file name made from its title that is not taken.
 * @returns the path of the file
 * @throws InputError when the folder cannot be written to
 */
export async function newTestFile(folder: string, title: string): Promise<string> {
  await mkdir(folder, { recursive: true }).catch(() => undefined); // the save says what is wrong
  const stem = fileStem(title);
  let path = join(folder, `${stem}.dwellbook`);
  for (let count = 2; await isThere(path); count++) path = join(folder, `${stem} ${count}.dwellbook`);
  await saveTest(path, emptyTest(title));
  return path;
}

/** A title as a file name that every file system takes. */
export function fileStem(title: string): string {
  const plain = title
    .normalize('NFC')
    // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what must go
    .replace(/[\\/:*?"<>|\u0000-\u001f]+/g, ' ')
    .replace(/\s+/g, ' ')
    .replace(/^[. ]+|[. ]+$/g, '')
    .slice(0, 80);
  return plain === '' || /^(con|prn|aux|nul|com\d|lpt\d)$/i.test(plain) ? `test ${plain}`.trim() : plain;
}

async function isThere(path: string): Promise<boolean> {
  return stat(path).then(
    () => true,
    () => false,
  );
}
