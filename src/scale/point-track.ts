/** A point in the frame as displayed, [x, y] in pixels: centres at integers, origin top left, y down. */
export type PointPx = readonly [number, number];

/**
 * Where one marker was, frame by frame. The three arrays have one entry per decoded frame, in order of time;
 * times in true seconds, strictly increasing. `x` and `y` are in pixels as displayed, or in mm in the plane
 * of motion: each function says which it takes and gives. A frame in which the marker was lost has NaN in
 * both: a gap, never a guess.
 */
export interface PointTrack {
  readonly timesS: Float64Array;
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/** Whether the marker was seen in frame `i`. */
export function isSeen(track: PointTrack, i: number): boolean {
  return Number.isFinite(track.x[i]) && Number.isFinite(track.y[i]);
}

/** Number of frames in which the marker was seen. */
export function seenCount(track: PointTrack): number {
  let n = 0;
  for (let i = 0; i < track.x.length; i++) if (isSeen(track, i)) n++;
  return n;
}
