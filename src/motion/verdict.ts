import { durationS, medianIntervalS, presentSamples } from '../sine/samples.ts';
import { driveFrequency } from './drive-frequency.ts';
import type { DwellJudgement, JudgeOptions } from './dwell-judgement.ts';
import { judgeWindow } from './judge-window.ts';
import { measureWindow, unmeasured } from './measure-window.ts';
import type { MotionRecord } from './motion-record.ts';
import { countFrames, requireOrderedRecord, seconds } from './record-checks.ts';
import { findSteadyWindow } from './steady-window.ts';
import { hertz } from './verdict-sentences.ts';

const FEWEST_PERIODS = 2;
const FEWEST_FRAMES = 10;
// A marker lost in more than half of the frames was not followed.
const MOST_LOST = 0.5;

/**
 * Judges one dwell: finds its steady window, says whether it is steady and what to do if it is not, and fits it.
 *
 * @param record response motion; gaps are NaN
 * @returns the judgement; where nothing can be measured its values are null and its sentence says why
 * @throws InputError where the record's times are out of order
 */
export function judgeDwell(record: MotionRecord, options: JudgeOptions): DwellJudgement {
  requireOrderedRecord(record);
  if (options.driveRecord !== undefined) requireOrderedRecord(options.driveRecord);
  const { driveHz } = options;
  if (driveHz !== null && !(driveHz > 0 && Number.isFinite(driveHz))) {
    return unmeasured(record, 'failed', `The drive frequency must be above 0 Hz, not ${driveHz} Hz.`);
  }
  const clipFault = windowFault(record, options.window);
  if (clipFault !== null) return unmeasured(record, 'failed', clipFault);

  const window = options.window ?? null;
  const samples = presentSamples(record.timesS, record.displacementMm, options.window);
  const { total, lost } = countFrames(record, window);
  if (samples.timesS.length < FEWEST_FRAMES || lost > MOST_LOST * total) {
    const seen = `The marker was seen in ${total - lost} of ${total} frames`;
    return lost > 0
      ? unmeasured(
          record,
          'lost',
          `${seen}: choose a marker that stays in view, sharp and evenly lit.`,
          window,
        )
      : unmeasured(record, 'failed', `There are only ${total} frames; film at least two periods.`, window);
  }
  if (samples.values.every((value) => value === samples.values[0])) {
    const why =
      'The marker does not move at all: check that the drive runs and the marker sits on the moving part.';
    return unmeasured(record, 'failed', why, window);
  }

  const drive = driveFrequency(samples, driveHz, options.driveRecord, window);
  if (drive === null) {
    const why = 'No single frequency stands out of the motion: give the drive frequency.';
    return unmeasured(record, 'failed', why, window);
  }
  const periods = durationS(samples) * drive.frequencyHz;
  if (periods < FEWEST_PERIODS) {
    const why =
      `The record holds ${Number(periods.toPrecision(2))} periods of ${hertz(drive.frequencyHz)}: ` +
      `film at least ${seconds(FEWEST_PERIODS / drive.frequencyHz)}, better ten periods.`;
    return unmeasured(record, 'failed', why, window);
  }

  const find = window === null ? findSteadyWindow : judgeWindow;
  const judged = find(samples, drive.frequencyHz, drive.knowledge);
  if (judged === null) {
    const why =
      `No sine of ${hertz(drive.frequencyHz)} can be fitted to these frames: ` +
      'the frame rate is a whole multiple of it, or too few frames were seen.';
    return unmeasured(record, 'failed', why, window);
  }
  return measureWindow(record, options, samples, judged);
}

/** Why a window cannot be used, or null. */
function windowFault({ timesS }: MotionRecord, window: readonly [number, number] | undefined): string | null {
  if (timesS.length === 0) return 'The record has no frames.';
  if (window === undefined) return null;
  const [first, last] = [timesS[0]!, timesS[timesS.length - 1]!];
  const asked = `The window ${seconds(window[0])} to ${seconds(window[1])}`;
  if (!(window[1] > window[0])) return `${asked} ends before it begins.`;
  const slack = medianIntervalS({ timesS, values: timesS });
  if (window[0] < first - slack || window[1] > last + slack) {
    return `${asked} lies outside the clip, which runs from ${seconds(first)} to ${seconds(last)}.`;
  }
  return null;
}
