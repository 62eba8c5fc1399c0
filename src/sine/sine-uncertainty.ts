/** What `scaledCovariance` needs of a fitted sine model. */
export interface UnscaledSineCovariance {
  /** (D'D)^-1, row-major: cosine, sine, baseline terms, ..., and last the frequency where it is free. */
  readonly unscaledCovariance: Float64Array;
  readonly columns: number;
  /** Coefficients of cosine and sine at the reference time. */
  readonly cosine: number;
  readonly sine: number;
  /** Noise variance per frame at the signal's frequency. */
  readonly signalVariance: number;
  /** Noise variance per frame at frequency zero. */
  readonly slowVariance: number;
  readonly baselineTerms: number;
  readonly frequencyFree: boolean;
}

/**
 * Covariance of [amplitude, phase, offset, frequencyHz], row-major 4 x 4, with y = A cos(2 pi f (t - tr) + phase):
 * each parameter's unscaled covariance multiplied by the noise level where that parameter is sensitive, the signal's
 * frequency or zero. Rows of parameters that were not fitted are zero.
 * Source: law of propagation, JCGM 100:2008, 5.2; noise spectrum at the signal as in `localNoise`.
 */
export function scaledCovariance(input: UnscaledSineCovariance): Float64Array {
  const { unscaledCovariance, columns, cosine: a, sine: b } = input;
  const amplitude = Math.hypot(a, b);
  const signalSd = Math.sqrt(input.signalVariance);
  const slowSd = Math.sqrt(input.slowVariance);
  // rows: sensitivity of each result to the columns cosine, sine, offset, frequency
  const sensitivities: readonly (readonly [number, number][])[] = [
    [
      [0, (a / amplitude) * signalSd],
      [1, (b / amplitude) * signalSd],
    ],
    [
      [0, (b / amplitude ** 2) * signalSd],
      [1, (-a / amplitude ** 2) * signalSd],
    ],
    input.baselineTerms > 0 ? [[2, slowSd]] : [],
    input.frequencyFree ? [[columns - 1, signalSd]] : [],
  ];
  const covariance = new Float64Array(16);
  for (let p = 0; p < 4; p++) {
    for (let q = 0; q < 4; q++) {
      let sum = 0;
      for (const [row, left] of sensitivities[p]!) {
        for (const [column, right] of sensitivities[q]!) {
          sum += left * right * unscaledCovariance[row * columns + column]!;
        }
      }
      covariance[p * 4 + q] = sum;
    }
  }
  return covariance;
}
