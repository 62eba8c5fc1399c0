import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import { fitSine } from '../sine/four-parameter.ts';
import { harmonicRatios } from '../sine/harmonics.ts';
import { fitLag } from '../sine/lag.ts';
import { medianIntervalS, presentSamples, type Samples, spanS } from '../sine/samples.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';
import { bestValues, NO_VALUES } from './best-values.ts';
import type { DwellJudgement, JudgeOptions, Verdict } from './dwell-judgement.ts';
import { type JointFit, transientAt } from './joint-fit.ts';
import type { WindowJudgement } from './judge-window.ts';
import { BASELINE_TERMS } from './motion-model.ts';
import type { MotionRecord } from './motion-record.ts';
import { noiseFloorOf } from './noise-floor.ts';
import { countFrames } from './record-checks.ts';
import { steadiness } from './steadiness.ts';
import { wholePeriods } from './steady-window.ts';
import { hertz, millimetres, sentenceOf, verdictOf } from './verdict-sentences.ts';
import { dwellWarnings } from './verdict-warnings.ts';

/** The judgement of a dwell of which nothing could be measured, with the reason in words. */
export function unmeasured(
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
    best: NO_VALUES,
    leftover: NOT_MEASURED,
    leftoverEffect: null,
    drift: NOT_MEASURED,
    harmonics: [NOT_MEASURED, NOT_MEASURED, NOT_MEASURED, NOT_MEASURED],
    waitS: null,
    warnings: [],
  };
}

/**
 * Fits the window that was found, and puts what was found about it into words.
 *
 * @param samples the record's frames that have a displacement
 */
export function measureWindow(
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
  const seen = presentSamples(samples.timesS, samples.values, windowS);
  // in a steady window the rest of a known transient is taken out, so that it does not bias the last digits
  const known = steady && model.adequate && model.joint?.conditioned ? model.joint : null;
  const tail = (timeS: number) => (known === null ? 0 : transientAt(known, timeS));
  const part = { timesS: seen.timesS, values: seen.values.map((value, i) => value - tail(seen.timesS[i]!)) };
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
      : fitLag(...alignedWindow(record, drive, windowS, tail), frequencyHz, fitOptions);
  const blocks = steadiness(part, frequencyHz, fit.amplitude);
  const drift = measured(blocks?.change ?? null, blocks?.changeU ?? null);
  const warnings = dwellWarnings({
    record,
    windowS,
    driveHz: options.driveHz,
    judged,
    drift,
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
    best: bestValues(steady, fit, lag, model.joint),
    leftover: judged.leftover,
    leftoverEffect: judged.leftoverEffect === null ? null : judged.leftoverEffect * doubt(known),
    drift,
    harmonics,
    waitS: steady ? 0 : finding.kind === 'transient' ? finding.waitS : null,
    warnings,
  };
}

/** Share of a transient that taking it out may have left: its own uncertainty, and a tenth for its shape. */
function doubt(known: JointFit | null): number {
  return known === null ? 1 : Math.min(1, Math.hypot(known.leftoverU / known.leftover, 0.1));
}

/** What moves instead, for the sentence. */
function otherMotion(part: Samples): string {
  const strongest = fitSine(part.timesS, part.values, { baselineTerms: BASELINE_TERMS });
  if (strongest === null || strongest.amplitude < 5 * strongest.amplitudeU) return '';
  return `; the strongest motion is at ${hertz(strongest.frequencyHz)}`;
}

/** Times, response less its known transient, and drive inside the window; frames outside are left out. */
function alignedWindow(
  response: MotionRecord,
  drive: MotionRecord,
  windowS: readonly [number, number],
  tail: (timeS: number) => number,
): [Float64Array, Float64Array, Float64Array] {
  const keep = Array.from(response.timesS.keys()).filter(
    (i) => response.timesS[i]! >= windowS[0] && response.timesS[i]! <= windowS[1],
  );
  return [
    Float64Array.from(keep, (i) => response.timesS[i]!),
    Float64Array.from(keep, (i) => response.displacementMm[i]! - tail(response.timesS[i]!)),
    Float64Array.from(keep, (i) => drive.displacementMm[i]!),
  ];
}
