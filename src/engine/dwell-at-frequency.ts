import type { MotionRecord } from '../motion/motion-record.ts';
import { phaseAtZeroRad } from '../sine/sine-fit.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';

/** A sine as seen in a window of a motion record. */
export interface SeenSine {
  readonly amplitude: number;
  readonly amplitudeU: number;
  readonly dof: number;
  /** Phase of the cosine at t = 0 of the clip, rad. */
  readonly phaseRad: number;
  readonly phaseU: number;
  /** Root mean square residual, in the record's unit. */
  readonly residualRms: number;
}

/** The part of a record whose times lie in a window, both ends included. */
export function inWindow(record: MotionRecord, window: readonly [number, number]): MotionRecord {
  const { timesS, displacementMm } = record;
  let from = 0;
  while (from < timesS.length && (timesS[from] ?? 0) < window[0]) from += 1;
  let to = timesS.length;
  while (to > from && (timesS[to - 1] ?? 0) > window[1]) to -= 1;
  return { timesS: timesS.subarray(from, to), displacementMm: displacementMm.subarray(from, to) };
}

/** Sine at a known frequency in a window of a record; null where the window holds too little of it. */
export function sineInWindow(
  record: MotionRecord,
  window: readonly [number, number],
  frequencyHz: number,
): SeenSine | null {
  const part = inWindow(record, window);
  const fit = fitSineAtFrequency(part.timesS, part.displacementMm, frequencyHz);
  if (!fit) return null;
  return {
    amplitude: fit.amplitude,
    amplitudeU: fit.amplitudeU,
    dof: fit.effectiveDof,
    phaseRad: phaseAtZeroRad(fit),
    phaseU: fit.phaseU,
    residualRms: Math.sqrt(fit.residualSumOfSquares / Math.max(1, fit.frames)),
  };
}
