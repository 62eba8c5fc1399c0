/** What the page needs to know of a clip in order to show it. */
export interface ClipView {
  readonly id: string;
  readonly frameCount: number;
  /** Time of each frame, s of the file's clock from the first frame; length = frameCount. */
  readonly timesS: readonly number[];
  /** Size as displayed, px. */
  readonly width: number;
  readonly height: number;
  readonly codec: string;
  /** Frames per second of file time; null for a single frame. */
  readonly frameRate: number | null;
  /** Rate of capture the file tells of a slow-motion clip, frames/s; null where it tells none. */
  readonly captureFps: number | null;
  readonly warnings: readonly string[];
}
