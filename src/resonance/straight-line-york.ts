import { chiSquareCdf } from '../numeric/quantiles.ts';
import { chi2Upright, slopeOfLeastChi2, spread, yorkSums } from './straight-line-york-slope.ts';

/** Points of a straight line. All arrays have the same length; uncertainties are standard (k = 1). */
export interface LinePoints {
  readonly x: ArrayLike<number>;
  readonly y: ArrayLike<number>;
  /** Standard uncertainty of each x, 0 where exact. Left out: all x are exact. */
  readonly uX?: ArrayLike<number>;
  /** Standard uncertainty of each y, 0 where exact. Left out: unknown, and taken from the scatter. */
  readonly uY?: ArrayLike<number>;
  /** Correlation of the errors of x and y in each point, between -1 and 1. Left out: none. */
  readonly correlation?: ArrayLike<number>;
}

/**
 * A fitted line y = intercept + slope x. `method` says how the points were weighted: 'york' with errors in both,
 * 'weighted' with errors in y only, 'unweighted' without any. Uncertainties are standard and null where nothing
 * tells them (two points without uncertainties).
 */
export interface StraightLine {
  readonly method: 'york' | 'weighted' | 'unweighted';
  readonly points: number;
  readonly intercept: number;
  readonly slope: number;
  readonly uIntercept: number | null;
  readonly uSlope: number | null;
  readonly covariance: number | null;
  /** Degrees of freedom, points - 2. */
  readonly dof: number;
  /** Weighted sum of squared residuals; null for an unweighted line. */
  readonly chi2: number | null;
  /** Chance of a chi2 at least this large if line and uncertainties are right; null where it cannot be told. */
  readonly chi2Probability: number | null;
  /** Standard deviation of the y residuals about an unweighted line; null otherwise or with two points. */
  readonly residualSd: number | null;
  /** What the uncertainties were multiplied by because the points scatter more than stated; 1 where not. */
  readonly widenedBy: number;
  /** Degrees of freedom for coverage factors; null where the uncertainties are given, not found from scatter. */
  readonly coverageDof: number | null;
  /** Smallest and largest x. */
  readonly xRange: readonly [number, number];
}

/** Either a line, or null with the sentence that says what is missing. */
export type LineOutcome =
  | { readonly line: StraightLine; readonly reason: null }
  | { readonly line: null; readonly reason: string };

/** At which chance a scatter beyond the stated uncertainties is believed, see {@link LineOptions}. */
export const SCATTER_SIGNIFICANCE = 0.05;

/**
 * `scatter` says what happens when the points scatter more than their uncertainties allow (chance below 5 %):
 * 'keep' leaves the uncertainties as they are given, 'widen' multiplies them by sqrt(chi2 / dof).
 */
export interface LineOptions {
  /** What x is called in sentences, 'x' where left out. */
  readonly xName?: string;
  readonly scatter?: 'keep' | 'widen';
}

// chi2 by which an upright line must be worse than the best one: 95 % point of chi-square, one degree of freedom
const UPRIGHT_REFUTED = 3.841;

const toFloats = (values: ArrayLike<number> | undefined, count: number, otherwise: number): Float64Array => {
  if (values !== undefined && values.length !== count)
    throw new Error(`line points need arrays of one length, got ${values.length} beside ${count}`);
  return values === undefined ? new Float64Array(count).fill(otherwise) : Float64Array.from(values);
};

const nothing = (reason: string): LineOutcome => ({ line: null, reason });

/**
 * Fits a straight line to points that may be uncertain in both coordinates, with correlated errors where given;
 * with errors in y alone it is weighted least squares, without any it is ordinary least squares and the
 * uncertainties come from the scatter.
 *
 * @returns null with a sentence where the points do not determine a line
 * @throws Error where arrays differ in length, a value is not finite, or an uncertainty is negative
 * Source: D. York, N. M. Evensen, M. L. Martínez and J. De Basabe Delgado, Am. J. Phys. 72 (2004) 367.
 */
