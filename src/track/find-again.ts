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
   * The circle to search: as far as the marker can have moved since it was seen, at most 128 px; the whole region (null)
   * every tenth frame of a loss, and where nothing is known.
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

/** A fit chosen among those a search found. */
export interface ChosenFit {
  readonly fit: TemplateFit;
  /** Whether the other of two may have been the right one. */
  readonly ambiguous: boolean;
}

/**
 * Which of two fits alike is the marker: the only one where the marker may be expected, without a doubt; else the one
 * clearly nearer to where it was expected, or the better one where nothing was expected. Null where neither is:
 * better no point than that of a look-alike.
 *
 * @param isPlausible whether the marker's motion so far leads one to expect it there
 */
export function chooseFit(
  found: FoundTemplate,
  expected: Point | null,
  isPlausible: (place: Point) => boolean,
): ChosenFit | null {
  const { second } = found;
  if (!found.ambiguous || !second) return { fit: found, ambiguous: false };
  if (!expected) return { fit: found, ambiguous: true };
  if (isPlausible(found) !== isPlausible(second)) {
    return { fit: isPlausible(found) ? found : second, ambiguous: false };
  }
  const apart = distance(found, second);
  const nearer = distance(found, expected) <= distance(second, expected) ? found : second;
  return distance(nearer, expected) < NEARER_SHARE * apart ? { fit: nearer, ambiguous: true } : null;
}

/** Distance of two places, px. */
export function distance(a: Point, b: Point): number {
  return Math.hypot(a.x - b.x, a.y - b.y);
}
