import type { PredictedAmplitude } from './predicted-amplitude.ts';

/**
 * - `below`: steady motion and the way to it stay below the limit;
 * - `ramp`: steady motion does, but switching the drive on at once may swing further: raise it slowly;
 * - `refused`: steady motion may pass the limit;
 * - `unknown`: no limit is stated, or nothing tells the size of the motion.
 */
export type TravelVerdict = 'below' | 'ramp' | 'refused' | 'unknown';

/** A step held against the travel limit. */
export interface TravelCheck {
  readonly verdict: TravelVerdict;
  /** Largest part of the present drive that keeps the upper bound at the limit, 0 to 1; null where not refused. */
  readonly driveFraction: number | null;
  /** What to do, or null where nothing need be said. */
  readonly sentence: string | null;
}

/**
 * Holds the upper 95 % bound of a step's amplitude against the travel limit.
 *
 * @param driveHz for the sentence
 * @param limitMm displacement from rest that must not be passed, mm, or null where none is stated
 * @param overshoot largest amplitude on the way to steady motion over the steady one, 1 or more
 */
export function checkTravel(
  driveHz: number,
  predicted: PredictedAmplitude | null,
  limitMm: number | null,
  overshoot: number,
): TravelCheck {
  if (limitMm === null) return { verdict: 'unknown', driveFraction: null, sentence: null };
  if (predicted === null)
    return {
      verdict: 'unknown',
      driveFraction: null,
      sentence: `The travel limit of ${mm(limitMm)} cannot be watched yet: nothing tells the size of the motion. Begin far below resonance with a small drive.`,
    };
  const { upperMm, medianMm } = predicted;
  if (upperMm > limitMm) {
    const driveFraction = limitMm / upperMm;
    return {
      verdict: 'refused',
      driveFraction,
      sentence: `At ${driveHz} Hz the part may swing ${mm(upperMm)} (95 %; most likely ${mm(medianMm)}), past its travel limit of ${mm(limitMm)}: do not run this step. Lower the drive to ${Math.floor(100 * driveFraction)} % of its present level, or measure nearer steps first.`,
    };
  }
  if (upperMm * overshoot > limitMm)
    return {
      verdict: 'ramp',
      driveFraction: null,
      sentence: `At ${driveHz} Hz the steady swing stays below ${mm(limitMm)}, but on the way there it may reach ${mm(upperMm * overshoot)}: raise the drive slowly.`,
    };
  return { verdict: 'below', driveFraction: null, sentence: null };
}

const mm = (value: number) => `${Number(value.toPrecision(3))} mm`;
