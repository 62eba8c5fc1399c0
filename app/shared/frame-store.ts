import { CancelledError, InputError } from '../../src/errors.ts';
import type { Engine, FramePicture } from './engine.ts';

const MOST_BYTES = 384 * 1024 * 1024;
const SMALL_PX = 640; // pictures no wider are kept for whole stretches, for scrubbing
const SMALL_RUN = 180;
const SHARP_RUN = 20;
const SHARP_BACK = 6; // stepping back costs a seek, so a few frames before are read along

interface Run {
  readonly first: number;
  readonly end: number;
  next: number;
  readonly stop: AbortController;
  readonly done: Promise<void>;
}

interface Shelf {
  readonly pictures: Map<number, Uint8Array>;
  readonly waiting: Map<number, { resolve: (jpeg: Uint8Array) => void; reject: (error: Error) => void }[]>;
  run: Run | null;
  last: number;
}

/**
 * Displayed frames of clips, read in runs and kept for a while: the next step and the next turn of a scrub find
 * theirs here. A wish outside the run being read ends that run: the latest wish is what matters.
 */
export class FrameStore {
  readonly #engine: Engine;
  readonly #shelves = new Map<string, Shelf>();
  #bytes = 0;

  constructor(engine: Engine) {
    this.#engine = engine;
  }

  /**
   * One frame as JPEG.
   * @throws CancelledError when a later wish took its place; InputError when the clip cannot give it
   */
  async get(path: string, frameCount: number, frame: number, widthPx: number): Promise<Uint8Array> {
    const shelf = this.#shelf(`${widthPx} ${path}`);
    const backwards = frame < shelf.last;
    shelf.last = frame;
    const kept = shelf.pictures.get(frame);
    if (kept) {
      this.#readAhead(shelf, path, frameCount, frame, widthPx, backwards);
      return kept;
    }
    if (frame >= frameCount)
      throw new InputError(`The clip has ${frameCount} frames: there is no frame ${frame}.`);
    const picture = new Promise<Uint8Array>((resolve, reject) => {
      const waiting = shelf.waiting.get(frame) ?? [];
      waiting.push({ resolve, reject });
      shelf.waiting.set(frame, waiting);
    });
    const { run } = shelf;
    if (!run || frame < run.next || frame >= run.end)
      this.#start(shelf, path, runFor(frame, frameCount, widthPx, backwards), widthPx);
    return picture;
  }

  /** Forgets everything, and stops reading. */
  clear(): void {
    for (const shelf of this.#shelves.values()) this.#stop(shelf);
    this.#shelves.clear();
    this.#bytes = 0;
  }

  #shelf(key: string): Shelf {
    const found = this.#shelves.get(key);
    if (found) {
      this.#shelves.delete(key);
      this.#shelves.set(key, found); // most recently used last
      return found;
    }
    const made: Shelf = { pictures: new Map(), waiting: new Map(), run: null, last: 0 };
    this.#shelves.set(key, made);
    return made;
  }

  /** Starts the next run while the hand is still on the way through this one. */
  #readAhead(
    shelf: Shelf,
    path: string,
    frameCount: number,
    frame: number,
    widthPx: number,
    backwards: boolean,
  ): void {
    if (shelf.run) return;
    const [ahead, step] = widthPx <= SMALL_PX ? [SMALL_RUN / 2, SMALL_RUN] : [SHARP_RUN / 3, SHARP_RUN / 2];
    const probe = Math.round(backwards ? frame - ahead : frame + ahead);
    if (probe < 0 || probe >= frameCount || shelf.pictures.has(probe)) return;
    let first = probe;
    if (backwards) first = Math.max(0, probe - step + 1);
    else while (first > frame && !shelf.pictures.has(first - 1)) first--;
    this.#start(shelf, path, [first, Math.min(frameCount, first + step)], widthPx);
  }

  #start(shelf: Shelf, path: string, [first, end]: readonly [number, number], widthPx: number): void {
    this.#stop(shelf);
    const stop = new AbortController();
    const onProgress = ({ frame, jpeg }: FramePicture): void => {
      if (shelf.run?.stop !== stop) return;
      shelf.run.next = frame + 1;
      this.#keep(shelf, frame, jpeg);
    };
    const args = { path, first, count: end - first, widthPx };
    const done = this.#engine.call('frames', args, { signal: stop.signal, onProgress }).then(
      () =>
        this.#ended(shelf, stop, new InputError(`A frame from ${first} to ${end - 1} could not be decoded.`)),
      (error: unknown) => this.#ended(shelf, stop, error instanceof Error ? error : new Error(String(error))),
    );
    shelf.run = { first, end, next: first, stop, done };
  }

  #stop(shelf: Shelf): void {
    const { run } = shelf;
    if (!run) return;
    shelf.run = null;
    run.stop.abort();
    for (const [frame, waiting] of [...shelf.waiting]) {
      if (frame < run.next || frame >= run.end) continue;
      shelf.waiting.delete(frame);
      for (const each of waiting) each.reject(new CancelledError());
    }
  }

  #ended(shelf: Shelf, stop: AbortController, reason: Error): void {
    if (shelf.run?.stop !== stop) return;
    shelf.run = null;
    const waiting = [...shelf.waiting.values()].flat();
    shelf.waiting.clear();
    for (const each of waiting) each.reject(reason);
  }

  #keep(shelf: Shelf, frame: number, jpeg: Uint8Array): void {
    if (!shelf.pictures.has(frame)) this.#bytes += jpeg.length;
    shelf.pictures.set(frame, jpeg);
    for (const each of shelf.waiting.get(frame) ?? []) each.resolve(jpeg);
    shelf.waiting.delete(frame);
    for (const [key, oldest] of this.#shelves) {
      if (this.#bytes <= MOST_BYTES) return;
      for (const [at, bytes] of oldest.pictures) {
        if (this.#bytes <= MOST_BYTES) return;
        oldest.pictures.delete(at);
        this.#bytes -= bytes.length;
      }
      if (oldest !== shelf) this.#shelves.delete(key);
    }
  }
}

function runFor(frame: number, frameCount: number, widthPx: number, backwards: boolean): [number, number] {
  if (widthPx <= SMALL_PX) {
    const first = frame - (frame % (SMALL_RUN / 3));
    return [first, Math.min(frameCount, first + SMALL_RUN)];
  }
  const first = backwards ? Math.max(0, frame - SHARP_BACK) : frame;
  return [first, Math.min(frameCount, backwards ? frame + 1 : frame + SHARP_RUN)];
}
