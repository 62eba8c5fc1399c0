import { coverageFactor } from '../numeric/quantiles.ts';
import type { StraightLine } from './straight-line-york.ts';

/** A value read from a fitted trend at one x, with its standard uncertainty and the ends of its interval. */
export interface TrendValue {
  readonly x: number;
  readonly value: number;
  /** Standard uncertainty; null where the trend has none, and then `low` and `high` are null too. */
  readonly u: number | null;
  readonly low: number | null;
  readonly high: number | null;
  /** Coverage factor used for `low` and `high`. */
  readonly k: number | null;
  /** True where x lies outside the points that made the trend. */
  readonly extrapolated: boolean;
}

/**
 * What an interval is about: the fitted trend itself, or a further measured point, whose own standard
 * uncertainty is then part of it.
 */
export interface BandOptions {
  /** Probability that the interval holds the truth, 0 to 1; 0.95 where left out. */
  readonly coverage?: number;
  /** Standard uncertainty of a further point; left out: the interval is that of the trend alone. */
  readonly uOfNewPoint?: number;
}

/** Builds the interval about a trend value. `variance` null: unknown; `coverageDof` null: infinitely many. */
export function trendValue(
  x: number,
  value: number,
  variance: number | null,
  trend: { readonly coverageDof: number | null; readonly xRange: readonly [number, number] },
  options: BandOptions = {},
): TrendValue {
  const extrapolated = x < trend.xRange[0] || x > trend.xRange[1];
  if (variance === null || trend.coverageDof === 0)
    return { x, value, u: null, low: null, high: null, k: null, extrapolated };
  const u = Math.sqrt(Math.max(variance, 0) + (options.uOfNewPoint ?? 0) ** 2);
  const k = coverageFactor(options.coverage ?? 0.95, trend.coverageDof ?? Number.POSITIVE_INFINITY);
  return { x, value, u, low: value - k * u, high: value + k * u, k, extrapolated };
}

/**
 * Value of a fitted line at x with its interval.
 * Source: JCGM 100:2008, annex H.3 (value and uncertainty of a calibration line).
 */
export function lineValue(line: StraightLine, x: number, options: BandOptions = {}): TrendValue {
  const { uIntercept, uSlope, covariance } = line;
  const variance =
    uIntercept === null || uSlope === null || covariance === null
      ? null
      : uIntercept ** 2 + 2 * x * covariance + (x * uSlope) ** 2;
  return trendValue(x, line.intercept + line.slope * x, variance, line, options);
}
