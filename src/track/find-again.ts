import { ScoreHistory } from './score-history.ts';
import type { FoundTemplate, TemplateFit } from './template-search.ts';

// A search may land anywhere, so it must find nearly what the marker used to look like.
const SEARCH_DROP = 0.1;
// Of two fits alike, one is the marker only if it is this much nearer to where the marker was.
const NEARER_SHARE = 0.35;
// Searches stay near the last place, but now and then look through the whole region.
const LARGEST_RADIUS_PX = 128;
const WHOLE_SEARCH_EVERY = 10;

/** A place in the coded frame, px. */
export interface Point {
  readonly x: number;
  readonly y: number;
}

/** Decides where a lost marker is sought, and how much it must look like itself. */
export class SearchPlan {
  constructor(private readonly patchPx: number) {}

  /**
   * The circle to search: as far as the marker can have moved since it was seen, at most 128 px; every tenth frame of a
   * loss, and where nothing is known, the whole region (null).
   */
  near(
    expected: Point | null,
    lostFrames: number,
    extentPx: number,
    largestStepPx: number,
  ): (Point & { readonly radiusPx: number }) | null {
    if (!expected || lostFrames % WHOLE_SEARCH_EVERY === WHOLE_SEARCH_EVERY - 1) return null;
    const reach = this.patchPx + extentPx + 2 * largestStepPx * (lostFrames + 1);
    return { x: expected.x, y: expected.y, radiusPx: Math.min(LARGEST_RADIUS_PX, reach) };
  }

  /** The least score that counts as found: a marker known so far must look nearly as usual. */
  leastScore(usual: number, known: boolean): number {
    return known ? Math.max(ScoreHistory.LOST_BELOW, usual - SEARCH_DROP) : ScoreHistory.LOST_BELOW;
  }
}

/**
 * Which of two fits alike is the marker: the one clearly nearer to where it was expected; the better one where nothing was
 * expected. Null where neither is: better no point than that of a look-alike.
 */
export function chooseFit(found: FoundTemplate, expected: Point | null): TemplateFit | null {
  const { second } = found;
  if (!found.ambiguous || !second || !expected) return found;
  const apart = Math.hypot(found.x - second.x, found.y - second.y);
  const [nearer] = [found, second].sort((a, b) => distanceTo(a, expected) - distanceTo(b, expected));
  return nearer && distanceTo(nearer, expected) < NEARER_SHARE * apart ? nearer : null;
}

function distanceTo(fit: TemplateFit, point: Point): number {
  return Math.hypot(fit.x - point.x, fit.y - point.y);
}
