import type { FrameGap, FrameRegularity } from './clip-info.ts';

/** An interval this many times the median is a hole: at least one frame is missing. */
const HOLE_RATIO = 1.5;
/** Intervals may differ from the median by this fraction (and a tick) before they count as uneven. */
const EVEN_WITHIN = 0.05;
/** A clip is called variable when more than this fraction of its intervals is uneven. */
const UNEVEN_FRACTION = 0.02;

/** What the timestamps of a clip tell. */
export interface FrameTiming {
  /** Median time from frame to frame, s; null for a single frame or where all timestamps are alike. */
  readonly medianIntervalS: number | null;
  readonly gaps: readonly FrameGap[];
  /** Indices of frames with the timestamp of the frame before. */
  readonly duplicates: readonly number[];
  readonly regularity: FrameRegularity;
}

/**
 * Judges a sequence of timestamps: `ticks` ascending whole ticks, `timeBase` one tick in s as [numerator,
 * denominator]. Holes are told from the median interval; evenness by a least-squares line through time against
 * frame count, holes counted.
 */
export function frameTiming(ticks: Float64Array, timeBase: readonly [number, number]): FrameTiming {
  const seconds = (count: number): number => (count * timeBase[0]) / timeBase[1];
  const intervals = Float64Array.from(
    { length: Math.max(0, ticks.length - 1) },
    (_, i) => ticks[i + 1]! - ticks[i]!,
  );
  const duplicates: number[] = [];
  intervals.forEach((interval, i) => {
    if (interval === 0) duplicates.push(i + 1);
  });
  const distinct = intervals.filter((interval) => interval > 0).sort();
  const shortest = intervals.length > 0 ? seconds(duplicates.length > 0 ? 0 : distinct[0]!) : null;
  const longest = intervals.length > 0 ? seconds(distinct.at(-1) ?? 0) : null;
  if (distinct.length === 0) {
    const regularity = { jitterRmsS: null, latticeFps: null, variable: false };
    return {
      ...{ medianIntervalS: null, gaps: [], duplicates },
      regularity: { shortestIntervalS: shortest, longestIntervalS: longest, ...regularity },
    };
  }

  const middle = median(distinct);
  const isHole = (interval: number): boolean => interval > HOLE_RATIO * middle;
  const gaps: FrameGap[] = [];
  intervals.forEach((interval, afterFrame) => {
    if (!isHole(interval)) return;
    gaps.push({ afterFrame, intervalS: seconds(interval), missingFrames: Math.round(interval / middle) - 1 });
  });
  const isUneven = (interval: number): boolean =>
    !isHole(interval) && Math.abs(interval - middle) > EVEN_WITHIN * middle + 1;
  const lattice = fitLattice(ticks, middle);
  return {
    medianIntervalS: seconds(middle),
    gaps,
    duplicates,
    regularity: {
      shortestIntervalS: shortest,
      longestIntervalS: longest,
      jitterRmsS: ticks.length < 3 ? null : seconds(lattice.rms),
      latticeFps: timeBase[1] / (lattice.interval * timeBase[0]),
      variable: distinct.filter(isUneven).length > UNEVEN_FRACTION * distinct.length,
    },
  };
}

/** Least-squares line of time against frame count, in which a hole counts as the frames that fit into it. */
function fitLattice(ticks: Float64Array, middle: number): { interval: number; rms: number } {
  const n = ticks.length;
  const counts = new Float64Array(n);
  for (let i = 1; i < n; i++) counts[i] = counts[i - 1]! + Math.round((ticks[i]! - ticks[i - 1]!) / middle);
  const meanCount = counts.reduce((a, b) => a + b, 0) / n;
  const sinceFirst = ticks.map((tick) => tick - ticks[0]!);
  const meanTicks = sinceFirst.reduce((a, b) => a + b, 0) / n;
  let xx = 0;
  let xy = 0;
  for (let i = 0; i < n; i++) {
    xx += (counts[i]! - meanCount) ** 2;
    xy += (counts[i]! - meanCount) * (sinceFirst[i]! - meanTicks);
  }
  const interval = xy / xx;
  let squares = 0;
  for (let i = 0; i < n; i++) {
    squares += (sinceFirst[i]! - meanTicks - interval * (counts[i]! - meanCount)) ** 2;
  }
  return { interval, rms: Math.sqrt(squares / n) };
}

function median(sorted: Float64Array): number {
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
