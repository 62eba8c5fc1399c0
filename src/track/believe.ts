import type { Registration } from './registration.ts';
import { ScoreHistory } from './score-history.ts';
import type { Alias } from './template.ts';
import type { TrackReason } from './track-step.ts';

// A partly covered marker is still found within this of its prediction; a look-alike or an occluder is not.
const SURPRISE_PX = 3;
const SURPRISE_PER_STEP = 0.5;
// At the place where it was held a marker counts as uncovered from this score on: below it false fits occur.
const UNCOVERED_SCORE = 0.7;
// Where the texture repeats, a marker this share of the distance off its prediction may be either of two, if the repeat
// looks as good as what was found.
const ALIAS_SHARE = 1 / 3;
const ALIKE_WITHIN = 0.1;
// A patch registered with a little of it outside the region has lost nothing yet.
const BORDER_SLACK_PX = 0.5;

/** What is known when a registration is judged. */
export interface Circumstances {
  /** Distance from where it was expected, px. */
  readonly surprisePx: number;
  /** Room between patch and region border, px. */
  readonly roomPx: number;
  /** The largest step between frames of late, px. */
  readonly largestStepPx: number;
  /** Side of the patch, px. */
  readonly patchPx: number;
  /** The nearest look-alike of the template. */
  readonly alias: Alias | null;
  /** Whether the marker was lost in the frame before. */
  readonly wasLost: boolean;
}

/** Whether a registration is the marker; with `reason` set it is a doubtful one, or not one at all. */
export interface Belief {
  readonly believed: boolean;
  readonly reason: TrackReason | null;
}

/** Judges a registration by its score, by the scores before, and by how far it is from where it was expected. */
export function believe(registration: Registration, limit: number, seen: Circumstances): Belief {
  const { converged, score } = registration;
  const least = seen.wasLost ? UNCOVERED_SCORE : ScoreHistory.LOST_BELOW;
  if (!converged || score < least) return { believed: false, reason: 'covered' };
  if (seen.roomPx < -BORDER_SLACK_PX) return { believed: false, reason: 'at-border' };
  const surprising = Math.max(SURPRISE_PX, SURPRISE_PER_STEP * seen.largestStepPx);
  const low = score < limit;
  if (seen.surprisePx > seen.patchPx / 2 || (low && seen.surprisePx > surprising)) {
    return { believed: false, reason: 'covered' };
  }
  if (low) return { believed: true, reason: 'low-score' };
  const { alias } = seen;
  const mistakable =
    alias !== null && alias.score > score - ALIKE_WITHIN && seen.surprisePx > ALIAS_SHARE * alias.distancePx;
  return { believed: true, reason: mistakable ? 'alias-jump' : null };
}
