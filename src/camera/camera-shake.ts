import type { Warning } from '../numeric/warning.ts';

/** Common motion above this, px root mean square, is camera shake; tracking errors are not common. */
const SHAKE_PX = 0.2;

/** Frames in which both markers must be seen. */
const MIN_FRAMES = 16;

/** Motion of a marker across the motion axis, px, one entry per frame, NaN where lost. */
export type AcrossPx = Float64Array;

/** Positions across a motion axis: -x sin(angle) + y cos(angle), in the unit of x and y. */
export function acrossAxis(x: Float64Array, y: Float64Array, axisAngleDeg: number): AcrossPx {
  const angle = (axisAngleDeg * Math.PI) / 180;
  return x.map((value, i) => y[i]! * Math.cos(angle) - value * Math.sin(angle));
}

/** Motion that two markers share. */
export interface CommonMotion {
  /** Root of their covariance, px; 0 where it is not positive. */
  readonly rmsPx: number;
  /** Correlation coefficient, -1 to 1. */
  readonly correlation: number;
}

/**
 * Motion common to two markers that have no reason to move together: a still marker in any direction, or
 * response and drive across the motion axis. What they share is the camera's. A straight-line drift in time
 * is taken off each, since a slowly sinking tripod harms no sine.
 *
 * @param a b positions of the two, px, one entry per frame, NaN where lost
 * @returns null with fewer than 16 frames in which both are seen
 */
export function commonMotion(a: Float64Array, b: Float64Array): CommonMotion | null {
  const both: number[] = [];
  for (let i = 0; i < a.length; i++) if (Number.isFinite(a[i]) && Number.isFinite(b[i])) both.push(i);
  if (both.length < MIN_FRAMES) return null;
  const restA = detrended(both, a);
  const restB = detrended(both, b);
  let aa = 0;
  let ab = 0;
  let bb = 0;
  for (let k = 0; k < both.length; k++) {
    aa += restA[k]! ** 2;
    ab += restA[k]! * restB[k]!;
    bb += restB[k]! ** 2;
  }
  const correlation = aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0;
  return { rmsPx: Math.sqrt(Math.max(0, ab) / both.length), correlation };
}

/** Root mean square motion of one still marker in one direction after its drift is taken off, px; null with fewer than 16 seen frames. */
export function stillRmsPx(positionsPx: Float64Array): number | null {
  return commonMotion(positionsPx, positionsPx)?.rmsPx ?? null;
}

/**
 * Judges camera shake. With a ground marker it has been taken out and nothing is said.
 *
 * @param shakeRmsPx from `commonMotion` or `stillRmsPx`, px
 * @param groundSubtracted whether a ground marker was subtracted
 */
export function judgeShake(shakeRmsPx: number, groundSubtracted: boolean): Warning | null {
  if (groundSubtracted || !(shakeRmsPx > SHAKE_PX)) return null;
  return {
    code: 'shake-not-removed',
    sentence:
      `The camera shakes by ${shakeRmsPx.toPrecision(2)} px and nothing in the picture takes that out; mark a ground marker on the bench, ` +
      'or put the phone on a tripod.',
  };
}

/** Values at the frames listed, less the straight line through them by frame number. */
function detrended(frames: readonly number[], values: Float64Array): Float64Array {
  const n = frames.length;
  const meanFrame = frames.reduce((sum, i) => sum + i, 0) / n;
  const mean = frames.reduce((sum, i) => sum + values[i]!, 0) / n;
  let ff = 0;
  let fv = 0;
  for (const i of frames) {
    ff += (i - meanFrame) ** 2;
    fv += (i - meanFrame) * (values[i]! - mean);
  }
  const slope = ff > 0 ? fv / ff : 0;
  return Float64Array.from(frames, (i) => values[i]! - mean - slope * (i - meanFrame));
}
