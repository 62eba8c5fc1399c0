/**
 * Logarithmic decrement of a damping ratio in [0, 1): ln of the ratio of successive free maxima;
 * null outside the range, where there is no oscillation.
 * Source: Den Hartog, Thomson (from memory).
 */
export function logDecrement(dampingRatio: number): number | null {
  if (!(dampingRatio >= 0 && dampingRatio < 1)) return null;
  return (2 * Math.PI * dampingRatio) / Math.sqrt(1 - dampingRatio * dampingRatio);
}

/** Damping ratio of a logarithmic decrement (0 or more). */
export function dampingRatioFromDecrement(decrement: number): number {
  return decrement / Math.hypot(2 * Math.PI, decrement);
}

/** Free cycles until the amplitude has halved, for a damping ratio in (0, 1); null outside. */
export function cyclesToHalf(dampingRatio: number): number | null {
  const decrement = logDecrement(dampingRatio);
  return decrement === null || decrement === 0 ? null : Math.LN2 / decrement;
}

/**
 * Loss factor from the width of a resonance `decibels` below its peak: (df / f) / sqrt(x^2 - 1), x = 10^(n/20).
 * With 3.0103 dB the divisor is 1; with 3 dB it is 0.9976.
 *
 * @param widthHz full width at that level; `peakHz` the frequency of the peak; `decibels` above 0
 * Source: the n-dB bandwidth method as in ASTM E756 (from memory).
 */
export function lossFactorFromWidth(widthHz: number, peakHz: number, decibels: number): number {
  const x = 10 ** (decibels / 20);
  return widthHz / peakHz / Math.sqrt(x * x - 1);
}
