import { emptyResponse, fillResponse } from './full-response.ts';
import { lagDeg } from './models.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';

/** The fitted curve with its band; all arrays as long as `driveHz`. Null arrays where the fit cannot give them. */
export interface FitCurve {
  readonly driveHz: Float64Array;
  /** Amplitude in the fit's unit; null for lag-only fits. */
  readonly amplitude: Float64Array | null;
  /** Standard uncertainty of the curve itself (not of one more dwell), independent part. */
  readonly amplitudeU: Float64Array | null;
  readonly lagDeg: Float64Array;
  readonly lagUDeg: Float64Array | null;
}

const DEG = 180 / Math.PI;

/**
 * Amplitude and lag of a fit at any drive frequencies, with the standard uncertainty that the covariance of its
 * parameters gives them. Null where the fit has no numbers.
 *
 * @param driveHz positive frequencies, in any order
 */
export function fitCurve(fit: ResonanceFit, driveHz: ArrayLike<number>): FitCurve | null {
  if (fit.missing !== null) return null;
  const { layout, covariance } = fit;
  const parameters = Float64Array.from(fit.parameters, ({ value }) => value ?? Number.NaN);
  const response = emptyResponse(layout);
  const count = driveHz.length;
  const amplitude = new Float64Array(count);
  const amplitudeU = new Float64Array(count);
  const lag = new Float64Array(count);
  const lagU = new Float64Array(count);
  const slopes = new Float64Array(parameters.length);
  for (let i = 0; i < count; i++) {
    fillResponse(layout, parameters, driveHz[i]!, response);
    const { re, im, reBy, imBy } = response;
    const size = Math.hypot(re, im);
    amplitude[i] = size;
    lag[i] = lagDeg(response);
    if (covariance === null) continue;
    for (let j = 0; j < slopes.length; j++) slopes[j] = (re * reBy[j]! + im * imBy[j]!) / size;
    amplitudeU[i] = spread(slopes, covariance);
    for (let j = 0; j < slopes.length; j++) slopes[j] = (im * reBy[j]! - re * imBy[j]!) / (size * size);
    lagU[i] = DEG * spread(slopes, covariance);
  }
  const lagOnly = layout.gain < 0;
  return {
    driveHz: Float64Array.from(driveHz),
    amplitude: lagOnly ? null : amplitude,
    amplitudeU: lagOnly || covariance === null ? null : amplitudeU,
    lagDeg: lag,
    lagUDeg: covariance === null ? null : lagU,
  };
}

function spread(slopes: Float64Array, covariance: Float64Array): number {
  const n = slopes.length;
  let variance = 0;
  for (let a = 0; a < n; a++) {
    for (let b = 0; b < n; b++) variance += slopes[a]! * covariance[a * n + b]! * slopes[b]!;
  }
  return Math.sqrt(Math.max(0, variance));
}
