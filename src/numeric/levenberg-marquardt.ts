import type {
  LeastSquaresOptions,
  LeastSquaresProblem,
  LeastSquaresSolution,
  StopReason,
} from './least-squares-problem.ts';
import { type DampedStep, dampedStep, localModel } from './trust-region-step.ts';
import { unscaledCovariance } from './unscaled-covariance.ts';

// A step must deliver this share of what the linear model promised, or it is taken back (Moré 1978).
const SMALLEST_GAIN = 1e-4;
// Stopping on a short step far from a right angle means the solver was stuck, not that it arrived.
const STUCK_COSINE = 1e-3;
// Residuals this small, against those at the start or against what the parameters put into the model, are
// rounding: their angle with the Jacobian says nothing.
const ROUNDING_FRACTION = 1e-12;
// Final steps go on as long as each is shorter than this share of the one before.
const POLISH_RATE = 0.9;
// Relative rounding of a sum of squares, with room.
const SUM_ROUNDING = 1e-12;

/**
 * Minimises a sum of squares by the Levenberg-Marquardt method with a trust region and parameters scaled by
 * the largest Jacobian column norm met, so that the path does not depend on the units of parameters or
 * residuals. Never throws for a hard problem: the solution says why it stopped and whether it may be used.
 *
 * @param start start values, length parameterCount, finite
 * @throws Error where the problem is malformed (lengths disagree, fewer residuals than parameters)
 * Source: J. J. Moré, Springer LNM 630 (1978) 105 (from memory).
 */
export function solveLeastSquares(
  problem: LeastSquaresProblem,
  start: ArrayLike<number>,
  options: LeastSquaresOptions = {},
): LeastSquaresSolution {
  const { parameterCount: columns, residualCount: rows } = problem;
  if (start.length !== columns) throw new Error(`${start.length} start values for ${columns} parameters`);
  if (columns < 1 || rows < columns) throw new Error(`${rows} residuals for ${columns} parameters`);
  const {
    gradientTolerance = 1e-12,
    stepTolerance = 1e-13,
    reductionTolerance = 1e-14,
    maxEvaluations = 200 * (columns + 1),
    initialRadius = 1,
    polish: toTheLastDigit = true,
  } = options;

  let parameters = Float64Array.from(start);
  let residuals = new Float64Array(rows);
  let trial = new Float64Array(columns);
  let trialResiduals = new Float64Array(rows);
  const jacobian = new Float64Array(rows * columns);
  const scale = new Float64Array(columns);
  let evaluations = 1;
  let iterations = 0;

  problem.residuals(parameters, residuals);
  let sum = sumOfSquares(residuals);
  const startSum = sum;
  if (!parameters.every(Number.isFinite) || !Number.isFinite(sum)) return finish('not-finite', 1);

  let radius = 0;
  for (;;) {
    problem.jacobian(parameters, jacobian);
    if (!jacobian.every(Number.isFinite)) return finish('not-finite', 1);
    const cosine = updateScale(jacobian, residuals, sum, scale);
    if (cosine <= gradientTolerance) return finish('gradient', cosine);
    const model = localModel(jacobian, rows, columns, scale, residuals);
    if (iterations === 0) radius = initialRadius * (scaledLength(parameters, scale) || Math.sqrt(sum));

    // Shrink the region until a step pays.
    for (let accepted = false; !accepted; ) {
      if (evaluations >= maxEvaluations) return finish('max-evaluations', cosine);
      const step = dampedStep(model, radius);
      for (let j = 0; j < columns; j++) trial[j] = parameters[j]! + step.scaledStep[j]! / scale[j]!;
      problem.residuals(trial, trialResiduals);
      evaluations++;
      const trialSum = sumOfSquares(trialResiduals);
      const reduction = Number.isFinite(trialSum) ? sum - trialSum : Number.NEGATIVE_INFINITY;
      const gain = step.predictedReduction > 0 ? reduction / step.predictedReduction : 0;
      radius = nextRadius(radius, step, gain, iterations === 0);

      const before = sum;
      accepted = gain >= SMALLEST_GAIN;
      if (accepted) {
        [parameters, trial] = [trial, parameters];
        [residuals, trialResiduals] = [trialResiduals, residuals];
        sum = trialSum;
        iterations++;
      }
      const flat = Math.max(Math.abs(reduction), step.predictedReduction) <= reductionTolerance * before;
      // A promise below the rounding of the sum can be neither kept nor broken.
      const unverifiable = !accepted && step.predictedReduction <= SUM_ROUNDING * before;
      if ((flat && gain <= 2) || unverifiable) {
        if (toTheLastDigit) polish();
        return finish('reduction', cosine);
      }
      const shortest = stepTolerance * scaledLength(parameters, scale);
      if (radius <= shortest || (accepted && step.length <= shortest)) return finish('step', cosine);
      if (!accepted && trial.every((value, j) => value === parameters[j])) return finish('step', cosine);
    }
  }

  /** Full Gauss-Newton steps while they keep shrinking: below rounding of the sum, only they gain digits. */
  function polish(): void {
    for (let last = Number.POSITIVE_INFINITY; evaluations < maxEvaluations; ) {
      problem.jacobian(parameters, jacobian);
      const model = localModel(jacobian, rows, columns, scale, residuals);
      const step = dampedStep(model, Number.POSITIVE_INFINITY);
      if (model.rank < columns || !(step.length < POLISH_RATE * last)) return;
      for (let j = 0; j < columns; j++) trial[j] = parameters[j]! + step.scaledStep[j]! / scale[j]!;
      problem.residuals(trial, trialResiduals);
      evaluations++;
      const trialSum = sumOfSquares(trialResiduals);
      if (!(trialSum <= sum * (1 + SUM_ROUNDING))) return;
      [parameters, trial] = [trial, parameters];
      [residuals, trialResiduals] = [trialResiduals, residuals];
      sum = trialSum;
      iterations++;
      last = step.length;
    }
  }

  function finish(stopReason: StopReason, cosine: number): LeastSquaresSolution {
    const failed = stopReason === 'not-finite';
    const arrived = stopReason === 'gradient' || stopReason === 'reduction' || stopReason === 'step';
    const exact =
      Math.sqrt(sum) <= ROUNDING_FRACTION * (Math.sqrt(startSum) + scaledLength(parameters, scale));
    const stuck = stopReason === 'step' && cosine > STUCK_COSINE && !exact;
    if (!failed) problem.jacobian(parameters, jacobian);
    const covariance = failed ? null : unscaledCovariance(jacobian, rows, columns, scale);
    return {
      parameters,
      residualSumOfSquares: Number.isFinite(sum) ? sum : null,
      degreesOfFreedom: rows - columns,
      unscaledCovariance: covariance,
      iterations,
      evaluations,
      stopReason: arrived && covariance === null ? 'singular' : stopReason,
      converged: arrived && !stuck && covariance !== null,
    };
  }
}

