import { client } from '../state/bench.ts';

const MOST_KEPT = 60;
const MOST_ASKED = 2;
const SMALL_PX = 640;
const SHARPEN_MS = 130; // after the last move of a scrub

/** A decoded frame to draw. */
export interface LoadedFrame {
  readonly clip: string;
  readonly frame: number;
  readonly bitmap: ImageBitmap;
  readonly sharp: boolean;
}

interface Wish {
  readonly clip: string;
  readonly frame: number;
  readonly widthPx: number;
}

/**
 * Fetches frames, the latest wish first: while the hand scrubs, small ones; a sharp one when it rests. At most two
 * are asked for at a time, and wishes overtaken meanwhile are never asked.
 */
export class FrameLoader {
  readonly #onFrame: (frame: LoadedFrame) => void;
  readonly #kept = new Map<string, ImageBitmap>();
  readonly #asked = new Set<string>();
  #wanted: Wish | null = null;
  #sharpen: ReturnType<typeof setTimeout> | null = null;
  /** Time from wish to picture of each frame shown, ms; for the bench's own measurements. */
  readonly latenciesMs: number[] = [];
  #wishedAt = 0;

  constructor(onFrame: (frame: LoadedFrame) => void) {
    this.#onFrame = onFrame;
  }

  /** Shows a frame as soon as it can be had; `moving` while more wishes are to be expected. */
  show(clip: string, frame: number, fullWidthPx: number, moving: boolean): void {
    this.#wishedAt = performance.now();
    if (this.#sharpen) clearTimeout(this.#sharpen);
    this.#sharpen = null;
    const sharp = { clip, frame, widthPx: fullWidthPx };
    if (this.#give(sharp, true)) return;
    if (fullWidthPx <= SMALL_PX || !moving) {
      this.#want(sharp);
      return;
    }
    const small = { clip, frame, widthPx: SMALL_PX };
    if (!this.#give(small, false)) this.#want(small);
    this.#sharpen = setTimeout(() => this.#want(sharp), SHARPEN_MS);
  }

  clear(): void {
    if (this.#sharpen) clearTimeout(this.#sharpen);
    this.#wanted = null;
    for (const bitmap of this.#kept.values()) bitmap.close();
    this.#kept.clear();
  }

  #give(wish: Wish, sharp: boolean): boolean {
    const key = keyOf(wish);
    const bitmap = this.#kept.get(key);
    if (!bitmap) return false;
    this.#kept.delete(key);
    this.#kept.set(key, bitmap);
    this.#shown({ clip: wish.clip, frame: wish.frame, bitmap, sharp });
    return true;
  }

  #shown(frame: LoadedFrame): void {
    this.latenciesMs.push(performance.now() - this.#wishedAt);
    if (this.latenciesMs.length > 500) this.latenciesMs.shift();
    this.#onFrame(frame);
  }

  #want(wish: Wish): void {
    this.#wanted = wish;
    if (this.#asked.size < MOST_ASKED) void this.#ask(wish);
  }

  async #ask(wish: Wish): Promise<void> {
    const key = keyOf(wish);
    if (this.#asked.has(key)) return;
    this.#asked.add(key);
    try {
      const jpeg = await client.call('frame', wish);
      const bitmap = await createImageBitmap(new Blob([jpeg as BlobPart], { type: 'image/jpeg' }));
      this.#keep(key, bitmap);
      const wanted = this.#wanted;
      // A frame on the way to the one wanted is shown too: the picture moves with the hand.
      if (wanted?.clip === wish.clip)
        this.#shown({ clip: wish.clip, frame: wish.frame, bitmap, sharp: wish.widthPx > SMALL_PX });
      if (wanted === wish) this.#wanted = null;
    } catch {
      if (this.#wanted === wish) this.#wanted = null; // the clip's own message tells what is wrong with it
    } finally {
      this.#asked.delete(key);
      if (this.#wanted && this.#wanted !== wish) void this.#ask(this.#wanted);
    }
  }

  #keep(key: string, bitmap: ImageBitmap): void {
    this.#kept.set(key, bitmap);
    for (const [oldest, old] of this.#kept) {
      if (this.#kept.size <= MOST_KEPT) break;
      this.#kept.delete(oldest);
      old.close();
    }
  }
}

function keyOf({ clip, frame, widthPx }: Wish): string {
  return `${widthPx} ${frame} ${clip}`;
}
