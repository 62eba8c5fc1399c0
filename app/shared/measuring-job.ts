import type { MeasureProgress } from '../../src/engine/progress.ts';
import { CancelledError } from '../../src/errors.ts';
import type { JobState } from './bench-state.ts';
import type { Engine } from './engine.ts';
import type { TestSession } from './test-session.ts';

/** What a job tells of. */
export interface JobParts {
  readonly engine: Engine;
  readonly session: TestSession;
  readonly clips: readonly string[];
  /** Frames of the clips, where known, for the time left. */
  readonly frameCounts: ReadonlyMap<string, number>;
  readonly onState: (state: JobState) => void;
  /** Called as soon as a clip has been tracked. */
  readonly onTracked: () => void;
}

let jobs = 0;

/** A measurement of several clips, one after another; what is done when it is stopped is kept. */
export class MeasuringJob {
  readonly #parts: JobParts;
  readonly #stop = new AbortController();
  #state: JobState;

  constructor(parts: JobParts) {
    this.#parts = parts;
    this.#state = {
      id: ++jobs,
      clip: parts.clips[0] ?? '',
      clipIndex: 0,
      clipCount: parts.clips.length,
      frame: 0,
      frameCount: null,
      framesPerS: null,
      leftS: null,
      cancelling: false,
    };
  }

  /** Measures; resolves when done or cancelled, rejects where the engine itself failed. */
  async run(): Promise<'done' | 'cancelled'> {
    const { engine, session, clips, onTracked } = this.#parts;
    this.#set({});
    try {
      for (const [index, clip] of clips.entries()) {
        this.#set({
          clip,
          clipIndex: index,
          frame: 0,
          frameCount: this.#parts.frameCounts.get(clip) ?? null,
        });
        const test = session.test;
        const outcome = await engine.call(
          'track',
          { test, testPath: session.file.path, clip },
          { signal: this.#stop.signal, onProgress: (progress) => this.#progress(index, progress) },
        );
        session.measured.add(test, outcome);
        onTracked();
      }
      return 'done';
    } catch (error) {
      if (error instanceof CancelledError) return 'cancelled';
      throw error;
    }
  }

  cancel(): void {
    this.#set({ cancelling: true });
    this.#stop.abort();
  }

  #progress(index: number, progress: MeasureProgress): void {
    const { frame, frameCount, framesPerS } = progress;
    this.#set({ frame, frameCount, framesPerS, leftS: this.#leftS(index, progress) });
  }

  /** From the frames left and the rate so far; clips whose length is not known yet count like this one. */
  #leftS(index: number, { frame, frameCount, framesPerS }: MeasureProgress): number | null {
    if (frameCount === null || framesPerS === null || framesPerS <= 0) return null;
    let frames = frameCount - frame;
    for (const clip of this.#parts.clips.slice(index + 1))
      frames += this.#parts.frameCounts.get(clip) ?? frameCount;
    return frames / framesPerS;
  }

  #set(change: Partial<JobState>): void {
    this.#state = { ...this.#state, ...change };
    this.#parts.onState(this.#state);
  }
}
