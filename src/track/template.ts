/**
 * A marker's picture: what the tracker looks for. Plain data, so that it can be kept, cloned to a worker and used
 * in other clips of the same camera setup. Patches are row by row, `widthPx * heightPx`, centred on a whole pixel.
 * Grey values are DN on a scale of 0 to 255 whatever the bit depth of the frame.
 */
export interface Template {
  /** Odd. */
  readonly widthPx: number;
  /** Odd. */
  readonly heightPx: number;
  /** The marked point in the frame the template was cut from, pixels. */
  readonly markedXPx: number;
  readonly markedYPx: number;
  /** The marked point relative to the patch's centre pixel, each within +-0.5 px. */
  readonly pointXPx: number;
  readonly pointYPx: number;
  /** Grey values as registered against: smoothed once by [1 2 1] where `smoothed`, mean not removed. */
  readonly values: Float64Array;
  /** Their gradients along x and y, DN per pixel. */
  readonly gradientX: Float64Array;
  readonly gradientY: Float64Array;
  /** Whether values are smoothed by [1 2 1] in x and y, and frames must be alike. */
  readonly smoothed: boolean;
  /** Grey values before smoothing, for searches. */
  readonly raw: Float32Array;
  /** Standard deviation of the noise of the frame it was cut from, DN. */
  readonly noiseDn: number;
  /** Number of frames averaged in it; 1 for a cut one. */
  readonly framesAveraged: number;
  /** The nearest place that looks alike in the frame it was cut from; null where none does or none was sought. */
  readonly alias: Alias | null;
}

/** A place that looks like a marker. */
export interface Alias {
  readonly distancePx: number;
  /** ZNCC with the marker. */
  readonly score: number;
}

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
  /**
   * Expected standard uncertainty of one frame's position along the worst direction, from noise alone (compression adds
   * 0.01 to 0.03 px and more); null when unbounded.
   */
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
