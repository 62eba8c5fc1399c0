import { InputError } from '../errors.ts';
import type { MotionRecord } from './motion-record.ts';

/**
 * Refuses a record no clip should give.
 *
 * @throws InputError where times are not finite or do not increase (the clip's file is damaged)
 * @throws Error where the two arrays differ in length
 */
export function requireOrderedRecord({ timesS, displacementMm }: MotionRecord): void {
  if (timesS.length !== displacementMm.length) {
    throw new Error(`motion record of ${timesS.length} times and ${displacementMm.length} displacements`);
  }
  for (let i = 0; i < timesS.length; i++) {
    if (!Number.isFinite(timesS[i]!)) {
      throw new InputError(`Frame ${i + 1} has no time; make the clip again or cut the damaged part away.`);
    }
    if (i > 0 && timesS[i]! <= timesS[i - 1]!) {
      throw new InputError(
        `Time goes backwards at frame ${i + 1} (${seconds(timesS[i]!)} after ${seconds(timesS[i - 1]!)}); ` +
          'make the clip again or cut the damaged part away.',
      );
    }
  }
}

/** A time or duration for a sentence: three significant digits, with its unit. */
export function seconds(value: number): string {
  return `${Number(value.toPrecision(3))} s`;
}

/** Frames inside a window, both ends included, and how many of them have no displacement. */
export function countFrames(
  record: MotionRecord,
  window: readonly [number, number] | null,
): { readonly total: number; readonly lost: number } {
  let total = 0;
  let lost = 0;
  for (let i = 0; i < record.timesS.length; i++) {
    const time = record.timesS[i]!;
    if (window !== null && (time < window[0] || time > window[1])) continue;
    total++;
    if (!Number.isFinite(record.displacementMm[i]!)) lost++;
  }
  return { total, lost };
}

// Twelve slices of a period: a marker lost in the same slice of every swing leaves it empty.
const PHASE_SLICES = 12;

/**
 * Share of the period in which the marker was lost every time, although frames fell there: a marker that is covered,
 * or too blurred, at the same point of each swing. 0 where every slice of the period that was filmed was also seen.
 */
export function unseenPhaseShare(
  record: MotionRecord,
  window: readonly [number, number],
  frequencyHz: number,
): number {
  const filmed = new Float64Array(PHASE_SLICES);
  const seen = new Float64Array(PHASE_SLICES);
  for (let i = 0; i < record.timesS.length; i++) {
    const time = record.timesS[i]!;
    if (time < window[0] || time > window[1]) continue;
    const turns = (time - window[0]) * frequencyHz;
    const slice = Math.floor((turns - Math.floor(turns)) * PHASE_SLICES) % PHASE_SLICES;
    filmed[slice]!++;
    if (Number.isFinite(record.displacementMm[i]!)) seen[slice]!++;
  }
  const unseen = seen.filter((count, slice) => count === 0 && filmed[slice]! > 0).length;
  return unseen / filmed.filter((count) => count > 0).length || 0;
}