export function fitStraightLine(points: LinePoints, options: LineOptions = {}): LineOutcome {
  const count = points.x.length;
  const xName = options.xName ?? 'x';
  const x = toFloats(points.x, count, 0);
  const y = toFloats(points.y, count, 0);
  const uX = toFloats(points.uX, count, 0);
  const given = points.uY !== undefined || uX.some((u) => u > 0);
  const uY = toFloats(points.uY, count, given ? 0 : 1);
  const correlation = toFloats(points.correlation, count, 0);
  for (const values of [x, y, uX, uY, correlation])
    if (!values.every(Number.isFinite)) throw new Error('line points must be finite');
  if (uX.some((u) => u < 0) || uY.some((u) => u < 0)) throw new Error('uncertainties must not be negative');
  if (correlation.some((r) => Math.abs(r) >= 1))
    throw new Error('correlations must lie between -1 and 1, ends excluded');

  if (count < 2)
    return nothing(`A line needs at least two points; there ${count === 1 ? 'is one' : 'are none'}.`);
  const xSpread = spread(x);
  if (!(xSpread > 1e-12 * Math.max(...x.map(Math.abs))))
    return nothing(`All points have the same ${xName}: nothing was varied, so no slope can be told.`);
  if (given && uX.some((u, i) => u === 0 && uY[i] === 0))
    return nothing('Some points have uncertainties and others have none: give every point one, or none.');

  // direction of least chi2, then the unified equations to the last digit
  const unit = (spread(y) || uY.reduce((a, b) => a + b, 0) / count) / xSpread || 1 / xSpread;
  const at = (slope: number) => yorkSums(slope, x, y, uX, uY, correlation);
  let slope = slopeOfLeastChi2((trial) => at(trial).chi2, unit);
  let sums = at(slope);
  for (let iteration = 0; iteration < 100; iteration++) {
    const next = sums.nextSlope;
    const sumsNext = at(next);
    if (!Number.isFinite(next) || sumsNext.chi2 > sums.chi2 * (1 + 1e-9) + 1e-300) break; // keep the minimum found
    const settled = Math.abs(next - slope) <= 1e-15 * Math.abs(next);
    slope = next;
    sums = sumsNext;
    if (settled) break;
  }

  if (chi2Upright(x, uX) < sums.chi2 + UPRIGHT_REFUTED)
    return nothing(
      `The points do not differ in ${xName} by more than its uncertainty, so no slope can be told.`,
    );

  const dof = count - 2;
  const scatterVariance = dof > 0 ? sums.chi2 / dof : null;
  const chi2Probability = given && dof > 0 ? 1 - chiSquareCdf(sums.chi2, dof) : null;
  const widen =
    options.scatter === 'widen' && chi2Probability !== null && chi2Probability < SCATTER_SIGNIFICANCE;
  const variance = !given || widen ? scatterVariance : 1;
  const slopeVariance = variance === null ? null : variance / sums.adjustedSpread;
  const interceptVariance =
    variance === null || slopeVariance === null
      ? null
      : variance / sums.sumOfWeights + sums.adjustedMean ** 2 * slopeVariance;
  return {
    reason: null,
    line: {
      method: given ? (uX.some((u) => u > 0) ? 'york' : 'weighted') : 'unweighted',
      points: count,
      intercept: sums.yMean - slope * sums.xMean,
      slope,
      uIntercept: interceptVariance === null ? null : Math.sqrt(interceptVariance),
      uSlope: slopeVariance === null ? null : Math.sqrt(slopeVariance),
      covariance: slopeVariance === null ? null : -sums.adjustedMean * slopeVariance,
      dof,
      chi2: given ? sums.chi2 : null,
      chi2Probability,
      residualSd: given || scatterVariance === null ? null : Math.sqrt(scatterVariance),
      widenedBy: widen && variance !== null ? Math.sqrt(variance) : 1,
      coverageDof: given && !widen ? null : dof,
      xRange: [Math.min(...x), Math.max(...x)],
    },
  };
}
