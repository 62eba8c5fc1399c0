import { type ProfileInterval, profileInterval } from '../numeric/profile-interval.ts';
import { fitProblem } from './fit-problem.ts';
import type { Observations } from './observations.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import type { WeighedFit } from './weighed-fit.ts';

/** No interval of any parameter. */
export const NO_INTERVALS: ResonanceFit['intervals'] = { staticGain: null, naturalHz: null, damping: null };

/**
 * Profile-likelihood intervals of static gain, natural frequency and damping, scaled as the covariance is.
 *
 * @param k coverage factor
 * @param commonU uncertainty of the static gain that all dwells share; it widens that interval only
 */
export function fitIntervals(
  { fit, covariance, rowWeights }: WeighedFit,
  observations: Observations,
  k: number,
  commonU: number,
): ResonanceFit['intervals'] {
  const { layout, solution } = fit;
  const unscaled = solution.unscaledCovariance;
  if (covariance === null || unscaled === null) return NO_INTERVALS;
  const problem = fitProblem(layout, observations, rowWeights?.map(Math.sqrt) ?? null);
  const at = (j: number, floor?: number): ProfileInterval => {
    const diagonal = j * layout.names.length + j;
    const rise = (k * k * covariance[diagonal]!) / unscaled[diagonal]!;
    return profileInterval(problem, solution, j, rise, floor);
  };
  return {
    staticGain:
      layout.gain < 0 ? null : widened(at(layout.gain), solution.parameters[layout.gain]!, k * commonU),
    naturalHz: at(layout.naturalHz),
    // a negative damping means nothing, though the amplitude curve would be the same
    damping: at(layout.damping, 0),
  };
}

function widened(interval: ProfileInterval, centre: number, by: number): ProfileInterval {
  return {
    lower: interval.lower === null ? null : centre - Math.hypot(centre - interval.lower, by),
    upper: interval.upper === null ? null : centre + Math.hypot(interval.upper - centre, by),
  };
}
