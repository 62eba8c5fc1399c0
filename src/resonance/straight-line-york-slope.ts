/** What the unified equations give at a trial slope. */
export interface YorkSums {
  chi2: number;
  sumOfWeights: number;
  xMean: number;
  yMean: number;
  nextSlope: number;
  /** Weighted sum of squared deviations of the adjusted x about their mean. */
  adjustedSpread: number;
  adjustedMean: number;
}

/** The sums of the unified equations at a trial slope; variances instead of weights, so that an exact x may be 0. */
export function yorkSums(
  slope: number,
  x: Float64Array,
  y: Float64Array,
  uX: Float64Array,
  uY: Float64Array,
  r: Float64Array,
): YorkSums {
  const count = x.length;
  const weight = new Float64Array(count);
  let sumOfWeights = 0;
  let xMean = 0;
  let yMean = 0;
  for (let i = 0; i < count; i++) {
    const variance = uY[i]! ** 2 + (slope * uX[i]!) ** 2 - 2 * slope * r[i]! * uX[i]! * uY[i]!;
    weight[i] = 1 / variance;
    sumOfWeights += weight[i]!;
    xMean += weight[i]! * x[i]!;
    yMean += weight[i]! * y[i]!;
  }
  xMean /= sumOfWeights;
  yMean /= sumOfWeights;
  let chi2 = 0;
  let numerator = 0;
  let denominator = 0;
  let adjustedMean = 0;
  const beta = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const dx = x[i]! - xMean;
    const dy = y[i]! - yMean;
    const shared = r[i]! * uX[i]! * uY[i]!;
    beta[i] = weight[i]! * (dx * uY[i]! ** 2 + slope * dy * uX[i]! ** 2 - (slope * dx + dy) * shared);
    chi2 += weight[i]! * (dy - slope * dx) ** 2;
    numerator += weight[i]! * beta[i]! * dy;
    denominator += weight[i]! * beta[i]! * dx;
    adjustedMean += weight[i]! * beta[i]!;
  }
  adjustedMean /= sumOfWeights;
  let adjustedSpread = 0;
  for (let i = 0; i < count; i++) adjustedSpread += weight[i]! * (beta[i]! - adjustedMean) ** 2;
  return {
    chi2,
    sumOfWeights,
    xMean,
    yMean,
    nextSlope: numerator / denominator,
    adjustedSpread,
    adjustedMean: adjustedMean + xMean,
  };
}

/** Standard deviation of the values about their mean (divisor n). */
export function spread(values: Float64Array): number {
  let mean = 0;
  for (const value of values) mean += value / values.length;
  let sum = 0;
  for (const value of values) sum += (value - mean) ** 2;
  return Math.sqrt(sum / values.length);
}

const SCAN_STEPS = 181;
const STEEPEST = 89.4; // degrees, in units of the points' own spreads: beyond it the line is as good as upright

/** The slope of least chi2: a scan over all directions, so that no second minimum is taken for the first, then refined. */
export function slopeOfLeastChi2(chi2At: (slope: number) => number, unit: number): number {
  const slopeOf = (degrees: number) => unit * Math.tan((degrees * Math.PI) / 180);
  let best = 0;
  let bestChi2 = Number.POSITIVE_INFINITY;
  const step = (2 * STEEPEST) / (SCAN_STEPS - 1);
  for (let k = 0; k < SCAN_STEPS; k++) {
    const degrees = -STEEPEST + k * step;
    const value = chi2At(slopeOf(degrees));
    if (value < bestChi2) {
      best = degrees;
      bestChi2 = value;
    }
  }
  const ratio = (Math.sqrt(5) - 1) / 2;
  let low = Math.max(best - step, -STEEPEST);
  let high = Math.min(best + step, STEEPEST);
  while (high - low > 1e-6) {
    const left = high - ratio * (high - low);
    const right = low + ratio * (high - low);
    if (chi2At(slopeOf(left)) < chi2At(slopeOf(right))) high = right;
    else low = left;
  }
  return slopeOf((low + high) / 2);
}

/** chi2 of an upright line: of the x about their weighted mean; Infinity where an x is exact. */
export function chi2Upright(x: Float64Array, uX: Float64Array): number {
  if (uX.some((u) => u === 0)) return Number.POSITIVE_INFINITY;
  const sumOfWeights = uX.reduce((sum, u) => sum + u ** -2, 0);
  const mean = x.reduce((sum, value, i) => sum + value / uX[i]! ** 2, 0) / sumOfWeights;
  return x.reduce((sum, value, i) => sum + ((value - mean) / uX[i]!) ** 2, 0);
}
