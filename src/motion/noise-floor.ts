import { studentTQuantile } from '../numeric/quantiles.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';
import type { MotionRecord } from './motion-record.ts';

/** How small a motion could be seen at one frequency, from a record of a part that stands still. Amplitudes in mm. */
export interface NoiseFloor {
  readonly frequencyHz: number;
  /** Frames the floor holds for: those of the dwell in question. */
  readonly frames: number;
  /** Standard uncertainty of an amplitude measured over that many frames. */
  readonly amplitudeU: number;
  /** Amplitude that noise alone exceeds in 5 of 100 records: above it something moves. */
  readonly decision: number;
  /** Smallest true amplitude that comes out above `decision` in 95 of 100 records. */
  readonly detectable: number;
  readonly effectiveDof: number;
}

const FALSE_ALARM = 0.05;
const MISSED = 0.05;

/**
 * Noise floor at a frequency from a still record: the still record's noise around that frequency, carried over to the
 * number of frames a dwell has. Whatever moves at exactly that frequency in the still record (the bench shaking with
 * the exciter) is not noise and does not count.
 *
 * @param still a part that does not move, or the ground marker, filmed as the dwell was
 * @param frames frames with a displacement in the dwell's window, at least 1
 * @returns null where the still record is too short to tell (see fitSineAtFrequency)
 * Source: decision threshold and detection limit as in ISO 11843 (from memory); the amplitude of pure noise follows
 * a Rayleigh distribution, with an estimated variance one of F(2, dof).
 */
export function noiseFloor(still: MotionRecord, frequencyHz: number, frames: number): NoiseFloor | null {
  const fit = fitSineAtFrequency(still.timesS, still.displacementMm, frequencyHz, { baselineTerms: 2 });
  if (fit === null || !(frames >= 1)) return null;
  return noiseFloorOf(fit.amplitudeU * Math.sqrt(fit.frames / frames), fit.effectiveDof, frequencyHz, frames);
}

/** The same from the standard uncertainty `amplitudeU` of an amplitude over `frames` frames, however it was found. */
export function noiseFloorOf(
  amplitudeU: number,
  effectiveDof: number,
  frequencyHz: number,
  frames: number,
): NoiseFloor {
  // amplitude^2/(2 u^2) is F(2, dof), whose upper quantile has the closed form dof/2 (alpha^(-2/dof) - 1)
  const quantile = (effectiveDof / 2) * (FALSE_ALARM ** (-2 / effectiveDof) - 1);
  const decision = amplitudeU * Math.sqrt(2 * quantile);
  const detectable = decision + studentTQuantile(1 - MISSED, effectiveDof) * amplitudeU;
  return { frequencyHz, frames, amplitudeU, decision, detectable, effectiveDof };
}
