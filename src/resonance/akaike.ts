/**
 * Akaike's information criterion with the small-sample correction. Only differences between models fitted to the
 * same rows with the same treatment of uncertainty mean anything; the smaller is the better.
 *
 * @param sum sum of squared weighted residuals
 * @param rows number of residuals; `parameters` the number of free parameters
 * @param uncertainty `known`: residuals are divided by true uncertainties, chi2 + 2k; `scatter`: only their ratios
 *   are known, n ln(sum/n) + 2(k + 1), the variance being one more parameter
 * @returns null where there are too few rows for the correction, or where the sum is zero and the size unknown
 * Source: Burnham and Anderson, Model Selection and Multimodel Inference (2002), section 7.4 (from memory).
 */
export function akaikeCorrected(
  sum: number,
  rows: number,
  parameters: number,
  uncertainty: 'known' | 'scatter',
): number | null {
  const k = uncertainty === 'known' ? parameters : parameters + 1;
  if (rows - k - 1 <= 0) return null;
  if (uncertainty === 'scatter' && sum <= 0) return null;
  const misfit = uncertainty === 'known' ? sum : rows * Math.log(sum / rows);
  return misfit + 2 * k + (2 * k * (k + 1)) / (rows - k - 1);
}
