import { condensed } from '../numeric/condensed-problem.ts';
import { solveLeastSquares } from '../numeric/levenberg-marquardt.ts';
import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import {
  type DecayingModel,
  fillDecayingRow,
  fillSlopes,
  linearCount,
  nonlinearCount,
  projectedProblem,
} from './decaying-model.ts';
import type { FittedDesign } from './ordinates.ts';
import type { Samples } from './samples.ts';

/** A fitted decaying model, before anything is said about its noise. */
export interface DecayingFit {
  readonly model: DecayingModel;
  /** Decay rate in 1/s, damped angular frequency in rad/s, and the steady frequency in Hz where it was free. */
  readonly parameters: Float64Array;
  /** In the order of the design: decaying cosine and sine, steady cosine and sine, baseline. */
  readonly coefficients: Float64Array;
  readonly residuals: Float64Array;
  readonly residualSumOfSquares: number;
  readonly degreesOfFreedom: number;
  /** Linear columns, then one for each non-linear parameter: (J'J)^-1 in the same order. */
  readonly fitted: FittedDesign;
  readonly iterations: number;
  readonly converged: boolean;
}

/** Solver settings good to about ten digits, which no record of motion comes near. */
const SOLVER = {
  maxEvaluations: 60,
  stepTolerance: 1e-11,
  reductionTolerance: 1e-13,
  gradientTolerance: 1e-10,
};

/**
 * Refines a decaying model from start values by variable projection, and gives the full covariance of all its
 * parameters.
 *
 * @param start decay rate 1/s, angular frequency rad/s, steady Hz where free
 * @returns null where the samples do not determine the model
 */
export function fitDecaying(
  model: DecayingModel,
  samples: Samples,
  start: ArrayLike<number>,
): DecayingFit | null {
  const n = samples.timesS.length;
  const linear = linearCount(model);
  const columns = linear + nonlinearCount(model);
  if (n <= columns) return null;
  const solution = solveLeastSquares(condensed(projectedProblem(model, samples)), start, SOLVER);
  const { parameters } = solution;
  if (!parameters.every(Number.isFinite) || solution.stopReason === 'not-finite') return null;

  const design = new Float64Array(n * linear);
  for (let i = 0; i < n; i++) fillDecayingRow(model, parameters, samples.timesS[i]!, design, i * linear);
  const solved = linearLeastSquares(design, n, linear, samples.values);
  if (solved === null) return null;

  const jacobian = new Float64Array(n * columns);
  for (let i = 0; i < n; i++) {
    const [at, to] = [i * linear, i * columns];
    for (let k = 0; k < linear; k++) jacobian[to + k] = design[at + k]!;
    fillSlopes(model, solved.coefficients, samples.timesS[i]!, design, at, jacobian, to + linear);
  }
  const full = linearLeastSquares(jacobian, n, columns, solved.residuals);
  if (full === null) return null;
  return {
    model,
    parameters,
    coefficients: solved.coefficients,
    residuals: solved.residuals,
    residualSumOfSquares: solved.residualSumOfSquares,
    degreesOfFreedom: n - columns,
    fitted: { design: jacobian, columns, unscaledCovariance: full.unscaledCovariance },
    iterations: solution.iterations,
    converged: solution.converged,
  };
}
