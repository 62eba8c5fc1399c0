import { CancelledError, InputError } from '../../src/errors.ts';
import type { Engine, FramePicture } from './engine.ts';
import { PictureShelf, type Pictures } from './picture-shelf.ts';
import { ScrubReader } from './scrub-reader.ts';

const RUN_ON = 20; // frames read at a time when stepping on
const RUN_BACK = 8; // stepping back costs a seek, so a few frames before are read along

/** A clip as far as its frames are asked for. */
export interface FrameSource {
  readonly path: string;
  readonly frameCount: number;
  /** Pictures are made no wider than this. */
  readonly widthPx: number;
}

interface Run {
  readonly key: string;
  readonly end: number;
  next: number;
  readonly stop: AbortController;
}

interface Waiting {
  readonly frame: number;
  readonly resolve: (picture: FramePicture) => void;
  readonly reject: (error: Error) => void;
}

/**
 * Displayed frames of clips as JPEG, read in runs and kept for a while: the next step finds its frame here. A wish
 * outside the run being read ends that run: the latest wish is what matters.
 */
export class FrameStore {
  readonly #engine: Engine;
  readonly #shelf = new PictureShelf();
  readonly #last = new Map<string, number>();
  #run: Run | null = null;
  #waiting: Waiting[] = [];
  #scrub: { readonly key: string; readonly reader: ScrubReader } | null = null;

  constructor(engine: Engine) {
    this.#engine = engine;
  }

  /**
   * Exactly the frame asked for.
   * @throws CancelledError when a later wish took its place; InputError when the clip cannot give it
   */
  async get(source: FrameSource, frame: number): Promise<FramePicture> {
    if (frame >= source.frameCount)
      throw new InputError(`The clip has ${source.frameCount} frames: there is no frame ${frame}.`);
    const key = keyOf(source);
    const pictures = this.#shelf.of(key);
    const backwards = frame < (this.#last.get(key) ?? 0);
    this.#last.set(key, frame);
    const jpeg = pictures.byFrame.get(frame);
    if (jpeg) {
      if (!this.#run) this.#readAhead(source, pictures, frame, backwards);
      return { frame, jpeg };
    }
    const picture = new Promise<FramePicture>((resolve, reject) =>
      this.#waiting.push({ frame, resolve, reject }),
    );
    const run = this.#run;
    if (!run || run.key !== key || frame < run.next || frame >= run.end) {
      const first = backwards ? Math.max(0, frame - RUN_BACK) : frame;
      this.#start(source, pictures, first, backwards ? frame + 1 : frame + RUN_ON, frame);
    }
    return picture;
  }

  /** The picture nearest to a frame that can be had at once, for a hand on its way through the clip. */
  near(source: FrameSource, frame: number): Promise<FramePicture> {
    const key = keyOf(source);
    if (this.#scrub?.key !== key) {
      this.#scrub?.reader.stop();
      this.#scrub = { key, reader: new ScrubReader(this.#engine, this.#shelf, this.#shelf.of(key), source) };
    }
    return this.#scrub.reader.near(Math.min(frame, source.frameCount - 1));
  }

  /** Forgets everything, and stops reading. */
  clear(): void {
    this.#stop(null);
    this.#scrub?.reader.stop();
    this.#scrub = null;
    this.#shelf.clear();
    this.#last.clear();
  }

  /** Begins the next run while there are still some frames of this one to step through. */
  #readAhead(source: FrameSource, pictures: Pictures, frame: number, backwards: boolean): void {
    const kept = (at: number): boolean => pictures.byFrame.has(at);
    let next = frame;
    while (kept(next)) next += backwards ? -1 : 1;
    const left = Math.abs(next - frame);
    if (next < 0 || next >= source.frameCount || left > (backwards ? RUN_BACK : RUN_ON) / 2) return;
    if (backwards) this.#start(source, pictures, Math.max(0, next - RUN_BACK), next + 1, null);
    else this.#start(source, pictures, next, next + RUN_ON, null);
  }

  #start(source: FrameSource, pictures: Pictures, first: number, end: number, wish: number | null): void {
    this.#stop(wish);
    const run: Run = {
      key: keyOf(source),
      end: Math.min(source.frameCount, end),
      next: first,
      stop: new AbortController(),
    };
    this.#run = run;
    const onProgress = (picture: FramePicture): void => {
      this.#shelf.keep(pictures, picture.frame, picture.jpeg);
      run.next = picture.frame + 1;
      if (this.#run === run) this.#answer(picture);
    };
    const { path, widthPx } = source;
    const args = { path, first, count: run.end - first, widthPx, onlyKeyFrames: false };
    this.#engine.call('frames', args, { signal: run.stop.signal, onProgress }).then(
      () => this.#ended(run, new InputError(`Frame ${wish ?? first} of the clip could not be decoded.`)),
      (error: unknown) => this.#ended(run, error instanceof Error ? error : new Error(String(error))),
    );
  }

  /** Ends the run under way; who waits for another frame than the one wished for now is told so. */
  #stop(wish: number | null): void {
    this.#run?.stop.abort();
    this.#run = null;
    const overtaken = this.#waiting.filter((each) => each.frame !== wish);
    this.#waiting = this.#waiting.filter((each) => each.frame === wish);
    for (const each of overtaken) each.reject(new CancelledError());
  }

  #answer(picture: FramePicture): void {
    const served = this.#waiting.filter((each) => each.frame === picture.frame);
    this.#waiting = this.#waiting.filter((each) => each.frame !== picture.frame);
    for (const each of served) each.resolve(picture);
  }

  #ended(run: Run, reason: Error): void {
    if (this.#run !== run) return;
    this.#run = null;
    for (const each of this.#waiting.splice(0)) each.reject(reason);
  }
}

function keyOf({ path, widthPx }: FrameSource): string {
  return `${widthPx} ${path}`;
}
