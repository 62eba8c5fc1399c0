import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import type { FittedDesign } from './ordinates.ts';
import { localNoise } from './residual-spectrum.ts';
import type { Samples } from './samples.ts';
import { columnCount, type SineModel, sineDesign } from './sine-model.ts';
import { scaledCovariance } from './sine-uncertainty.ts';

/** How the residuals are taken for the uncertainties: as correlated (their spectrum at the signal), or as white. */
export type NoiseModel = 'correlated' | 'white';

/** Why an iterative sine fit stopped; `linear` where the frequency was given and nothing was iterated. */
export type SineStopReason = 'linear' | 'step' | 'stalled' | 'max-iterations';

/**
 * A fitted sinusoid y = amplitude cos(2 pi f (t - referenceTimeS) + phaseRad) + baseline. Amplitude is zero to
 * peak, in the unit of the values; u is a standard uncertainty.
 */
export interface SineFit {
  readonly frequencyHz: number;
  /** Null where the frequency was given, not measured. */
  readonly frequencyU: number | null;
  readonly amplitude: number;
  readonly amplitudeU: number;
  /** At referenceTimeS, in (-pi, pi]. */
  readonly phaseRad: number;
  readonly phaseU: number;
  /** Mean level over the record. */
  readonly offset: number;
  readonly offsetU: number;
  /** Coefficients of the baseline's Legendre polynomials over the record: offset, half the total slope, ... */
  readonly baseline: Float64Array;
  readonly referenceTimeS: number;
  readonly halfSpanS: number;
  /** Covariance of [amplitude, phaseRad, offset, frequencyHz], row-major 4 x 4; zeros for a given frequency. */
  readonly covariance: Float64Array;
  /** Complex amplitude of each harmonic asked for, as [cosine, sine] coefficients, in the order asked. */
  readonly harmonics: readonly (readonly [number, number])[];
  readonly residuals: Float64Array;
  /** The design behind the fit, for whoever asks more of its residuals. */
  readonly fitted: FittedDesign;
  readonly residualSumOfSquares: number;
  readonly residualSd: number;
  /** Autocorrelation of the residuals at lags of 1, 2 and 3 frames. */
  readonly residualAutocorrelation: Float64Array;
  readonly frames: number;
  readonly degreesOfFreedom: number;
  /** Degrees of freedom of the amplitude's uncertainty, for Student's t. */
  readonly effectiveDof: number;
  /** Number of independent frames that would leave the same uncertainty of the amplitude. */
  readonly effectiveFrames: number;
  readonly iterations: number;
  readonly stopReason: SineStopReason;
}

/** Phase at t = 0 of the times the fit was given, in radians, not wrapped. */
export function phaseAtZeroRad(fit: SineFit): number {
  return fit.phaseRad - 2 * Math.PI * fit.frequencyHz * fit.referenceTimeS;
}

/** Autocorrelation of residuals (mean taken as zero) at lags 1 to `lags`; zeros where the residuals are all zero. */
export function autocorrelation(residuals: Float64Array, lags: number): Float64Array {
  const result = new Float64Array(lags);
  let total = 0;
  for (const value of residuals) total += value * value;
  for (let lag = 1; lag <= lags && total > 0; lag++) {
    let sum = 0;
    for (let i = lag; i < residuals.length; i++) sum += residuals[i]! * residuals[i - lag]!;
    result[lag - 1] = sum / total;
  }
  return result;
}

/**
 * The last step of every sine fit: solves the linear model by QR at the final frequency and works out the
 * uncertainties; with `frequencyFree` the frequency takes part in the covariance.
 *
 * @returns null where the samples do not determine the model
 */
export function finishSineFit(
  samples: Samples,
  model: SineModel,
  how: {
    readonly frequencyFree: boolean;
    readonly noise: NoiseModel;
    readonly iterations: number;
    readonly stopReason: SineStopReason;
  },
): SineFit | null {
  const frames = samples.timesS.length;
  let design = sineDesign(model, samples.timesS);
  const linear = linearLeastSquares(design, frames, columnCount(model), samples.values);
  if (linear === null) return null;
  const [a, b] = [linear.coefficients[0]!, linear.coefficients[1]!];
  const amplitude = Math.hypot(a, b);
  const columns = columnCount(model) + (how.frequencyFree ? 1 : 0);
  const degreesOfFreedom = frames - columns;
  if (degreesOfFreedom < 1 || !(amplitude > 0)) return null;

  // derivative by frequency as one more column, so that the covariance knows it
  let unscaledCovariance = linear.unscaledCovariance;
  if (how.frequencyFree) {
    design = sineDesign(model, samples.timesS, 1);
    for (let i = 0; i < frames; i++) {
      const row = i * columns;
      const turn = 2 * Math.PI * (samples.timesS[i]! - model.referenceTimeS);
      design[row + columns - 1] = turn * (b * design[row]! - a * design[row + 1]!);
    }
    const extended = linearLeastSquares(design, frames, columns, linear.residuals);
    if (extended === null) return null;
    unscaledCovariance = extended.unscaledCovariance;
  }

  const variance = linear.residualSumOfSquares / degreesOfFreedom;
  const fitted = { design, columns, unscaledCovariance };
  const local =
    how.noise === 'white' ? null : localNoise(samples, linear.residuals, fitted, model.frequencyHz);
  const atSignal = local ?? { variance, effectiveDof: degreesOfFreedom };
  const slow =
    (how.noise === 'white' || model.baselineTerms === 0
      ? null
      : localNoise(samples, linear.residuals, fitted, 0)) ?? atSignal;
  const covariance = scaledCovariance({
    unscaledCovariance,
    columns,
    cosine: a,
    sine: b,
    signalVariance: atSignal.variance,
    slowVariance: slow.variance,
    baselineTerms: model.baselineTerms,
    frequencyFree: how.frequencyFree,
  });

  const harmonics = model.harmonics.map((_, k) => {
    const column = 2 + model.baselineTerms + 2 * k;
    return [linear.coefficients[column]!, linear.coefficients[column + 1]!] as const;
  });
  const amplitudeU = Math.sqrt(covariance[0]!);
  return {
    frequencyHz: model.frequencyHz,
    frequencyU: how.frequencyFree ? Math.sqrt(covariance[15]!) : null,
    amplitude,
    amplitudeU,
    phaseRad: Math.atan2(-b, a),
    phaseU: Math.sqrt(covariance[5]!),
    offset: model.baselineTerms > 0 ? linear.coefficients[2]! : 0,
    offsetU: Math.sqrt(covariance[10]!),
    baseline: linear.coefficients.slice(2, 2 + model.baselineTerms),
    referenceTimeS: model.referenceTimeS,
    halfSpanS: model.halfSpanS,
    covariance,
    harmonics,
    residuals: linear.residuals,
    fitted,
    residualSumOfSquares: linear.residualSumOfSquares,
    residualSd: Math.sqrt(variance),
    residualAutocorrelation: autocorrelation(linear.residuals, 3),
    frames,
    degreesOfFreedom,
    effectiveDof: Math.min(atSignal.effectiveDof, degreesOfFreedom),
    effectiveFrames: atSignal.variance > 0 ? (frames * variance) / atSignal.variance : frames,
    iterations: how.iterations,
    stopReason: how.stopReason,
  };
}
