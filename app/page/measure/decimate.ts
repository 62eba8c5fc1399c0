/**
 * Lowest and highest value of each column of a plot, so that a long record is drawn with as many lines as there are
 * columns and no peak is missed. A column without a value, and one that only gaps fall into, is NaN.
 * @param timeS increasing
 * @param values of the same length; NaN is a gap
 */
export function columnExtremes(
  timeS: Float64Array,
  values: Float64Array,
  fromS: number,
  toS: number,
  columns: number,
): { low: Float64Array; high: Float64Array } {
  const low = new Float64Array(columns).fill(Number.NaN);
  const high = new Float64Array(columns).fill(Number.NaN);
  const perS = columns / (toS - fromS);
  for (let k = firstAtOrAfter(timeS, fromS); k < timeS.length; k++) {
    const column = Math.floor((timeS[k]! - fromS) * perS);
    if (column >= columns) break;
    const value = values[k]!;
    if (Number.isNaN(value)) continue;
    if (!(low[column]! <= value)) low[column] = value;
    if (!(high[column]! >= value)) high[column] = value;
  }
  return { low, high };
}

/** Index of the first time at or after a time; the length where there is none. */
export function firstAtOrAfter(timeS: Float64Array, at: number): number {
  let [low, high] = [0, timeS.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (timeS[middle]! < at) low = middle + 1;
    else high = middle;
  }
  return low;
}
