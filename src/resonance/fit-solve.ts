import type { LeastSquaresSolution } from '../numeric/least-squares-problem.ts';
import { solveLeastSquares } from '../numeric/levenberg-marquardt.ts';
import { fitProblem } from './fit-problem.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';
import { evaluateStart, type GridStart, startsFromGrid } from './start-grid.ts';
import { startFromAmplitudes, startFromLags } from './start-quadratic.ts';

// From start values this good a fit that has a minimum needs some ten steps.
const MAX_EVALUATIONS = 200;

/** A solved fit with the layout it was solved in (its fixed gain may have turned to -1). */
export interface SolvedFit {
  readonly layout: ParameterLayout;
  readonly solution: LeastSquaresSolution;
}

/** Start values for this layout, best first; empty where no start has a finite cost. */
export function findStarts(layout: ParameterLayout, observations: Observations): GridStart[] {
  const linear = [startFromAmplitudes(layout.model, observations), startFromLags(layout.model, observations)]
    .map((start) => (start === null ? null : evaluateStart(layout.model, observations, start)))
    .filter((start) => start !== null);
  const good = linear.some((start) => describes(start.cost, observations));
  const starts = good ? linear : [...linear, ...startsFromGrid(layout.model, observations)];
  return starts.sort((a, b) => a.cost - b.cost);
}

/**
 * Fits from the start values found, best first, until a converged fit describes the data within their
 * uncertainties; else the converged fit with the least sum of squares (the best of the others where none
 * converged). Null where there are fewer rows than parameters or no start at all.
 */
export function solveFit(layout: ParameterLayout, observations: Observations): SolvedFit | null {
  if (observations.value.length < layout.names.length) return null;
  let best: SolvedFit | null = null;
  for (const start of findStarts(layout, observations)) {
    const placed = layout.gain < 0 ? { ...layout, fixedGain: start.gain } : layout;
    const solved = solveFrom(placed, observations, startParameters(placed, start));
    if (best === null || better(solved.solution, best.solution)) best = solved;
    const { converged, residualSumOfSquares } = best.solution;
    if (converged && describes(residualSumOfSquares ?? Number.POSITIVE_INFINITY, observations)) break;
  }
  return best;
}

/**
 * No other start can do materially better than a cost of a few per row: within the rows' own uncertainties, or
 * within the hundredth of the largest amplitude that stands in for them.
 */
function describes(cost: number, observations: Observations): boolean {
  return cost < 3 * observations.value.length;
}

/** Fits from given start values, such as those of a fit to nearly the same data. */
export function solveFrom(
  layout: ParameterLayout,
  observations: Observations,
  start: Float64Array,
  rowScale: Float64Array | null = null,
): SolvedFit {
  const problem = fitProblem(layout, observations, rowScale);
  return { layout, solution: solveLeastSquares(problem, start, { maxEvaluations: MAX_EVALUATIONS }) };
}

function startParameters(layout: ParameterLayout, start: GridStart): Float64Array {
  const parameters = new Float64Array(layout.names.length);
  if (layout.gain >= 0) parameters[layout.gain] = start.gain;
  parameters[layout.naturalHz] = start.naturalHz;
  parameters[layout.damping] = start.damping;
  return parameters;
}

function better(a: LeastSquaresSolution, b: LeastSquaresSolution): boolean {
  if (a.converged !== b.converged) return a.converged;
  const sumA = a.residualSumOfSquares ?? Number.POSITIVE_INFINITY;
  return sumA < (b.residualSumOfSquares ?? Number.POSITIVE_INFINITY);
}
