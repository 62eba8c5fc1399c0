import { chiSquareCdf, fCdf } from '../numeric/quantiles.ts';
import type { Observations } from './observations.ts';
import { plainNumber } from './plain-number.ts';

/** Whether the curve misses the dwells by more than chance. */
export interface LackOfFit {
  /** `replicates`: judged by repeats at the same drive frequency (F test); `chi-square`: by the own uncertainties. */
  readonly kind: 'replicates' | 'chi-square';
  /** F or chi2. */
  readonly statistic: number;
  readonly dof: number;
  /** Degrees of freedom of the pure scatter; null for chi-square. */
  readonly pureDof: number | null;
  /** Probability of a statistic at least this large if the model is right. */
  readonly pValue: number;
  readonly sentence: string;
}

const SIGNIFICANCE = 0.05;
const SAME_FREQUENCY = 1e-6;

/**
 * Lack-of-fit test. Repeats at one drive frequency show the scatter that no model could take away, and are
 * preferred; else the dwells' own uncertainties must serve. Null where there is neither, or no freedom left.
 *
 * @param residuals weighted residuals, one per row
 * Source: Draper and Smith, Applied Regression Analysis, section 2.1 (from memory).
 */
export function testLackOfFit(
  observations: Observations,
  residuals: Float64Array,
  parameterCount: number,
): LackOfFit | null {
  const dof = residuals.length - parameterCount;
  const sum = residuals.reduce((total, residual) => total + residual * residual, 0);
  const { pureSum, pureDof } = pureScatter(observations, residuals);
  const lackDof = dof - pureDof;
  if (pureDof > 0 && lackDof > 0 && pureSum > 0) {
    const statistic = Math.max(0, sum - pureSum) / lackDof / (pureSum / pureDof);
    const pValue = 1 - fCdf(statistic, lackDof, pureDof);
    return {
      kind: 'replicates',
      statistic,
      dof: lackDof,
      pureDof,
      pValue,
      sentence: sentenceFor(pValue, 'the repeats at one frequency scatter'),
    };
  }
  if (observations.origin === 'equal' || dof <= 0) return null;
  const pValue = 1 - chiSquareCdf(sum, dof);
  return {
    kind: 'chi-square',
    statistic: sum,
    dof,
    pureDof: null,
    pValue,
    sentence: sentenceFor(pValue, 'their own uncertainties allow'),
  };
}

function sentenceFor(pValue: number, measure: string): string {
  const p = pValue < 0.001 ? 'p < 0.001' : `p = ${plainNumber(pValue, 2)}`;
  return pValue < SIGNIFICANCE
    ? `The curve misses the dwells by more than ${measure} (${p}): the model, a term of it or a dwell is wrong.`
    : `The curve misses the dwells by no more than ${measure} (${p}).`;
}

/** Scatter of repeats about their weighted mean; residuals of one group differ only by their observations. */
function pureScatter(
  { driveHz, amplitudeRow, lagRow, u }: Observations,
  residuals: Float64Array,
): { readonly pureSum: number; readonly pureDof: number } {
  let pureSum = 0;
  let pureDof = 0;
  const order = [...driveHz.keys()].sort((a, b) => driveHz[a]! - driveHz[b]!);
  for (let start = 0; start < order.length; ) {
    let end = start + 1;
    const from = driveHz[order[start]!]!;
    while (end < order.length && driveHz[order[end]!]! - from <= SAME_FREQUENCY * from) end++;
    const group = order.slice(start, end);
    for (const rows of [amplitudeRow, lagRow]) {
      const members = group.map((i) => rows[i]!).filter((row) => row >= 0);
      if (members.length < 2) continue;
      // back to plain deviations model - observed, whose differences are those of the observations
      const weights = members.map((row) => 1 / u[row]! ** 2);
      const deviations = members.map((row) => residuals[row]! * u[row]!);
      const total = weights.reduce((a, b) => a + b, 0);
      const mean = weights.reduce((a, w, k) => a + w * deviations[k]!, 0) / total;
      pureSum += weights.reduce((a, w, k) => a + w * (deviations[k]! - mean) ** 2, 0);
      pureDof += members.length - 1;
    }
    start = end;
  }
  return { pureSum, pureDof };
}
