import type { MotionRecord } from '../motion/motion-record.ts';
import { subtractGround } from './ground.ts';
import type { MotionAxis } from './motion-axis.ts';
import { type PlaneMapping, trackToPlane } from './perspective.ts';
import { isSeen, type PointPx, type PointTrack } from './point-track.ts';
import type { Scale } from './scale.ts';

/** What turns pixels into millimetres: one scale for the whole picture, or a marked plane seen obliquely. */
export type PixelsToMm = Scale | PlaneMapping;

/** How a track in pixels becomes a track in millimetres. */
export interface TrackInMmInput {
  /** The marker's track, px as displayed, times as they hold for its row. */
  readonly marker: PointTrack;
  /** Ground markers to subtract, px; empty where there are none. */
  readonly grounds: readonly PointTrack[];
  /** Where the ground markers were in the frame where scale or plane was marked, px; null: their means. */
  readonly groundRestPx: readonly PointPx[] | null;
  /** Scale in the plane of motion (parallax already applied) or plane mapping. */
  readonly toMm: PixelsToMm;
}

/**
 * A marker's track in millimetres in the plane of motion, camera motion taken out; gaps stay gaps. Find the
 * motion axis on its result (`axisFromMotion`), then project (`displacementAlong`).
 */
export function trackInMm(input: TrackInMmInput): PointTrack {
  const still = subtractGround(input.marker, input.grounds, input.groundRestPx);
  if (input.toMm.kind === 'plane') return trackToPlane(still, input.toMm);
  const { mmPerPx } = input.toMm;
  return { timesS: still.timesS, x: still.x.map((v) => v * mmPerPx), y: still.y.map((v) => v * mmPerPx) };
}

/**
 * Motion record: the track projected on the motion axis, mm, measured from the mean of its seen frames
 * (for a steady sine of whole periods: from rest). One entry per frame; a lost frame is NaN.
 *
 * @param trackMm from `trackInMm`
 * @param axis in the same plane, from `axisFromMotion` or `axisFromPoints`
 */
export function displacementAlong(trackMm: PointTrack, axis: MotionAxis): MotionRecord {
  const n = trackMm.timesS.length;
  const displacementMm = new Float64Array(n).fill(Number.NaN);
  let sum = 0;
  let seen = 0;
  for (let i = 0; i < n; i++) {
    if (!isSeen(trackMm, i)) continue;
    const along = trackMm.x[i]! * axis.directionX + trackMm.y[i]! * axis.directionY;
    displacementMm[i] = along;
    sum += along;
    seen++;
  }
  const mean = seen > 0 ? sum / seen : 0;
  return { timesS: trackMm.timesS, displacementMm: displacementMm.map((v) => v - mean) };
}
