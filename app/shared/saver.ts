import { type Journal, textHash } from '../../src/testfile/journal.ts';
import { writeWhole } from '../../src/testfile/on-disk.ts';
import type { SaveState } from './bench-state.ts';

const QUIET_MS = 300; // after the last edit, so that a row of nudges is one save
const RETRY_MS = 5000;

/** What a saver needs from its surroundings. */
export interface SaverParts {
  readonly path: string;
  readonly journal: Journal;
  /** The text to save, as things stand when it is asked. */
  readonly text: () => string;
  readonly onState: (state: SaveState) => void;
  /** Writes a file whole or not at all. */
  readonly write?: (path: string, text: string) => Promise<void>;
  readonly now?: () => number;
}

/** Saves a test file a moment after each edit; what cannot be saved stays in memory and journal and is tried again. */
export class Saver {
  readonly #parts: SaverParts;
  #state: SaveState = { status: 'saved', atMs: null, error: null };
  #changes = 0;
  #timer: NodeJS.Timeout | null = null;
  #running: Promise<void> | null = null;
  #closed = false;

  constructor(parts: SaverParts) {
    this.#parts = parts;
  }

  get state(): SaveState {
    return this.#state;
  }

  /** Says that something changed: it will be saved shortly. */
  changed(): void {
    this.#changes++;
    this.#set({ ...this.#state, status: 'unsaved' });
    this.#saveIn(QUIET_MS);
  }

  /** Saves what was recovered from a journal, which is kept as it is until then. */
  async saveRecovered(): Promise<void> {
    this.#changes++;
    this.#set({ ...this.#state, status: 'unsaved' });
    await this.#parts.journal.reopen();
    await this.flush();
  }

  /** Saves now if anything is unsaved; true when everything is in the file. */
  async flush(): Promise<boolean> {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = null;
    await this.#running;
    if (this.#state.status !== 'saved') await this.#save();
    return this.#state.status === 'saved';
  }

  /** Saves what is unsaved and ends; the journal goes only when the file holds everything. */
  async close(): Promise<void> {
    this.#closed = true;
    const complete = await this.flush();
    if (this.#timer) clearTimeout(this.#timer);
    await (complete ? this.#parts.journal.finish() : this.#parts.journal.close()).catch(() => undefined);
  }

  #saveIn(ms: number): void {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = setTimeout(() => {
      this.#timer = null;
      void this.#save();
    }, ms);
  }

  #save(): Promise<void> {
    this.#running ??= this.#saveOnce().finally(() => {
      this.#running = null;
    });
    return this.#running;
  }

  async #saveOnce(): Promise<void> {
    const { path, journal, text, write = writeWhole, now = Date.now } = this.#parts;
    const changesBefore = this.#changes;
    this.#set({ ...this.#state, status: 'saving' });
    try {
      const content = text();
      const hash = textHash(content);
      await journal.noteSaving(hash).catch(() => undefined);
      await write(path, content);
      const complete = this.#changes === changesBefore;
      this.#set({ status: complete ? 'saved' : 'unsaved', atMs: now(), error: null });
      // A journal with edits made during the save is kept; the next save will start it anew.
      if (complete) await journal.start(hash).catch(() => undefined);
      else if (!this.#closed) this.#saveIn(QUIET_MS);
    } catch (error) {
      const message = error instanceof Error ? error.message : String(error);
      this.#set({ status: 'unsaved', atMs: this.#state.atMs, error: message });
      if (!this.#closed) this.#saveIn(RETRY_MS);
    }
  }

  #set(state: SaveState): void {
    this.#state = state;
    this.#parts.onState(state);
  }
}
