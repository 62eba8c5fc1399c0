/** A real sinusoid in white noise, sampled evenly. Amplitude and noise in one unit. */
export interface SampledSine {
  readonly frameCount: number;
  readonly frameRateHz: number;
  readonly amplitude: number;
  readonly noiseSd: number;
}

/** Smallest standard deviations an unbiased estimator can reach. */
export interface SineBounds {
  readonly amplitude: number;
  readonly frequencyHz: number;
  /** Of the phase at the first sample, where frequency and phase are strongly correlated. */
  readonly phaseAtFirstRad: number;
  /** Of the phase at mid-record, where they are not. */
  readonly phaseAtMiddleRad: number;
  readonly offset: number;
}

/**
 * Cramér-Rao bounds of a real sinusoid with all four parameters unknown, many frames and more than a few periods.
 * Source: Rife and Boorstyn, IEEE Trans. Inf. Theory 20 (1974) 591, for the complex tone; twice its variance for
 * the real one, as in Kay, Estimation Theory (1993), example 3.14 (from memory).
 */
export function sineBounds({ frameCount: n, frameRateHz, amplitude, noiseSd }: SampledSine): SineBounds {
  const snr = amplitude ** 2 / (2 * noiseSd ** 2);
  return {
    amplitude: noiseSd * Math.sqrt(2 / n),
    frequencyHz: (frameRateHz / (2 * Math.PI)) * Math.sqrt(12 / (snr * n * (n * n - 1))),
    phaseAtFirstRad: Math.sqrt((2 * (2 * n - 1)) / (snr * n * (n + 1))),
    phaseAtMiddleRad: (noiseSd / amplitude) * Math.sqrt(2 / n),
    offset: noiseSd / Math.sqrt(n),
  };
}

/**
 * Factor by which first-order autoregressive noise of the same variance changes the variance of amplitude,
 * phase and frequency against white noise: the noise spectrum at the signal.
 *
 * @param lag1 correlation of neighbouring frames, in (-1, 1)
 * @param cyclesPerFrame signal frequency over frame rate
 * Source: derived from the large-sample covariance C = 2 S(w)/N; as Montgomery and O'Donoghue, Delta Scuti
 * Newsletter 13 (1999) 28, state for correlated noise.
 */
export function autoregressiveVarianceFactor(lag1: number, cyclesPerFrame: number): number {
  return (1 - lag1 ** 2) / (1 - 2 * lag1 * Math.cos(2 * Math.PI * cyclesPerFrame) + lag1 ** 2);
}

/** The same factor for the variance of the offset: (1 + lag1)/(1 - lag1). */
export function autoregressiveOffsetFactor(lag1: number): number {
  return (1 + lag1) / (1 - lag1);
}
