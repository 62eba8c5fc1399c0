import type { ClipInfo } from './clip-info.ts';
import { endsDoubt } from './doubtful-frames.ts';

/** What of a clip the decoded frames are matched with. */
export type FrameTable = Pick<ClipInfo, 'ticks' | 'keyFrames' | 'frameCount' | 'reorderDepth'>;

/**
 * Finds the index of each decoded frame by its timestamp, in the table of frames the container lists, and keeps
 * account of those that never came.
 */
export class FrameMatcher {
  readonly #table: FrameTable;
  readonly #onlyKeyFrames: boolean;
  readonly #lost: number[] = [];
  #next: number;
  #unlisted = 0;
  #afterLoss: number | null = null;

  /** Expects frames from index `first` on, or only the key frames among them. */
  constructor(table: FrameTable, first: number, onlyKeyFrames: boolean) {
    this.#table = table;
    this.#next = first;
    this.#onlyKeyFrames = onlyKeyFrames;
  }

  /** Indices of listed frames that did not come, so far. */
  get lost(): readonly number[] {
    return this.#lost;
  }

  /** Number of decoded frames whose timestamp the container does not list. */
  get unlisted(): number {
    return this.#unlisted;
  }

  /**
   * Index of the frame with this timestamp, ticks from the clip's first frame; null for one that lies before the
   * range expected, or that the container does not list. Call it in order of presentation.
   */
  match(ticks: number): number | null {
    const { ticks: listed, frameCount } = this.#table;
    while (
      this.#next < frameCount &&
      (listed[this.#next] ?? 0) < ticks &&
      !this.#sharesTick(this.#next, ticks)
    ) {
      this.#skip();
    }
    if (this.#next >= frameCount) {
      this.#unlisted++;
      return null;
    }
    const expected = listed[this.#next] ?? 0;
    if (expected > ticks) {
      const earlier = this.#next === 0 || ticks > (listed[this.#next - 1] ?? 0);
      if (earlier) this.#unlisted++;
      return null;
    }
    if (this.#afterLoss !== null && endsDoubt(this.#table, this.#next, this.#afterLoss))
      this.#afterLoss = null;
    return this.#next++;
  }

  /** True from a lost frame up to the next sound key frame: what is decoded there may build on what was lost. */
  get afterDamage(): boolean {
    return this.#afterLoss !== null;
  }

  /** Counts as lost what is still missing below the index `end`. */
  finish(end: number): void {
    while (this.#next < Math.min(end, this.#table.frameCount)) this.#skip();
  }

  #skip(): void {
    const isExpected = !this.#onlyKeyFrames || this.#table.keyFrames[this.#next] === 1;
    if (isExpected) {
      this.#lost.push(this.#next);
      this.#afterLoss = this.#next;
    }
    this.#next++;
  }

  /**
   * A muxer moves a repeated timestamp on by a tick each time: a frame listed at the same instant as the one before
   * it still counts as found a few ticks later.
   */
  #sharesTick(index: number, ticks: number): boolean {
    const { ticks: listed } = this.#table;
    const own = listed[index] ?? 0;
    let repeats = 0;
    while (index - repeats > 0 && listed[index - repeats - 1] === own) repeats++;
    return repeats > 0 && ticks <= own + repeats;
  }
}
