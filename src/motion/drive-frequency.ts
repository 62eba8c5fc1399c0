import { fitSine } from '../sine/four-parameter.ts';
import { presentSamples, type Samples, spanS } from '../sine/samples.ts';
import type { FrequencyKnowledge } from './motion-model.ts';
import type { MotionRecord } from './motion-record.ts';

/** The frequency to judge a dwell at, and how it is known. */
export interface DriveFrequency {
  readonly frequencyHz: number;
  readonly knowledge: FrequencyKnowledge;
}

// A measured frequency differs from the set one when it does so by this many standard uncertainties and by more
// than clocks do.
const SIGNIFICANT = 5;
const CLOCK_TOLERANCE = 2e-4;

/**
 * The drive frequency: as set where the drive's own motion bears it out or is not in view; as measured on the drive
 * where it does not; measured on the response's later half, where transients are least, when nothing is given.
 *
 * @returns null where no frequency is given and none stands out
 */
export function driveFrequency(
  response: Samples,
  setHz: number | null,
  driveRecord: MotionRecord | undefined,
  window: readonly [number, number] | null,
): DriveFrequency | null {
  if (driveRecord !== undefined) {
    const drive = presentSamples(driveRecord.timesS, driveRecord.displacementMm, window ?? undefined);
    // near the set frequency first: above half the frame rate the strongest tone is only an alias
    const near =
      setHz === null ? null : fitSine(drive.timesS, drive.values, { startHz: setHz, baselineTerms: 2 });
    const fit = near ?? (setHz === null ? fitSine(drive.timesS, drive.values, { baselineTerms: 2 }) : null);
    // a drive that hardly moves in the picture tells nothing
    if (fit !== null && fit.frequencyU !== null && fit.amplitude > 10 * fit.amplitudeU) {
      const off = setHz === null ? Number.POSITIVE_INFINITY : Math.abs(fit.frequencyHz - setHz);
      const differs = setHz === null || (off > SIGNIFICANT * fit.frequencyU && off > CLOCK_TOLERANCE * setHz);
      return { frequencyHz: differs ? fit.frequencyHz : setHz, knowledge: 'measured' };
    }
  }
  if (setHz !== null) return { frequencyHz: setHz, knowledge: 'set' };
  const halfS = response.timesS[0]! + spanS(response) / 2;
  const later = presentSamples(response.timesS, response.values, [halfS, Number.POSITIVE_INFINITY]);
  const fit =
    fitSine(later.timesS, later.values, { baselineTerms: 2 }) ??
    fitSine(response.timesS, response.values, { baselineTerms: 2 });
  return fit === null || fit.amplitude < 4 * fit.amplitudeU
    ? null
    : { frequencyHz: fit.frequencyHz, knowledge: 'unknown' };
}
