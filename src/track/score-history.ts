// Half a second to two seconds: it follows light and focus, and outlasts a cycle of most dwells.
const MEMORY = 61;
// With fewer scores the spread is not known.
const LEAST = 8;
// Measured: undisturbed scores, of video compressed at QP 18 to 30 too, stay within 0.005 of their median. 5 % of the patch
// covered costs 0.015, with errors of 0.03 px on fine and 0.1 px on soft texture; 15 % covered costs 0.03 to 0.1.
const LEAST_DROP = 0.015;
// Scores of noisy or blurred frames spread more widely; 4 standard deviations pass by chance once in 30 000. The spread is
// taken above the median, where frames with a covered marker do not reach, and only so much of it is allowed.
const SPREADS = 4;
const LARGEST_DROP = 0.1;
// However slowly a marker is covered, the reference does not follow further down than this.
const FARTHEST_FALL = 0.03;
// Before there is a history, the score may fall this far below what the template's noise alone explains.
const FIRST_DROP = 0.1;

/**
 * The score a marker is used to, and the limit below which a frame is doubtful: a drop of 0.015 below the running
 * median, or of four standard deviations of the scores themselves where they spread more.
 */
export class ScoreHistory {
  /** Below this a marker is lost whatever its history: a third of the patch is covered, and errors reach 0.2 px. */
  static readonly LOST_BELOW = 0.6;

  private readonly recent: number[] = [];
  private readonly sorted: number[] = [];
  private highestMedian = Number.NEGATIVE_INFINITY;

  /** @param expected the score that noise alone leads one to expect, at most 1 */
  constructor(private readonly expected: number) {}

  /** The score that frames have had: the median, but not far below the best it has been. */
  get usual(): number {
    if (this.sorted.length < LEAST) return this.expected;
    return Math.max(this.quantile(0.5), this.highestMedian - FARTHEST_FALL);
  }

  /** Frames that score less are doubtful. */
  get limit(): number {
    const { LOST_BELOW } = ScoreHistory;
    if (this.sorted.length < LEAST) return Math.max(LOST_BELOW, this.expected - FIRST_DROP);
    const spread = this.quantile(0.84) - this.quantile(0.5);
    const drop = Math.min(LARGEST_DROP, Math.max(LEAST_DROP, SPREADS * spread));
    return Math.max(LOST_BELOW, this.usual - drop);
  }

  /** Remembers a score. One below the limit counts as the limit, so that a cover does not become the usual. */
  push(score: number): void {
    const value = this.sorted.length < LEAST ? score : Math.max(score, this.limit);
    this.recent.push(value);
    this.sorted.splice(this.rank(value), 0, value);
    if (this.recent.length > MEMORY) this.sorted.splice(this.rank(this.recent.shift()!), 1);
    if (this.sorted.length >= LEAST) this.highestMedian = Math.max(this.highestMedian, this.quantile(0.5));
  }

  private quantile(share: number): number {
    return this.sorted[Math.floor(share * (this.sorted.length - 1))]!;
  }

  /** The first place in the sorted scores that is not below `value`. */
  private rank(value: number): number {
    let low = 0;
    let high = this.sorted.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.sorted[middle]! < value) low = middle + 1;
      else high = middle;
    }
    return low;
  }
}
