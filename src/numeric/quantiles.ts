import chiSquareCdfOf from '@stdlib/stats-base-dists-chisquare-cdf';
import fCdfOf from '@stdlib/stats-base-dists-f-cdf';
import fQuantileOf from '@stdlib/stats-base-dists-f-quantile';
import tQuantileOf from '@stdlib/stats-base-dists-t-quantile';

// Beyond this Student's t differs from the normal distribution by less than 1e-9 and the library loses digits.
const PRACTICALLY_NORMAL = 1e9;

function requirePositive(degreesOfFreedom: number): void {
  if (!(degreesOfFreedom > 0))
    throw new Error(`degrees of freedom must be positive, not ${degreesOfFreedom}`);
}

/**
 * Quantile of Student's t distribution.
 *
 * @param probability in (0, 1)
 * @param degreesOfFreedom positive, need not be whole; Infinity gives the normal distribution
 * @throws Error outside these ranges
 */
export function studentTQuantile(probability: number, degreesOfFreedom: number): number {
  requirePositive(degreesOfFreedom);
  if (!(probability > 0 && probability < 1))
    throw new Error(`probability must lie in (0, 1), not ${probability}`);
  return tQuantileOf(probability, Math.min(degreesOfFreedom, PRACTICALLY_NORMAL));
}

/**
 * Coverage factor k of a two-sided interval: value +- k u holds the truth with the given probability.
 *
 * @param probability coverage in (0, 1), for example 0.95
 * @param degreesOfFreedom positive, need not be whole; Infinity gives the normal distribution
 * Source: JCGM 100:2008, annex G.
 */
export function coverageFactor(probability: number, degreesOfFreedom: number): number {
  return studentTQuantile(0.5 + probability / 2, degreesOfFreedom);
}

/** Probability that an F variable with the two degrees of freedom (positive) does not exceed `value`. */
export function fCdf(value: number, numeratorDof: number, denominatorDof: number): number {
  requirePositive(numeratorDof);
  requirePositive(denominatorDof);
  return fCdfOf(value, numeratorDof, denominatorDof);
}

/** Quantile of the F distribution; `probability` in [0, 1), degrees of freedom positive. */
export function fQuantile(probability: number, numeratorDof: number, denominatorDof: number): number {
  requirePositive(numeratorDof);
  requirePositive(denominatorDof);
  return fQuantileOf(probability, numeratorDof, denominatorDof);
}

/** Probability that a chi-square variable with the degrees of freedom (positive) does not exceed `value`. */
export function chiSquareCdf(value: number, degreesOfFreedom: number): number {
  requirePositive(degreesOfFreedom);
  return chiSquareCdfOf(value, degreesOfFreedom);
}
