/**
 * A non-linear least-squares problem: find the parameters that make the sum of squared residuals least.
 * Weights belong inside the residuals (divide by the standard uncertainty). The functions fill `out` and
 * keep no reference to either array; a residual they cannot compute they set to NaN.
 */
export interface LeastSquaresProblem {
  /** Number of free parameters, at least 1. */
  readonly parameterCount: number;
  /** Number of residuals, at least `parameterCount`. */
  readonly residualCount: number;
  /** Fills `out` (length residualCount) with the residuals at the parameters `p`. */
  residuals(p: Float64Array, out: Float64Array): void;
  /**
   * Fills `out` (row-major, residualCount x parameterCount) with d residual / d parameter at `p`.
   * Called only at parameters for which `residuals` gave finite numbers.
   */
  jacobian(p: Float64Array, out: Float64Array): void;
}

/** Settings of the solver; the defaults ask for the full accuracy that doubles give. */
export interface LeastSquaresOptions {
  /** Stop when no Jacobian column makes an angle with the residuals whose cosine exceeds this. Default 1e-12. */
  readonly gradientTolerance?: number;
  /** Stop when a step changes the scaled parameters by less than this fraction. Default 1e-13. */
  readonly stepTolerance?: number;
  /** Stop when a step changes the sum of squares by less than this fraction, as foretold. Default 1e-14. */
  readonly reductionTolerance?: number;
  /** Evaluations of the residuals allowed. Default 200 (parameterCount + 1). */
  readonly maxEvaluations?: number;
  /** Radius of the first trust region as a multiple of the scaled start values. Default 1. */
  readonly initialRadius?: number;
  /** Spend a few more steps to reach the last digits after a stop by `reduction`. Default true. */
  readonly polish?: boolean;
}

/**
 * Why the solver stopped. `gradient`, `step` and `reduction` are the three ways to arrive;
 * `max-evaluations` ran out of allowance; `not-finite` met a number that is none, at the start or everywhere
 * around; `singular` ended where the data do not determine all parameters.
 */
export type StopReason = 'gradient' | 'step' | 'reduction' | 'max-evaluations' | 'not-finite' | 'singular';

/** What the solver found. Finished is not the same as good: read `converged` before anything else. */
export interface LeastSquaresSolution {
  /** The parameters with the least sum of squares met, length parameterCount. */
  readonly parameters: Float64Array;
  /** Sum of squared residuals there; null if it could not be computed even at the start. */
  readonly residualSumOfSquares: number | null;
  /** residualCount - parameterCount. */
  readonly degreesOfFreedom: number;
  /**
   * (J'J)^-1 at the solution, row-major parameterCount x parameterCount. It is the covariance when residuals
   * are already divided by their standard uncertainty; else multiply by residualSumOfSquares / degreesOfFreedom.
   * Null where the Jacobian is rank-deficient.
   */
  readonly unscaledCovariance: Float64Array | null;
  /** Steps taken (accepted). */
  readonly iterations: number;
  /** Evaluations of the residuals. */
  readonly evaluations: number;
  readonly stopReason: StopReason;
  /** True when the parameters are a minimum and all of them are determined by the data. */
  readonly converged: boolean;
}
