import { CancelledError, InputError } from '../../src/errors.ts';
import type { Engine, FramePicture } from './engine.ts';
import type { PictureShelf, Pictures } from './picture-shelf.ts';

const SEGMENT = 120; // frames read at a time, round the hand
const BEHIND = 10; // of them before the frame wished for
const IDLE_MS = 8000; // without a wish, no more segments are begun
const MOST_AHEAD = 20_000; // frames of a clip read ahead at most; beyond, only round the hand

/**
 * Small pictures of one clip for a hand on its way through it: first the key frames of the whole clip, which come
 * quickly, then everything, nearest to the hand first. A wish is answered at once with the nearest picture there is.
 */
export class ScrubReader {
  readonly #engine: Engine;
  readonly #shelf: PictureShelf;
  readonly #pictures: Pictures;
  readonly #clip: { readonly path: string; readonly frameCount: number; readonly widthPx: number };
  readonly #stop = new AbortController();
  #waiting: { resolve: (picture: FramePicture) => void; reject: (error: Error) => void }[] = [];
  #last = 0;
  #wishedAt = 0;
  #filling = false;
  #keysRead = false;

  constructor(
    engine: Engine,
    shelf: PictureShelf,
    pictures: Pictures,
    clip: { readonly path: string; readonly frameCount: number; readonly widthPx: number },
  ) {
    this.#engine = engine;
    this.#shelf = shelf;
    this.#pictures = pictures;
    this.#clip = clip;
  }

  /** The picture nearest to a frame, as soon as there is any. */
  async near(frame: number): Promise<FramePicture> {
    this.#last = frame;
    this.#wishedAt = Date.now();
    if (!this.#filling) void this.#fill();
    const nearest = this.#nearest(frame);
    if (nearest) return nearest;
    return new Promise((resolve, reject) => this.#waiting.push({ resolve, reject }));
  }

  stop(): void {
    this.#stop.abort();
    this.#endWaiting(new CancelledError());
  }

  #nearest(frame: number): FramePicture | null {
    const { byFrame } = this.#pictures;
    for (let away = 0; away < this.#clip.frameCount && byFrame.size > 0; away++)
      for (const at of [frame - away, frame + away]) {
        const jpeg = byFrame.get(at);
        if (jpeg) return { frame: at, jpeg };
      }
    return null;
  }

  async #fill(): Promise<void> {
    this.#filling = true;
    try {
      if (!this.#keysRead) await this.#read(0, this.#clip.frameCount, true);
      this.#keysRead = true;
      for (;;) {
        const first = this.#nextMissing();
        if (first === null || Date.now() - this.#wishedAt > IDLE_MS) break;
        const before = this.#pictures.byFrame.size;
        await this.#read(first, Math.min(SEGMENT, this.#clip.frameCount - first), false);
        if (this.#pictures.byFrame.size === before) break; // nothing decodes there
      }
    } catch (error) {
      this.#endWaiting(error instanceof Error ? error : new Error(String(error)));
    } finally {
      this.#filling = false;
      this.#endWaiting(new InputError('No frame of the clip could be decoded.'));
    }
  }

  #nextMissing(): number | null {
    const { frameCount } = this.#clip;
    const { byFrame } = this.#pictures;
    const from = Math.max(0, this.#last - BEHIND);
    for (let frame = from; frame < frameCount; frame++) if (!byFrame.has(frame)) return frame;
    if (frameCount > MOST_AHEAD) return null;
    for (let frame = 0; frame < from; frame++) if (!byFrame.has(frame)) return frame;
    return null;
  }

  async #read(first: number, count: number, onlyKeyFrames: boolean): Promise<void> {
    const { path, widthPx } = this.#clip;
    const segment = new AbortController();
    const stop = (): void => segment.abort();
    this.#stop.signal.addEventListener('abort', stop, { once: true });
    const onProgress = (picture: FramePicture): void => {
      this.#shelf.keep(this.#pictures, picture.frame, picture.jpeg);
      for (const each of this.#waiting.splice(0)) each.resolve(picture);
      // the hand went elsewhere: go on there
      const isFar = Math.abs(this.#last - picture.frame) > 2 * SEGMENT;
      if (!onlyKeyFrames && isFar && !this.#pictures.byFrame.has(this.#last)) segment.abort();
    };
    try {
      await this.#engine.call(
        'frames',
        { path, first, count, widthPx, onlyKeyFrames },
        { signal: segment.signal, onProgress },
      );
    } catch (error) {
      if (!(error instanceof CancelledError) || this.#stop.signal.aborted) throw error;
    } finally {
      this.#stop.signal.removeEventListener('abort', stop);
    }
  }

  #endWaiting(error: Error): void {
    for (const each of this.#waiting.splice(0)) each.reject(error);
  }
}
