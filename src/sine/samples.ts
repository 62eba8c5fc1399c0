/**
 * The frames of a record that have a value: both arrays of one length, times in seconds strictly increasing,
 * values finite, in any unit (results come out in the same).
 */
export interface Samples {
  readonly timesS: Float64Array;
  readonly values: Float64Array;
}

/**
 * Picks the frames that have a finite value, gaps left out.
 *
 * @param window first and last time in seconds, both included; the whole record where not given
 * @throws Error where the arrays differ in length
 */
export function presentSamples(
  timesS: Float64Array,
  values: Float64Array,
  window?: readonly [number, number],
): Samples {
  if (timesS.length !== values.length) throw new Error(`${timesS.length} times for ${values.length} values`);
  const [fromS, toS] = window ?? [Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY];
  if (window === undefined && values.every(Number.isFinite)) return { timesS, values };
  const keep: number[] = [];
  for (let i = 0; i < timesS.length; i++) {
    const time = timesS[i]!;
    if (time >= fromS && time <= toS && Number.isFinite(values[i]!)) keep.push(i);
  }
  return {
    timesS: Float64Array.from(keep, (i) => timesS[i]!),
    values: Float64Array.from(keep, (i) => values[i]!),
  };
}

/** Time from the first sample to the last, in seconds; 0 for fewer than two. */
export function spanS({ timesS }: Samples): number {
  return timesS.length < 2 ? 0 : timesS[timesS.length - 1]! - timesS[0]!;
}

/**
 * Median time between neighbouring samples in seconds: the frame interval, whatever the gaps. 0 for fewer than
 * two samples.
 */
export function medianIntervalS({ timesS }: Samples): number {
  if (timesS.length < 2) return 0;
  const intervals = new Float64Array(timesS.length - 1);
  for (let i = 0; i < intervals.length; i++) intervals[i] = timesS[i + 1]! - timesS[i]!;
  intervals.sort();
  return intervals[intervals.length >> 1]!;
}

/** Time the samples stand for: their span and one mean frame interval more, in seconds. */
export function durationS(samples: Samples): number {
  const count = samples.timesS.length;
  return count < 2 ? 0 : (spanS(samples) * count) / (count - 1);
}
