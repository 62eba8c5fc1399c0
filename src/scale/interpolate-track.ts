import { isSeen, type PointTrack } from './point-track.ts';

/** Times nearer than this to a frame's own are the same time: no phone stamps finer than a microsecond. */
const SAME_TIME_S = 1e-7;

/**
 * Positions of a marker at other times than its frames': cubic (four frames, Lagrange) where the two frames
 * on both sides are seen, linear where only the neighbours are, NaN where a neighbour is lost or the time
 * lies more than one frame interval outside the track (within it the end frames are extended linearly).
 *
 * @param track any unit
 * @param timesS the times asked for, one per frame of the track and within a frame interval of its own
 */
export function interpolateAt(track: PointTrack, timesS: Float64Array): PointTrack {
  const n = track.timesS.length;
  const x = new Float64Array(timesS.length).fill(Number.NaN);
  const y = new Float64Array(timesS.length).fill(Number.NaN);
  let left = 0;
  for (let i = 0; i < timesS.length; i++) {
    const t = timesS[i]!;
    while (left + 2 < n && track.timesS[left + 1]! <= t) left++;
    const nearest = nearestFrame(track, left, t);
    if (Math.abs(track.timesS[nearest]! - t) <= SAME_TIME_S) {
      x[i] = track.x[nearest]!;
      y[i] = track.y[nearest]!;
    } else if (isSeen(track, left) && isSeen(track, left + 1) && isNear(track, left, t)) {
      const frames =
        left > 0 && left + 2 < n && isSeen(track, left - 1) && isSeen(track, left + 2)
          ? [left - 1, left, left + 1, left + 2]
          : [left, left + 1];
      const weights = lagrangeWeights(frames, track.timesS, t);
      x[i] = frames.reduce((sum, frame, k) => sum + weights[k]! * track.x[frame]!, 0);
      y[i] = frames.reduce((sum, frame, k) => sum + weights[k]! * track.y[frame]!, 0);
    }
  }
  return { timesS, x, y };
}

function nearestFrame(track: PointTrack, left: number, t: number): number {
  const right = left + 1;
  if (right >= track.timesS.length) return left;
  return Math.abs(track.timesS[right]! - t) < Math.abs(track.timesS[left]! - t) ? right : left;
}

function isNear(track: PointTrack, left: number, t: number): boolean {
  const from = track.timesS[left]!;
  const to = track.timesS[left + 1]!;
  return t >= from - (to - from) && t <= to + (to - from);
}

function lagrangeWeights(frames: readonly number[], timesS: Float64Array, t: number): number[] {
  return frames.map((k) =>
    frames.reduce(
      (product, j) => (j === k ? product : (product * (t - timesS[j]!)) / (timesS[k]! - timesS[j]!)),
      1,
    ),
  );
}
