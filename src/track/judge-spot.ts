/** What is known of a spot before it is tracked. Grey values are DN on a scale of 0 to 255. */
export interface SpotJudgement {
  /** Whether the spot can be tracked. */
  readonly ok: boolean;
  /** Why not, in one sentence for the user; null when it can. */
  readonly reason: string | null;
  /** What may still go wrong, in sentences for the user. */
  readonly warnings: readonly string[];
  /** Side of the square patch judged: the one given, or the one chosen. Odd. */
  readonly sizePx: number;
  /** Expected standard uncertainty of one frame's position along the worst direction; null when unbounded. */
  readonly expectedUPx: number | null;
  /** The same along the best direction; null when the patch has no texture at all. */
  readonly expectedUBestPx: number | null;
  /** The direction of the best one, degrees from +x towards +y, -90 to 90. */
  readonly bestDirectionDeg: number;
  /** Standard deviation of the image noise. */
  readonly noiseDn: number;
  /** Standard deviation of the grey values in the patch, noise taken off. */
  readonly contrastDn: number;
  /** Fraction of the patch that is clipped white or black, 0 to 1. */
  readonly saturatedFraction: number;
  /** Standard deviation of Gaussian blobs with as much fine detail as the patch; large where it is out of focus. */
  readonly detailPx: number | null;
  /** Distance to the nearest place within the travel that looks alike; null where none does. */
  readonly aliasPx: number | null;
  /** ZNCC of that place, null where none does. */
  readonly aliasScore: number | null;
}
