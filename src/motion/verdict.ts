import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import { fitSine } from '../sine/four-parameter.ts';
import { harmonicRatios } from '../sine/harmonics.ts';
import { fitLag } from '../sine/lag.ts';
import { durationS, medianIntervalS, presentSamples, type Samples, spanS } from '../sine/samples.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';
import { driveFrequency } from './drive-frequency.ts';
import type { DwellJudgement, MotionWarning, Verdict } from './dwell-judgement.ts';
import { judgeWindow, type WindowJudgement } from './judge-window.ts';
import { BASELINE_TERMS } from './motion-model.ts';
import type { MotionRecord } from './motion-record.ts';
import { noiseFloorOf } from './noise-floor.ts';
import { countFrames, requireOrderedRecord, seconds } from './record-checks.ts';
import { findSteadyWindow, wholePeriods } from './steady-window.ts';
import { hertz, millimetres, sentenceOf, verdictOf } from './verdict-sentences.ts';
import { dwellWarnings } from './verdict-warnings.ts';

/** How a dwell is to be judged. */
export interface JudgeOptions {
  /** What the exciter was set to, Hz; null where it is not known and must be measured. */
  readonly driveHz: number | null;
  /** Judge this part of the record, seconds; found where absent. */
  readonly window?: readonly [number, number];
  /** The exciter's own motion at the same times, for the lag and the drive's true frequency. */
  readonly driveRecord?: MotionRecord;
}

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
  return describe(record, options, samples, judged);
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

function unmeasured(
  record: MotionRecord,
  verdict: Verdict,
  sentence: string,
  window: readonly [number, number] | null = null,
): DwellJudgement {
  const { total, lost } = countFrames(record, window);
  return {
    verdict,
    sentence,
    windowS: null,
    frames: total - lost,
    lostFrames: lost,
    frequencyHz: null,
    fit: null,
    freeFit: null,
    jointFit: null,
    lag: null,
    leftover: NOT_MEASURED,
    leftoverEffect: null,
    drift: NOT_MEASURED,
    harmonics: [NOT_MEASURED, NOT_MEASURED, NOT_MEASURED, NOT_MEASURED],
    waitS: null,
    warnings: [],
  };
}

/** Fits the window that was found and puts everything into words. */
function describe(
  record: MotionRecord,
  options: JudgeOptions,
  samples: Samples,
  judged: WindowJudgement,
): DwellJudgement {
  const { model, finding } = judged;
  const frequencyHz = model.frequencyHz;
  const steady = finding.kind === 'steady';
  const windowS =
    options.window === undefined
      ? wholePeriods(judged.windowS, frequencyHz, medianIntervalS(samples))
      : judged.windowS;
  const part = presentSamples(samples.timesS, samples.values, windowS);
  const fitOptions = { baselineTerms: BASELINE_TERMS };
  const fit = fitSineAtFrequency(part.timesS, part.values, frequencyHz, fitOptions);
  const freeFit = fitSine(part.timesS, part.values, { ...fitOptions, startHz: frequencyHz });
  const harmonics = harmonicRatios(part.timesS, part.values, frequencyHz);
  const { total, lost } = countFrames(record, windowS);

  const floor = fit === null ? null : noiseFloorOf(fit.amplitudeU, fit.effectiveDof, frequencyHz, fit.frames);
  if (fit === null || floor === null || fit.amplitude <= floor.decision) {
    const limit =
      floor === null
        ? ''
        : `: a swing below ${millimetres(floor.detectable, floor.amplitudeU)} cannot be seen here`;
    const why = `Nothing moves at ${hertz(frequencyHz)} above the noise${limit}${otherMotion(part)}.`;
    return { ...unmeasured(record, 'failed', why, options.window ?? null), fit };
  }
  const drive = options.driveRecord;
  const lag =
    drive === undefined || drive.timesS.length !== record.timesS.length
      ? null
      : fitLag(...alignedWindow(record, drive, windowS), frequencyHz, fitOptions);
  const warnings: MotionWarning[] = dwellWarnings({
    record,
    windowS,
    driveHz: options.driveHz,
    judged,
    harmonics,
    frames: { total, lost },
    periods: spanS(part) * frequencyHz,
  });
  return {
    verdict: verdictOf(finding),
    sentence: sentenceOf(finding, windowS, frequencyHz, model.joint),
    windowS,
    frames: total - lost,
    lostFrames: lost,
    frequencyHz,
    fit,
    freeFit,
    jointFit: model.joint,
    lag,
    leftover: judged.leftover,
    leftoverEffect: judged.leftoverEffect,
    drift: measured(judged.change.value, judged.change.u),
    harmonics,
    waitS: steady ? 0 : finding.kind === 'transient' ? finding.waitS : null,
    warnings,
  };
}

/** What moves instead, for the sentence. */
function otherMotion(part: Samples): string {
  const strongest = fitSine(part.timesS, part.values, { baselineTerms: BASELINE_TERMS });
  if (strongest === null || strongest.amplitude < 5 * strongest.amplitudeU) return '';
  return `; the strongest motion is at ${hertz(strongest.frequencyHz)}`;
}

/** Times, response and drive inside the window; frames outside are left out. */
function alignedWindow(
  response: MotionRecord,
  drive: MotionRecord,
  windowS: readonly [number, number],
): [Float64Array, Float64Array, Float64Array] {
  const keep = Array.from(response.timesS.keys()).filter(
    (i) => response.timesS[i]! >= windowS[0] && response.timesS[i]! <= windowS[1],
  );
  return [
    Float64Array.from(keep, (i) => response.timesS[i]!),
    Float64Array.from(keep, (i) => response.displacementMm[i]!),
    Float64Array.from(keep, (i) => drive.displacementMm[i]!),
  ];
}
