/** How far a measurement is; sent a few times a second while clips are tracked. */
export interface MeasureProgress {
  /** Id of the clip being tracked. */
  readonly clip: string;
  /** Position of the clip among those to track, from 0. */
  readonly clipIndex: number;
  readonly clipCount: number;
  /** Frames of this clip done so far. */
  readonly frame: number;
  /** Frames the clip holds; null before that is known. */
  readonly frameCount: number | null;
  /** Frames tracked per second of work, over this clip so far; null at its start. */
  readonly framesPerS: number | null;
}
