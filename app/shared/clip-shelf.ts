import { stat } from 'node:fs/promises';
import { InputError } from '../../src/errors.ts';
import { fileTrouble } from '../../src/testfile/on-disk.ts';
import type { ClipView } from './clip-view.ts';
import type { Engine } from './engine.ts';

interface Shelved {
  /** Size and time of the file when it was looked at: a replaced file is looked at again. */
  readonly stamp: string;
  readonly view: Promise<Omit<ClipView, 'id'>>;
  frameCount: number | null;
}

/** What is known of the clips' files, each looked at once as long as it does not change. */
export class ClipShelf {
  readonly #engine: Engine;
  readonly #shelf = new Map<string, Shelved>();
  readonly #pathOf = new Map<string, string>();

  constructor(engine: Engine) {
    this.#engine = engine;
  }

  /**
   * What a clip is.
   * @throws InputError when its file is not there or is no clip
   */
  async get(id: string, path: string): Promise<ClipView> {
    this.#pathOf.set(id, path);
    const shelved = await this.#look(path);
    return { id, ...(await shelved.view) };
  }

  /** Why a file cannot be taken as a clip, one sentence; null where it can. */
  async trouble(path: string): Promise<string | null> {
    try {
      await (await this.#look(path)).view;
      return null;
    } catch (error) {
      if (error instanceof InputError) return error.message;
      throw error;
    }
  }

  /** Frames of the clips looked at so far, by id. */
  frameCounts(): Map<string, number> {
    const counts = new Map<string, number>();
    for (const [id, path] of this.#pathOf) {
      const count = this.#shelf.get(path)?.frameCount;
      if (count !== null && count !== undefined) counts.set(id, count);
    }
    return counts;
  }

  clear(): void {
    this.#shelf.clear();
    this.#pathOf.clear();
  }

  async #look(path: string): Promise<Shelved> {
    const facts = await stat(path).catch((error: unknown) => {
      throw new InputError(`The clip ${path} cannot be read: ${fileTrouble(error)}.`);
    });
    const stamp = `${facts.size} ${facts.mtimeMs}`;
    const before = this.#shelf.get(path);
    if (before?.stamp === stamp) return before;
    const shelved: Shelved = { stamp, view: this.#engine.call('probe', { path }), frameCount: null };
    this.#shelf.set(path, shelved);
    shelved.view.then(
      (view) => {
        shelved.frameCount = view.frameCount;
      },
      () => this.#shelf.delete(path),
    );
    return shelved;
  }
}
