import type { LeastSquaresProblem, LeastSquaresSolution } from './least-squares-problem.ts';
import { solveLeastSquares } from './levenberg-marquardt.ts';

/** Interval of one parameter; a side is null where the sum of squares never rises far enough. */
export interface ProfileInterval {
  readonly lower: number | null;
  readonly upper: number | null;
}

// Where the sum has risen to this share of what is asked, the bound is known well enough.
const RISE_ACCURACY = 1e-4;
const EXPANSIONS = 12;
const REFINEMENTS = 12;
const QUICK = {
  gradientTolerance: 1e-9,
  reductionTolerance: 1e-11,
  stepTolerance: 1e-9,
  maxEvaluations: 40,
  polish: false,
};

/**
 * Profile-likelihood interval: the values of one parameter for which the sum of squares, minimised over all
 * others, lies within `rise` of its minimum. It needs no linearity and is asymmetric where the data make it so.
 *
 * @param solution a converged solution of `problem`
 * @param index which parameter
 * @param rise positive; k^2 times the variance factor, with k the coverage factor wanted
 * @param floor least value that means anything; a side that would go lower ends there
 * @throws Error where the solution has no covariance
 * Source: Bates and Watts, Nonlinear Regression Analysis, section 6.1 (from memory).
 */
export function profileInterval(
  problem: LeastSquaresProblem,
  solution: LeastSquaresSolution,
  index: number,
  rise: number,
  floor = Number.NEGATIVE_INFINITY,
): ProfileInterval {
  if (solution.unscaledCovariance === null || solution.residualSumOfSquares === null) {
    throw new Error('a profile needs a converged solution');
  }
  return {
    lower: findBound(problem, solution, index, rise, -1, solution.parameters[index]! - floor),
    upper: findBound(problem, solution, index, rise, 1, Number.POSITIVE_INFINITY),
  };
}

/** Walks outward until the sum has risen enough, then closes in on the crossing by false position. */
function findBound(
  problem: LeastSquaresProblem,
  solution: LeastSquaresSolution,
  index: number,
  rise: number,
  side: 1 | -1,
  limit: number,
): number | null {
  const n = problem.parameterCount;
  const centre = solution.parameters[index]!;
  const covariance = solution.unscaledCovariance!;
  const lowest = solution.residualSumOfSquares!;
  const target = Math.sqrt(rise);
  const reach = target * Math.sqrt(covariance[index * n + index]!);
  let others = solution.parameters;

  // signed root of the rise, nearly straight in the parameter; null where nothing can be computed
  const excess = (distance: number): number | null => {
    const value = centre + side * distance;
    const start = others.map((other, j) => {
      const slope = covariance[j * n + index]! / covariance[index * n + index]!;
      return j === index ? value : other + slope * (value - others[index]!);
    });
    const constrained = minimiseOthers(problem, index, value, start);
    if (constrained === null) return null;
    others = constrained.parameters;
    return Math.sqrt(Math.max(0, constrained.sum - lowest)) - target;
  };

  let inside = 0;
  let insideExcess = -target;
  let outside = Math.min(reach, limit);
  let outsideExcess = excess(outside);
  for (let k = 0; outsideExcess === null || outsideExcess < 0; k++) {
    if (outside === limit && outsideExcess !== null) return centre + side * limit;
    if (k === EXPANSIONS) return null;
    if (outsideExcess === null) {
      outside = (inside + outside) / 2;
    } else {
      inside = outside;
      insideExcess = outsideExcess;
      outside = Math.min(1.5 * outside, limit);
    }
    outsideExcess = excess(outside);
  }

  let found = outside;
  let foundExcess = outsideExcess;
  for (let k = 0; Math.abs(foundExcess) > RISE_ACCURACY * target && k < REFINEMENTS; k++) {
    found = inside + ((outside - inside) * -insideExcess) / (outsideExcess - insideExcess);
    const next = excess(found);
    if (next === null) return null;
    foundExcess = next;
    if (next < 0) {
      inside = found;
      insideExcess = next;
      outsideExcess /= 2; // Illinois: keeps the far end from standing still
    } else {
      outside = found;
      outsideExcess = next;
      insideExcess /= 2;
    }
  }
  return centre + side * found;
}

/** Least sum of squares with one parameter held; null where the model has no finite value there. */
function minimiseOthers(
  problem: LeastSquaresProblem,
  index: number,
  value: number,
  start: Float64Array,
): { readonly parameters: Float64Array; readonly sum: number } | null {
  const n = problem.parameterCount;
  const held = start.slice();
  held[index] = value;
  if (n === 1) {
    const residuals = new Float64Array(problem.residualCount);
    problem.residuals(held, residuals);
    const sum = residuals.reduce((total, residual) => total + residual * residual, 0);
    return Number.isFinite(sum) ? { parameters: held, sum } : null;
  }
  const full = new Float64Array(problem.residualCount * n);
  const insert = (p: Float64Array): Float64Array => {
    for (let j = 0; j < n - 1; j++) held[j < index ? j : j + 1] = p[j]!;
    return held;
  };
  const solution = solveLeastSquares(
    {
      parameterCount: n - 1,
      residualCount: problem.residualCount,
      residuals: (p, out) => problem.residuals(insert(p), out),
      jacobian(p, out) {
        problem.jacobian(insert(p), full);
        for (let i = 0; i < problem.residualCount; i++) {
          for (let j = 0; j < n - 1; j++) out[i * (n - 1) + j] = full[i * n + (j < index ? j : j + 1)]!;
        }
      },
    },
    start.filter((_, j) => j !== index),
    QUICK,
  );
  if (solution.residualSumOfSquares === null) return null;
  return { parameters: insert(solution.parameters).slice(), sum: solution.residualSumOfSquares };
}
