import { unpackFrame } from '../../shared/frame-bytes.ts';
import { client } from '../state/bench.ts';

const MOST_KEPT = 60;
const MOST_ASKED = 2; // one that may be overtaken, and the latest
const AHEAD = 4; // frames kept ready in the direction of the last step
const SMALL_PX = 640;
const SHARPEN_MS = 130; // after the last move of a scrub

/** A decoded frame to draw. */
export interface LoadedFrame {
  readonly clip: string;
  /** The frame that the picture shows; while the hand moves it may lag behind the one wished for. */
  readonly frame: number;
  readonly bitmap: ImageBitmap;
  readonly sharp: boolean;
}

interface Wish {
  readonly clip: string;
  readonly frame: number;
  readonly widthPx: number;
  /** The nearest picture at hand will do. */
  readonly near: boolean;
}

/**
 * Fetches frames, the latest wish first: while the hand scrubs, small ones near the place; exactly the sharp one when
 * it rests. At most two are asked for at a time, and wishes overtaken meanwhile are never asked.
 */
export class FrameLoader {
  readonly #onFrame: (frame: LoadedFrame) => void;
  readonly #kept = new Map<string, ImageBitmap>();
  /** Frames that could not be had ahead of time, such as those beyond the clip's end: not asked for again and again. */
  readonly #missing = new Set<string>();
  #asking = 0;
  #turn = 0;
  #shownTurn = 0;
  #at = 0;
  #step = 1;
  #wanted: Wish | null = null;
  #sharpen: ReturnType<typeof setTimeout> | null = null;
  #wishedAt = 0;
  /** Time from wish to picture of the frames shown last, ms: for measuring the page's speed. */
  readonly latenciesMs: number[] = [];

  constructor(onFrame: (frame: LoadedFrame) => void) {
    this.#onFrame = onFrame;
  }

  /** Shows a frame as soon as it can be had; `moving` while more wishes are to be expected. */
  show(clip: string, frame: number, fullWidthPx: number, moving: boolean): void {
    this.#wishedAt = performance.now();
    this.#step = frame === this.#at ? this.#step : Math.sign(frame - this.#at);
    this.#at = frame;
    if (this.#sharpen) clearTimeout(this.#sharpen);
    this.#sharpen = null;
    const sharp: Wish = { clip, frame, widthPx: fullWidthPx, near: false };
    const bitmap = this.#kept.get(keyOf(sharp));
    if (bitmap) {
      this.#wanted = null;
      this.#shownTurn = ++this.#turn;
      this.#shown({ clip, frame, bitmap, sharp: true });
      this.#readAhead(sharp);
    } else if (!moving) this.#want(sharp);
    else {
      this.#want({ ...sharp, widthPx: Math.min(SMALL_PX, fullWidthPx), near: true });
      this.#sharpen = setTimeout(() => this.#want(sharp), SHARPEN_MS);
    }
  }

  #shown(frame: LoadedFrame): void {
    this.latenciesMs.push(performance.now() - this.#wishedAt);
    if (this.latenciesMs.length > 1000) this.latenciesMs.shift();
    this.#onFrame(frame);
  }

  #want(wish: Wish): void {
    this.#wanted = wish;
    if (this.#asking < MOST_ASKED) void this.#askOn();
  }

  async #askOn(): Promise<void> {
    this.#asking++;
    let settled: Wish | null = null;
    while (this.#wanted) {
      settled = null;
      const wish: Wish = this.#wanted;
      this.#wanted = null;
      const turn = ++this.#turn;
      try {
        const { frame, jpeg } = unpackFrame(await client.call('frame', wish));
        const bitmap = await createImageBitmap(new Blob([jpeg as BlobPart], { type: 'image/jpeg' }));
        if (!wish.near) this.#keep(keyOf(wish), bitmap);
        if (turn < this.#shownTurn) continue; // a later wish was answered first
        this.#shownTurn = turn;
        this.#shown({ clip: wish.clip, frame, bitmap, sharp: !wish.near });
        if (!wish.near && !this.#wanted) settled = wish;
      } catch {
        // the clip's own message tells what is wrong with it
      }
    }
    this.#asking--;
    if (settled) this.#readAhead(settled);
  }

  /** Fetches the next frames in the direction of the last step, as long as nothing else is wished for. */
  #readAhead({ clip, frame, widthPx }: Wish): void {
    if (this.#asking > 0 || this.#step === 0) return;
    for (let ahead = 1; ahead <= AHEAD; ahead++) {
      const next: Wish = { clip, frame: frame + ahead * this.#step, widthPx, near: false };
      if (next.frame < 0 || this.#missing.has(keyOf(next)) || this.#kept.has(keyOf(next))) continue;
      this.#asking++;
      client
        .call('frame', next)
        .then(async (bytes) => {
          const { jpeg } = unpackFrame(bytes);
          this.#keep(
            keyOf(next),
            await createImageBitmap(new Blob([jpeg as BlobPart], { type: 'image/jpeg' })),
          );
        })
        .catch(() => this.#missing.add(keyOf(next)))
        .finally(() => {
          this.#asking--;
          if (this.#wanted) void this.#askOn();
          else if (this.#at === frame) this.#readAhead({ clip, frame, widthPx, near: false });
        });
      return;
    }
  }

  #keep(key: string, bitmap: ImageBitmap): void {
    this.#kept.set(key, bitmap);
    for (const [oldest] of this.#kept) {
      if (this.#kept.size <= MOST_KEPT) break;
      this.#kept.delete(oldest); // closed by the collector: it may be on the stage
    }
  }
}

function keyOf({ clip, frame, widthPx }: Wish): string {
  return `${widthPx} ${frame} ${clip}`;
}
