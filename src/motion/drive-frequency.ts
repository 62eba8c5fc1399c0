import { fitSine } from '../sine/four-parameter.ts';
import { strongestToneHz } from '../sine/interpolated-dft.ts';
import { durationS, medianIntervalS, presentSamples, type Samples, spanS } from '../sine/samples.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';
import type { FrequencyKnowledge } from './motion-model.ts';
import type { MotionRecord } from './motion-record.ts';
import { unfoldedHz } from './transient-starts.ts';

/** The frequency to judge a dwell at, and how it is known. */
export interface DriveFrequency {
  readonly frequencyHz: number;
  readonly knowledge: FrequencyKnowledge;
}

// A measured frequency differs from the set one when it does so by this many standard uncertainties and by more
// than clocks do.
const SIGNIFICANT = 5;
const CLOCK_TOLERANCE = 2e-4;
// An exciter's dial may be this far off; what moves farther away is something else.
const FARTHEST_CORRECTION = 0.1;

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
  const halfS = response.timesS[0]! + spanS(response) / 2;
  const later = presentSamples(response.timesS, response.values, [halfS, Number.POSITIVE_INFINITY]);
  if (setHz !== null) {
    return { frequencyHz: correctedHz(later, setHz) ?? setHz, knowledge: 'set' };
  }
  const fit =
    fitSine(later.timesS, later.values, { baselineTerms: 2 }) ??
    fitSine(response.timesS, response.values, { baselineTerms: 2 });
  return fit === null || fit.amplitude < 4 * fit.amplitudeU
    ? null
    : { frequencyHz: fit.frequencyHz, knowledge: 'unknown' };
}

/**
 * Where the motion truly runs, if the set frequency is wrong by more than a fit started there could find: within a
 * tenth of it, at least twice as strong as what moves at the set frequency, and not dying away as a transient would.
 * Null where the set frequency stands.
 */
function correctedHz(later: Samples, setHz: number): number | null {
  const seenHz = strongestToneHz(later);
  if (seenHz === null) return null;
  const toneHz = unfoldedHz(seenHz, 1 / medianIntervalS(later), setHz);
  const apartHz = Math.abs(toneHz - setHz);
  if (apartHz > FARTHEST_CORRECTION * setHz || apartHz * durationS(later) < 0.75) return null;
  const options = { baselineTerms: 2, noise: 'white' } as const;
  const tone = fitSine(later.timesS, later.values, { ...options, startHz: toneHz });
  const atSet = fitSineAtFrequency(later.timesS, later.values, setHz, options);
  if (tone === null || atSet === null || tone.amplitude < 2 * atSet.amplitude) return null;
  const middleS = later.timesS[0]! + spanS(later) / 2;
  const [early, late] = (
    [
      [0, middleS],
      [middleS, Number.POSITIVE_INFINITY],
    ] as const
  ).map((window) => {
    const half = presentSamples(later.timesS, later.values, window);
    return fitSineAtFrequency(half.timesS, half.values, tone.frequencyHz, options)?.amplitude ?? 0;
  });
  return Math.abs(early! - late!) < 0.1 * Math.max(early!, late!) ? tone.frequencyHz : null;
}
