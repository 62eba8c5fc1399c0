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
 * Judges a sequence of timestamps: `timesS` ascending, s; `tickS` one tick of their clock, s. Holes are told from
 * the median interval; evenness by a least-squares line through time against frame count, holes counted.
 */
export function frameTiming(timesS: Float64Array, tickS: number): FrameTiming {
  const intervals = Float64Array.from(
    { length: Math.max(0, timesS.length - 1) },
    (_, i) => timesS[i + 1]! - timesS[i]!,
  );
  const duplicates: number[] = [];
  intervals.forEach((interval, i) => {
    if (interval < tickS / 2) duplicates.push(i + 1);
  });
  const distinct = intervals.filter((interval) => interval >= tickS / 2).sort();
  const medianS = distinct.length > 0 ? median(distinct) : null;
  const gaps: FrameGap[] = [];
  intervals.forEach((intervalS, afterFrame) => {
    if (medianS === null || intervalS <= HOLE_RATIO * medianS) return;
    gaps.push({ afterFrame, intervalS, missingFrames: Math.round(intervalS / medianS) - 1 });
  });
  const lattice = medianS === null ? null : fitLattice(timesS, medianS);
  const uneven = (interval: number): boolean =>
    medianS !== null &&
    interval <= HOLE_RATIO * medianS &&
    Math.abs(interval - medianS) > EVEN_WITHIN * medianS + tickS;
  return {
    medianIntervalS: medianS,
    gaps,
    duplicates,
    regularity: {
      shortestIntervalS: intervals.length > 0 ? intervals.reduce((a, b) => Math.min(a, b)) : null,
      longestIntervalS: intervals.length > 0 ? intervals.reduce((a, b) => Math.max(a, b)) : null,
      jitterRmsS: timesS.length < 3 ? null : (lattice?.rmsS ?? null),
      latticeFps: lattice === null ? null : 1 / lattice.intervalS,
      variable: distinct.filter(uneven).length > UNEVEN_FRACTION * distinct.length,
    },
  };
}

/** Least-squares line of time against frame count, in which a hole counts as the frames that fit into it. */
function fitLattice(timesS: Float64Array, medianS: number): { intervalS: number; rmsS: number } {
  const counts = new Float64Array(timesS.length);
  for (let i = 1; i < timesS.length; i++) {
    counts[i] = counts[i - 1]! + Math.round((timesS[i]! - timesS[i - 1]!) / medianS);
  }
  const n = timesS.length;
  const meanCount = counts.reduce((a, b) => a + b, 0) / n;
  const meanS = timesS.reduce((a, b) => a + b, 0) / n;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let i = 0; i < n; i++) {
    const x = counts[i]! - meanCount;
    const y = timesS[i]! - meanS;
    xx += x * x;
    xy += x * y;
    yy += y * y;
  }
  const intervalS = xx > 0 ? xy / xx : medianS;
  return { intervalS, rmsS: Math.sqrt(Math.max(0, yy - intervalS * xy) / n) };
}

function median(sorted: Float64Array): number {
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
