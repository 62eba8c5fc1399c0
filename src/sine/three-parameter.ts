import { presentSamples, type Samples, spanS } from './samples.ts';
import { finishSineFit, type NoiseModel, type SineFit } from './sine-fit.ts';

/** Choices common to the sine fits. */
export interface SineFitOptions {
  /** Slow baseline beside the sine: 0 none, 1 offset, 2 and slope, 3 and curvature. Default 1. */
  readonly baselineTerms?: number;
  /** Multiples of the frequency fitted beside it. Default none. */
  readonly harmonics?: readonly number[];
  /** Default `correlated`: uncertainties hold for white and for correlated residuals. */
  readonly noise?: NoiseModel;
}

/** Middle and half span of the samples, in seconds: the reference of every sine model. */
export function recordCentre(samples: Samples): { referenceTimeS: number; halfSpanS: number } {
  const halfSpanS = spanS(samples) / 2;
  return { referenceTimeS: (samples.timesS[0] ?? 0) + halfSpanS, halfSpanS };
}

/**
 * Sine fit at a known frequency (three parameters and more): amplitude, phase and offset by linear least squares
 * on the frames' own times, which need not be evenly spaced. NaN values are gaps and are left out.
 *
 * @param timesS seconds, strictly increasing
 * @param values displacement, any unit
 * @param frequencyHz positive; may lie above half the frame rate
 * @returns null where there are too few frames, or the frames do not tell the sine from the offset
 *   (for example a frequency at a whole multiple of the frame rate)
 * Source: IEEE Std 1057, three-parameter sine fit (from memory), by QR decomposition.
 */
export function fitSineAtFrequency(
  timesS: Float64Array,
  values: Float64Array,
  frequencyHz: number,
  options: SineFitOptions = {},
): SineFit | null {
  if (!(frequencyHz > 0) || !Number.isFinite(frequencyHz)) return null;
  const samples = presentSamples(timesS, values);
  const model = {
    frequencyHz,
    ...recordCentre(samples),
    baselineTerms: options.baselineTerms ?? 1,
    harmonics: options.harmonics ?? [],
  };
  return finishSineFit(samples, model, {
    frequencyFree: false,
    noise: options.noise ?? 'correlated',
    iterations: 0,
    stopReason: 'linear',
  });
}
