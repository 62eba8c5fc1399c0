import { fitProblem } from './fit-problem.ts';
import { type SolvedFit, solveFrom } from './fit-solve.ts';
import type { Observations } from './observations.ts';

/** A fit with Huber's weights. */
export interface RobustFit extends SolvedFit {
  /** Weight of each row in (0, 1]; 1 where the row counts in full. */
  readonly rowWeights: Float64Array;
  /** Factor on the unscaled covariance of the unweighted rows (Huber's correction), by the scatter. */
  readonly varianceFactor: number | null;
}

// 95 % efficiency where errors are normal (Huber 1981, from memory).
const TUNING = 1.345;
const NORMAL_MEDIAN = 0.6745;
const PASSES = 60;
// The scale jumps from one median residual to the next; it is held after these passes so that the fit settles.
const SCALE_PASSES = 8;
const SETTLED = 1e-9;

/**
 * Repeats a fit with residuals beyond 1.345 scales played down (Huber's psi), until the parameters settle.
 * The scale is the median absolute residual, and not less than 1 where the rows' own uncertainties hold.
 *
 * @param fit a converged fit with equal trust in all rows
 * Source: Huber, Robust Statistics (1981), chapter 7 (from memory).
 */
export function robustFit(fit: SolvedFit, observations: Observations): RobustFit {
  const rows = observations.value.length;
  const parameterCount = fit.layout.names.length;
  const problem = fitProblem(fit.layout, observations);
  const residuals = new Float64Array(rows);
  const rowWeights = new Float64Array(rows).fill(1);
  let scale = 1;
  let current = fit;
  for (let pass = 0; pass < PASSES; pass++) {
    problem.residuals(current.solution.parameters, residuals);
    if (pass < SCALE_PASSES)
      scale = residualScale(residuals, parameterCount, observations.origin !== 'equal');
    residuals.forEach((residual, i) => {
      rowWeights[i] = Math.min(1, (TUNING * scale) / Math.abs(residual));
    });
    const before = current.solution.parameters;
    current = solveFrom(fit.layout, observations, before, rowWeights.map(Math.sqrt));
    const settled = current.solution.parameters.every(
      (value, j) => Math.abs(value - before[j]!) <= SETTLED * Math.abs(value),
    );
    if (settled && pass >= SCALE_PASSES) break;
  }
  problem.residuals(current.solution.parameters, residuals);
  return { ...current, rowWeights, varianceFactor: huberFactor(residuals, scale, parameterCount) };
}

function residualScale(residuals: Float64Array, parameterCount: number, atLeastOne: boolean): number {
  const sizes = residuals.map(Math.abs).sort();
  const middle = sizes.length >> 1;
  const median = sizes.length % 2 === 1 ? sizes[middle]! : (sizes[middle - 1]! + sizes[middle]!) / 2;
  const dof = sizes.length - parameterCount;
  const scale = dof > 0 ? (median / NORMAL_MEDIAN) * Math.sqrt(sizes.length / dof) : 0;
  if (atLeastOne) return Math.max(1, scale);
  return scale > 0 ? scale : Number.MIN_VALUE;
}

/** Huber's variance: K^2 s^2 [sum psi^2 / (n - p)] / [mean psi']^2, K = 1 + p var(psi') / (n mean(psi')^2). */
function huberFactor(residuals: Float64Array, scale: number, parameterCount: number): number | null {
  const rows = residuals.length;
  const dof = rows - parameterCount;
  if (dof <= 0) return null;
  let square = 0;
  let full = 0;
  for (const residual of residuals) {
    const psi = Math.min(TUNING * scale, Math.abs(residual));
    square += psi * psi;
    if (Math.abs(residual) <= TUNING * scale) full++;
  }
  const share = full / rows;
  if (share === 0) return null;
  const correction = 1 + (parameterCount / rows) * ((1 - share) / share);
  return (correction * correction * square) / dof / (share * share);
}
