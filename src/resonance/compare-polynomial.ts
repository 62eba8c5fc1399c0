import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import { chiSquareCdf } from '../numeric/quantiles.ts';
import { akaikeCorrected } from './akaike.ts';
import { type BandOptions, type TrendValue, trendValue } from './compare-line-band.ts';
import { SCATTER_SIGNIFICANCE } from './straight-line-york.ts';

/**
 * A polynomial y = sum of coefficients[k] t^k in t = (x - centre) / halfRange, so that powers stay of one size.
 * `covariance` is row-major (degree + 1)^2, of the coefficients, or null where nothing tells it.
 */
export interface PolynomialTrend {
  readonly degree: number;
  readonly centre: number;
  readonly halfRange: number;
  readonly coefficients: readonly number[];
  readonly covariance: readonly number[] | null;
  readonly points: number;
  /** Degrees of freedom, points - degree - 1. */
  readonly dof: number;
  /** Weighted sum of squared residuals; null where the points have no uncertainties. */
  readonly chi2: number | null;
  /** Chance of a chi2 at least this large if trend and uncertainties are right; null where it cannot be told. */
  readonly chi2Probability: number | null;
  /** Small-sample Akaike criterion, for comparing degrees on the same points; null with too few points. */
  readonly aicc: number | null;
  /** Standard deviation of the residuals where the points have no uncertainties; else null. */
  readonly residualSd: number | null;
  /** What the uncertainties were multiplied by because the points scatter more than stated; 1 where not. */
  readonly widenedBy: number;
  /** Degrees of freedom for coverage factors; null where the uncertainties are given. */
  readonly coverageDof: number | null;
  /** Smallest and largest x. */
  readonly xRange: readonly [number, number];
}

/**
 * Weighted least-squares polynomial. Where points have uncertainties that their scatter exceeds (chance below
 * 5 %), the covariance is multiplied by chi2 / dof; without uncertainties it comes from the scatter.
 *
 * @param uY standard uncertainties above 0, or null: all points count alike
 * @param degree 0 or more
 * @returns null where there are fewer different x than coefficients
 * Source: weighted least squares by QR; for the covariance JCGM 100:2008, annex H.3.
 */
export function fitPolynomial(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  uY: ArrayLike<number> | null,
  degree: number,
): PolynomialTrend | null {
  const rows = x.length;
  const columns = degree + 1;
  const xs = Array.from(x);
  if (new Set(xs).size < columns) return null;
  const xRange: [number, number] = [Math.min(...xs), Math.max(...xs)];
  const centre = (xRange[0] + xRange[1]) / 2;
  const halfRange = (xRange[1] - xRange[0]) / 2 || 1;
  const design = new Float64Array(rows * columns);
  const target = new Float64Array(rows);
  for (let row = 0; row < rows; row++) {
    const weight = uY === null ? 1 : 1 / uY[row]!;
    target[row] = y[row]! * weight;
    for (let k = 0; k < columns; k++)
      design[row * columns + k] = weight * ((xs[row]! - centre) / halfRange) ** k;
  }
  const fit = linearLeastSquares(design, rows, columns, target);
  if (fit === null) return null;

  const dof = fit.degreesOfFreedom;
  const sum = fit.residualSumOfSquares;
  const chi2Probability = uY !== null && dof > 0 ? 1 - chiSquareCdf(sum, dof) : null;
  const widen = chi2Probability !== null && chi2Probability < SCATTER_SIGNIFICANCE;
  const fromScatter = uY === null || widen;
  const variance = fromScatter ? (dof > 0 ? sum / dof : null) : 1;
  return {
    degree,
    centre,
    halfRange,
    coefficients: Array.from(fit.coefficients),
    covariance: variance === null ? null : Array.from(fit.unscaledCovariance, (value) => value * variance),
    points: rows,
    dof,
    chi2: uY === null ? null : sum,
    chi2Probability,
    aicc: akaikeCorrected(sum, rows, columns, uY === null ? 'scatter' : 'known'),
    residualSd: uY === null && variance !== null ? Math.sqrt(variance) : null,
    widenedBy: widen && variance !== null ? Math.sqrt(variance) : 1,
    coverageDof: fromScatter ? dof : null,
    xRange,
  };
}

/** Value of a polynomial trend at x with its interval; {@link BandOptions} says of what. */
export function polynomialValue(trend: PolynomialTrend, x: number, options: BandOptions = {}): TrendValue {
  const t = (x - trend.centre) / trend.halfRange;
  const powers = trend.coefficients.map((_, k) => t ** k);
  const value = trend.coefficients.reduce((sum, c, k) => sum + c * (powers[k] ?? 0), 0);
  return trendValue(x, value, quadraticForm(trend.covariance, powers), trend, options);
}

/** Slope dy/dx of a polynomial trend at x and its standard uncertainty. */
export function polynomialSlope(trend: PolynomialTrend, x: number): { value: number; u: number | null } {
  const t = (x - trend.centre) / trend.halfRange;
  const gradient = trend.coefficients.map((_, k) => (k === 0 ? 0 : (k * t ** (k - 1)) / trend.halfRange));
  const variance = quadraticForm(trend.covariance, gradient);
  return {
    value: trend.coefficients.reduce((sum, c, k) => sum + c * (gradient[k] ?? 0), 0),
    u: variance === null ? null : Math.sqrt(Math.max(variance, 0)),
  };
}

function quadraticForm(matrix: readonly number[] | null, vector: readonly number[]): number | null {
  if (matrix === null) return null;
  const n = vector.length;
  return matrix.reduce((sum, c, i) => sum + c * (vector[Math.floor(i / n)] ?? 0) * (vector[i % n] ?? 0), 0);
}
