import { chiSquareCdf } from '../numeric/quantiles.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import type { Observations } from './observations.ts';

/** How the uncertainty of a fit was scaled. */
export interface ScatterJudgement {
  /**
   * `own`: the dwells' own uncertainties hold; `widened`: they are too small for the scatter and were widened
   * alike; `scatter`: the scatter about the curve gave the uncertainty.
   */
  readonly basis: 'own' | 'widened' | 'scatter';
  /** Factor on the covariance from weights alone; null where there is nothing to judge it by. */
  readonly varianceFactor: number | null;
  /** Degrees of freedom for the coverage factor: Infinity where the own uncertainties hold. */
  readonly coverageDof: number;
  /** Sum of squared residuals over own uncertainties; null where the dwells brought none. */
  readonly chi2: number | null;
  /** Probability of a chi2 at least this large by chance; null with chi2, or with no degrees of freedom. */
  readonly pValue: number | null;
  /** What was done and why. */
  readonly sentence: string;
}

// Scatter that would come by chance less often than this is taken as real (a one-sided test).
const SIGNIFICANCE = 0.05;

/**
 * Decides whether the dwells' own uncertainties explain the scatter about the fitted curve.
 *
 * @param sum sum of squared weighted residuals
 * @param dof residuals minus parameters, 0 or more
 */
export function judgeScatter(
  observations: Observations,
  weighting: NonNullable<ResonanceFitOptions['weighting']>,
  sum: number,
  dof: number,
): ScatterJudgement {
  const reduced = dof > 0 ? sum / dof : null;
  if (observations.origin === 'equal' || weighting === 'scatter') {
    return {
      basis: 'scatter',
      varianceFactor: reduced,
      coverageDof: dof,
      chi2: observations.origin === 'equal' ? null : sum,
      pValue: null,
      sentence:
        reduced === null
          ? 'As many dwells as parameters and no uncertainties of their own: the uncertainty cannot be known; add a dwell.'
          : 'Uncertainty from the scatter of the dwells about the curve.',
    };
  }
  const pValue = dof > 0 ? 1 - chiSquareCdf(sum, dof) : null;
  if (weighting === 'auto' && reduced !== null && pValue !== null && pValue < SIGNIFICANCE) {
    const factor = Math.sqrt(reduced).toPrecision(2);
    return {
      basis: 'widened',
      varianceFactor: reduced,
      coverageDof: dof,
      chi2: sum,
      pValue,
      sentence: `The dwells scatter ${factor} times as much as their own uncertainties explain; all uncertainties are widened by that factor.`,
    };
  }
  return {
    basis: 'own',
    varianceFactor: 1,
    coverageDof: Number.POSITIVE_INFINITY,
    chi2: sum,
    pValue,
    sentence: "Uncertainty from the dwells' own uncertainties, which explain the scatter.",
  };
}
