import { interpolateAt } from './interpolate-track.ts';
import { isSeen, type PointPx, type PointTrack } from './point-track.ts';

/** Frames a ground marker must be seen in before its rest position means anything. */
const MIN_SEEN = 2;

/**
 * Takes the camera's own motion out of a track, in pixels. One ground marker gives the shift of the picture;
 * two or more give shift and rotation, by least squares over all of them (rigid Procrustes fit in the plane).
 * Where the ground marker's frame times differ from the track's (rolling shutter: another row), its position
 * is interpolated to the track's times first.
 *
 * @param track px as displayed; times as they hold for this marker's row
 * @param grounds tracks of the ground markers, px, one entry per frame as in `track`; none: the track comes
 *   back as it is
 * @param restPx where each ground marker was in the frame to which everything is brought back (the frame in
 *   which plane points were marked); null: its mean position
 * @returns a track in which a frame with any ground marker lost is a gap, because its shift is not known
 * @throws Error where lengths disagree or a ground marker was never seen
 */
export function subtractGround(
  track: PointTrack,
  grounds: readonly PointTrack[],
  restPx: readonly PointPx[] | null = null,
): PointTrack {
  if (grounds.length === 0) return track;
  if (restPx !== null && restPx.length !== grounds.length)
    throw new Error('one rest position per ground marker');
  const n = track.timesS.length;
  for (const ground of grounds) {
    if (ground.timesS.length !== n)
      throw new Error(`ground track of ${ground.timesS.length} frames for ${n}`);
  }
  const seen = grounds.map((ground) => interpolateAt(ground, track.timesS));
  const rest = restPx ?? seen.map(meanPosition);
  const x = new Float64Array(n).fill(Number.NaN);
  const y = new Float64Array(n).fill(Number.NaN);
  for (let i = 0; i < n; i++) {
    if (!isSeen(track, i) || !seen.every((ground) => isSeen(ground, i))) continue;
    const now = seen.map((ground): PointPx => [ground.x[i]!, ground.y[i]!]);
    [x[i], y[i]] = undoRigidMotion([track.x[i]!, track.y[i]!], now, rest);
  }
  return { timesS: track.timesS, x, y };
}

/** Mean of the frames in which the marker was seen, px. */
function meanPosition(track: PointTrack): PointPx {
  let n = 0;
  let sumX = 0;
  let sumY = 0;
  for (let i = 0; i < track.x.length; i++) {
    if (!isSeen(track, i)) continue;
    n++;
    sumX += track.x[i]!;
    sumY += track.y[i]!;
  }
  if (n < MIN_SEEN) throw new Error('a ground marker that was never seen cannot be subtracted');
  return [sumX / n, sumY / n];
}

/** Brings `point` back by the rigid motion that carries `rest` nearest to `now`. */
function undoRigidMotion(point: PointPx, now: readonly PointPx[], rest: readonly PointPx[]): PointPx {
  const centreNow = centroid(now);
  const centreRest = centroid(rest);
  let dot = 0;
  let cross = 0;
  now.forEach((p, k) => {
    const q = rest[k]!;
    const [ax, ay] = [q[0] - centreRest[0], q[1] - centreRest[1]];
    const [bx, by] = [p[0] - centreNow[0], p[1] - centreNow[1]];
    dot += ax * bx + ay * by;
    cross += ax * by - ay * bx;
  });
  const size = Math.hypot(dot, cross);
  const cosine = size > 0 ? dot / size : 1;
  const sine = size > 0 ? cross / size : 0;
  const [dx, dy] = [point[0] - centreNow[0], point[1] - centreNow[1]];
  return [centreRest[0] + cosine * dx + sine * dy, centreRest[1] - sine * dx + cosine * dy];
}

function centroid(points: readonly PointPx[]): PointPx {
  let x = 0;
  let y = 0;
  for (const point of points) {
    x += point[0] / points.length;
    y += point[1] / points.length;
  }
  return [x, y];
}
