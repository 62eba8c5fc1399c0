import type { KnownCorrection, Warning } from '../numeric/warning.ts';

/** Relative standard uncertainty of a jitter figure. */
const JITTER_REL_U = 0.2;

/** Stamps rounded to more than this fraction of a period are called coarse. */
const COARSE_FRACTION = 0.05;

/** Amplitude lost to jitter beyond which the engineer is told. */
const JITTER_LOSS = 0.005;

/**
 * What random errors of the time stamps do to a fitted sine: amplitude times exp(-(w s)^2 / 2) for normal
 * errors of standard deviation s, and a residual of rms A sqrt((1 - exp(-(w s)^2)) / 2), which for small w s is
 * A w s / sqrt(2). Derived: mean and variance of a sine at a normally scattered phase.
 */
export function jitterEffect(
  frequencyHz: number,
  jitterS: number,
): { readonly amplitude: number; readonly residualRms: number } {
  const phase = 2 * Math.PI * frequencyHz * jitterS;
  return {
    amplitude: Math.exp(-(phase * phase) / 2),
    residualRms: Math.sqrt(-Math.expm1(-phase * phase) / 2),
  };
}

/** Amplitude factor of stamps rounded to a tick of `quantumS` that does not divide the frame interval: sinc(f q). */
export function quantisationEffect(frequencyHz: number, quantumS: number): number {
  const x = Math.PI * frequencyHz * quantumS;
  return Math.abs(x) < 1e-8 ? 1 : Math.sin(x) / x;
}

/**
 * Correction for stamps known to scatter by `jitterS` (standard deviation) and to be rounded to `quantumS`;
 * either may be 0. u is a fifth of the jitter's loss doubled (its figure enters squared) and, for the rounding, its whole
 * loss over sqrt(3), because ticks that divide the frame interval lose nothing.
 */
export function stampCorrection(frequencyHz: number, jitterS: number, quantumS: number): KnownCorrection {
  if (!(jitterS >= 0 && quantumS >= 0)) throw new Error('jitter and tick must be 0 or more');
  const jitter = jitterEffect(frequencyHz, jitterS).amplitude;
  const loss = 1 - quantisationEffect(frequencyHz, Math.min(quantumS, 0.5 / frequencyHz));
  const factor = 1 / jitter;
  const u = factor * Math.hypot(2 * JITTER_REL_U * -Math.log(jitter), loss / Math.sqrt(3));
  return { factor, u, warning: stampWarning(frequencyHz, quantumS, 1 - jitter) };
}

function stampWarning(frequencyHz: number, quantumS: number, jitterLoss: number): Warning | null {
  if (frequencyHz * quantumS > COARSE_FRACTION) {
    return {
      code: 'stamps-coarse',
      sentence:
        `Time stamps are rounded to ${(1000 * quantumS).toPrecision(2)} ms, ${(100 * frequencyHz * quantumS).toFixed(0)} % of a drive period; ` +
        'copy the clip from the phone as it was filmed, without converting it.',
    };
  }
  if (jitterLoss <= JITTER_LOSS) return null;
  return {
    code: 'stamps-irregular',
    sentence:
      `Time stamps scatter so much that ${(100 * jitterLoss).toPrecision(2)} % of the amplitude was lost and corrected; film with the ` +
      'phone in its fixed-rate mode, or at a higher frame rate.',
  };
}

/** How regular a clip's stamps are. Irregular stamps do no harm while they are true: this is for the record. */
export interface StampIrregularity {
  /** Median interval, s. */
  readonly medianIntervalS: number;
  /** Standard deviation of the stamps about an even spacing of the best whole frame numbers, s. */
  readonly scatterS: number;
  /** Largest interval, s. */
  readonly largestGapS: number;
  /** Frames missing by the count of median intervals. */
  readonly missingFrames: number;
}

/**
 * Irregularity of frame times: each stamp is given the whole frame number nearest to its distance from the
 * one before, a straight line is fitted, and what is left is the scatter.
 *
 * @param timesS strictly increasing, s
 * @returns null with fewer than three frames
 */
export function stampIrregularity(timesS: Float64Array): StampIrregularity | null {
  const n = timesS.length;
  if (n < 3) return null;
  const intervals = Float64Array.from({ length: n - 1 }, (_, i) => timesS[i + 1]! - timesS[i]!);
  const medianIntervalS = intervals.slice().sort()[Math.floor((n - 1) / 2)]!;
  const frame = new Float64Array(n);
  for (let i = 1; i < n; i++)
    frame[i] = frame[i - 1]! + Math.max(1, Math.round(intervals[i - 1]! / medianIntervalS));
  return {
    medianIntervalS,
    scatterS: scatterAboutLine(frame, timesS),
    largestGapS: Math.max(...intervals),
    missingFrames: frame[n - 1]! - (n - 1),
  };
}

function scatterAboutLine(frame: Float64Array, timesS: Float64Array): number {
  const n = frame.length;
  const meanFrame = frame.reduce((a, b) => a + b, 0) / n;
  const meanTime = timesS.reduce((a, b) => a + b, 0) / n;
  let ff = 0;
  let ft = 0;
  let tt = 0;
  for (let i = 0; i < n; i++) {
    const f = frame[i]! - meanFrame;
    const t = timesS[i]! - meanTime;
    ff += f * f;
    ft += f * t;
    tt += t * t;
  }
  return Math.sqrt(Math.max(0, tt - (ft * ft) / ff) / (n - 2));
}