function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
}

function scaledLength(parameters: Float64Array, scale: Float64Array): number {
  let sum = 0;
  for (let j = 0; j < scale.length; j++) sum += (parameters[j]! * scale[j]!) ** 2;
  return Math.sqrt(sum);
}

/** Raises each parameter's scale to its column norm; returns the largest cosine of a column with the residuals. */
function updateScale(
  jacobian: Float64Array,
  residuals: Float64Array,
  sum: number,
  scale: Float64Array,
): number {
  const columns = scale.length;
  let largest = 0;
  for (let j = 0; j < columns; j++) {
    let square = 0;
    let along = 0;
    for (let i = 0; i < residuals.length; i++) {
      const slope = jacobian[i * columns + j]!;
      square += slope * slope;
      along += slope * residuals[i]!;
    }
    // A column that is zero from the start moves nothing; any scale serves it.
    scale[j] = Math.max(scale[j]!, Math.sqrt(square)) || 1;
    if (square > 0 && sum > 0) largest = Math.max(largest, Math.abs(along) / Math.sqrt(square * sum));
  }
  return largest;
}

/** Trust-region bookkeeping: halve after a poor step, double past a good one. */
function nextRadius(radius: number, step: DampedStep, gain: number, first: boolean): number {
  const bounded = first ? Math.min(radius, step.length) : radius;
  if (gain < 0.25)
    return Math.max(
      0.1 * Math.min(bounded, step.length),
      gain > 0 ? 0.5 * Math.min(bounded, step.length) : 0,
    );
  return gain > 0.75 ? Math.max(bounded, 2 * step.length) : bounded;
}
