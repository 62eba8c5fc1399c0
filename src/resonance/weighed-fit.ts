import { unscaledCovariance } from '../numeric/unscaled-covariance.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import { fitProblem } from './fit-problem.ts';
import { type SolvedFit, solveFrom } from './fit-solve.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';
import { robustFit } from './robust-fit.ts';
import { judgeScatter, type ScatterJudgement } from './scatter-judgement.ts';

/** A converged fit with its uncertainty settled. */
export interface WeighedFit {
  readonly fit: SolvedFit;
  readonly scatter: ScatterJudgement;
  /** Covariance of the free parameters, row-major; null where its size is not known. */
  readonly covariance: Float64Array | null;
  /** Robust weight of each row; null without the robust option. */
  readonly rowWeights: Float64Array | null;
  /** (model - observed) / u of each row, not robustly weighted. */
  readonly residuals: Float64Array;
}

/** Applies the robust option and settles how large the uncertainties are. `solved` must have converged. */
export function weighFit(
  solved: SolvedFit,
  observations: Observations,
  options: ResonanceFitOptions,
): WeighedFit {
  const positive = withPositiveDamping(solved, observations);
  const robust = options.robust === true ? robustFit(positive, observations) : null;
  const fit = robust ?? positive;
  const { layout, solution } = fit;
  const residuals = new Float64Array(observations.value.length);
  fitProblem(layout, observations).residuals(solution.parameters, residuals);
  let scatter = judgeScatter(
    observations,
    options.weighting ?? 'auto',
    solution.residualSumOfSquares!,
    solution.degreesOfFreedom,
  );
  if (robust !== null && robust.varianceFactor !== null) {
    // down-weighted rows carry less than their share: Huber's factor takes the place of the plain one
    const atLeast = scatter.basis === 'scatter' ? 0 : 1;
    scatter = { ...scatter, varianceFactor: Math.max(atLeast, robust.varianceFactor) };
  }
  const unscaled = robust === null ? solution.unscaledCovariance : unweighted(fit, observations);
  const factor = scatter.varianceFactor;
  return {
    fit,
    scatter,
    covariance: unscaled === null || factor === null ? null : unscaled.map((value) => value * factor),
    rowWeights: robust?.rowWeights ?? null,
    residuals,
  };
}

/** (J'J)^-1 with all rows counted in full, which is what Huber's factor belongs to. */
function unweighted({ layout, solution }: SolvedFit, observations: Observations): Float64Array | null {
  const columns = layout.names.length;
  const rows = observations.value.length;
  const jacobian = new Float64Array(rows * columns);
  fitProblem(layout, observations).jacobian(solution.parameters, jacobian);
  return unscaledCovariance(jacobian, rows, columns, new Float64Array(columns));
}

/** Amplitudes are the same for the mirrored response, so a negative damping found from them is turned round. */
function withPositiveDamping(fit: SolvedFit, observations: Observations): SolvedFit {
  const { layout, solution } = fit;
  const lagged = observations.lagRow.some((row) => row >= 0);
  if (lagged || solution.parameters[layout.damping]! >= 0) return fit;
  return solveFrom(layout, observations, mirrored(layout, solution.parameters));
}

function mirrored(layout: ParameterLayout, parameters: Float64Array): Float64Array {
  const turned = parameters.slice();
  for (const at of [layout.damping, layout.offset + 1, layout.slow + 1]) {
    if (at > 0) turned[at] = -turned[at]!;
  }
  return turned;
}
