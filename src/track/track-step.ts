/**
 * Why a frame is doubtful or lost.
 * - `low-score`: the marker looks less like its template than it did in the frames before.
 * - `alias-jump`: the texture repeats, and the marker was found so far from its prediction that it may be a repeat; also
 *   in the frames after.
 * - `found-elsewhere`: found again outside the range it had moved in, a look-alike perhaps; until it is back there.
 * - `ambiguous`: two places fit alike; also in the frames after.
 * - `at-border`: it would stand across the border of the region that was given.
 * - `covered`: nothing in the region looks enough like it.
 */
export type TrackReason =
  | 'low-score'
  | 'alias-jump'
  | 'found-elsewhere'
  | 'ambiguous'
  | 'at-border'
  | 'covered';

/** A frame in which the marker was measured. Coordinates are those of the coded frame, in pixels. */
export interface MeasuredStep {
  /** `doubtful`: a position, but one that may be off by some tenths of a pixel, or be that of a look-alike. */
  readonly state: 'ok' | 'doubtful';
  readonly x: number;
  readonly y: number;
  /** ZNCC between the smoothed template and the smoothed frame, at most 1. */
  readonly score: number;
  /** Standard uncertainty of this position from image noise alone, per axis, root mean square of both; null if unknown. */
  readonly uPx: number | null;
  readonly uXPx: number | null;
  readonly uYPx: number | null;
  readonly reason: TrackReason | null;
  /** Length by which the marker is smeared along its motion more than the template, px; 0 where not noticeably. */
  readonly blurPx: number;
  /** Pixels left between the patch and the nearest border of the region; below 0 it is cut off. */
  readonly roomPx: number;
  /** True when the next frames may need more room than the region has: widen it, or move it. */
  readonly nearBorder: boolean;
}

/** A frame in which the marker was not found: a gap. There is no position, not even an estimated one. */
export interface LostStep {
  readonly state: 'lost';
  readonly x: null;
  readonly y: null;
  /** The best score that was seen while looking for it. */
  readonly score: number;
  readonly uPx: null;
  readonly uXPx: null;
  readonly uYPx: null;
  readonly reason: TrackReason;
  /** Room at the place where it was last seen, null when it was never seen. */
  readonly roomPx: number | null;
  readonly nearBorder: boolean;
}

/** The outcome for one marker in one frame. */
export type TrackStep = MeasuredStep | LostStep;
