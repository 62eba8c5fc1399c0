import { createHash } from 'node:crypto';
import { type FileHandle, open, readFile, rename, rm } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { type Edit, editSchema } from './edit-schema.ts';
import { applyEdit } from './edits.ts';
import type { TestFile } from './schema.ts';

/**
 * The journal beside a test file: every edit is appended to it before it is shown as done, so that a program killed
 * between two saves loses at most the edit in hand. Lines of JSON: first the hash of the test file it starts from,
 * then edits; before a save, the hash of what is being written, so that it is known afterwards which edits it holds.
 */
type JournalLine = { base: string } | { saving: string } | { edit: Edit };

/** Where the journal of a test file lies. */
export function journalPath(testPath: string): string {
  return join(dirname(testPath), `.${basename(testPath)}.journal`);
}

/** SHA-256 of a test file's text, hexadecimal. */
export function textHash(text: string): string {
  return createHash('sha256').update(text, 'utf8').digest('hex');
}

/** An append-only journal; calls are carried out one after another in the order made. */
export class Journal {
  readonly path: string;
  #handle: FileHandle | null = null;
  #last: Promise<void> = Promise.resolve();

  constructor(testPath: string) {
    this.path = journalPath(testPath);
  }

  /** Starts anew from a test file with this text hash; what stood in the journal is gone. */
  start(baseHash: string): Promise<void> {
    return this.#queue(async () => {
      await this.#handle?.close();
      this.#handle = await open(this.path, 'w');
      await this.#write({ base: baseHash });
    });
  }

  /** Goes on with the journal that lies there. */
  reopen(): Promise<void> {
    return this.#queue(async () => {
      await this.#handle?.close();
      this.#handle = await open(this.path, 'a');
    });
  }

  /** Appends an edit; done when the operating system has it. */
  append(edit: Edit): Promise<void> {
    return this.#queue(() => this.#write({ edit }));
  }

  /** Notes that a test file with this text hash, holding every edit appended so far, is about to be written. */
  noteSaving(textHashToCome: string): Promise<void> {
    return this.#queue(() => this.#write({ saving: textHashToCome }));
  }

  /** Closes and removes the journal: the test file holds everything. */
  finish(): Promise<void> {
    return this.#queue(async () => {
      await this.#handle?.close();
      this.#handle = null;
      await rm(this.path, { force: true });
    });
  }

  /** Closes the journal and leaves it where it lies. */
  close(): Promise<void> {
    return this.#queue(async () => {
      await this.#handle?.close();
      this.#handle = null;
    });
  }

  async #write(line: JournalLine): Promise<void> {
    if (!this.#handle) throw new Error('the journal is not open');
    await this.#handle.appendFile(`${JSON.stringify(line)}\n`);
  }

  #queue(work: () => Promise<void>): Promise<void> {
    const done = this.#last.then(work);
    this.#last = done.catch(() => undefined); // a failed write must not stop the later ones
    return done;
  }
}

/**
 * The edits in a journal that a test file does not hold yet.
 * @param fileHash hash of the test file's text as it lies on the disk
 * @returns null where the journal belongs to another state of the file, so that its edits cannot be applied
 */
export function unsavedEdits(journalText: string, fileHash: string): Edit[] | null {
  let edits: Edit[] | null = null;
  for (const text of journalText.split('\n')) {
    const line = parseLine(text);
    if (line === null) continue; // the last line may be torn by the kill
    if ('base' in line) edits = line.base === fileHash ? [] : null;
    else if ('saving' in line) edits = line.saving === fileHash ? [] : edits;
    else edits?.push(line.edit);
  }
  return edits;
}

function parseLine(text: string): JournalLine | null {
  let raw: unknown;
  try {
    raw = JSON.parse(text);
  } catch {
    return null;
  }
  if (typeof raw !== 'object' || raw === null) return null;
  if ('base' in raw && typeof raw.base === 'string') return { base: raw.base };
  if ('saving' in raw && typeof raw.saving === 'string') return { saving: raw.saving };
  const edit = 'edit' in raw ? editSchema.safeParse(raw.edit) : null;
  return edit?.success ? { edit: edit.data } : null;
}

/** What was recovered from a journal. */
export interface Recovery {
  readonly test: TestFile;
  /** Edits applied that the test file did not hold. */
  readonly recovered: number;
  /** Where a journal that belongs to another state of the file was put aside; null where there was none. */
  readonly putAside: string | null;
}

/** Reads the journal beside a test file, if there is one, and applies what the file does not hold. */
export async function recover(testPath: string, text: string, test: TestFile): Promise<Recovery> {
  const path = journalPath(testPath);
  const journal = await readFile(path, 'utf8').catch(() => null);
  if (journal === null) return { test, recovered: 0, putAside: null };
  const edits = unsavedEdits(journal, textHash(text));
  if (edits === null) {
    const aside = `${path}.${textHash(journal).slice(0, 8)}.aside`;
    const moved = await rename(path, aside).then(
      () => true,
      () => false,
    );
    return { test, recovered: 0, putAside: moved ? aside : null };
  }
  let recovered = 0;
  let current = test;
  for (const edit of edits) {
    try {
      current = applyEdit(current, edit);
      recovered++;
    } catch {
      break; // what follows builds on it
    }
  }
  return { test: current, recovered, putAside: null };
}
