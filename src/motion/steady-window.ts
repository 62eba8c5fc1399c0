import { medianIntervalS, presentSamples, type Samples, spanS } from '../sine/samples.ts';
import {
  effectOn,
  judgeWindow,
  LEFTOVER_AIM,
  LEFTOVER_LIMIT,
  leftoverAt,
  type WindowJudgement,
} from './judge-window.ts';
import type { FrequencyKnowledge } from './motion-model.ts';
import { steadiness, strays } from './steadiness.ts';

// Leftover at the start of the window and the periods that must remain after it, the best first: at 0.1 % the
// transient moves no digit, at 1 % its effect on the amplitude is a line in the budget.
const LEFTOVER_STEPS: readonly (readonly [number, number])[] = [
  [0.001, 10],
  [0.003, 7],
  [LEFTOVER_AIM, 5],
  [LEFTOVER_LIMIT, 5],
];
const PERIODS_WANTED = 5;
const FEWEST_FRAMES = 20;
// Parts of the record tried when the whole of it is unsteady in a way no transient explains.
const PARTS: readonly (readonly [number, number])[] = [
  [0.2, 1],
  [0.4, 1],
  [0, 0.75],
  [0.6, 1],
  [0.75, 1],
  [0.2, 0.8],
  [0, 0.5],
];
// A larger change than this is no slow one: the motion began or stopped within the record.
const SLOW_CHANGE = 0.2;
// Wandering above which a part is not worth a closer look.
const HOPELESS = 0.05;

/** The samples inside a window. */
function within(samples: Samples, windowS: readonly [number, number]): Samples {
  return presentSamples(samples.timesS, samples.values, windowS);
}

/** The end moved back to a whole number of periods after the start; unchanged for less than two periods. */
export function wholePeriods(
  windowS: readonly [number, number],
  frequencyHz: number,
  frameS: number,
): readonly [number, number] {
  const [from, to] = windowS;
  const periods = Math.floor((to - from + 1.5 * frameS) * frequencyHz);
  // n frames cover n intervals: the last frame of a whole number of periods comes one interval earlier
  const end = from + periods / frequencyHz - 0.5 * frameS;
  return periods < 2 ? windowS : [from, Math.min(to, end)];
}

function longEnough(samples: Samples, frequencyHz: number, periods: number): boolean {
  return samples.timesS.length >= FEWEST_FRAMES && spanS(samples) * frequencyHz >= periods - 0.5;
}

/** The part of the record after a known transient has fallen to `leftover`, judged anew where it is long enough. */
function afterTransient(
  samples: Samples,
  whole: WindowJudgement,
  leftover: number,
  periods: number,
): WindowJudgement | null {
  const { joint, frequencyHz } = whole.model;
  if (joint === null || !joint.conditioned || !whole.model.adequate) return null;
  const high = joint.leftover + joint.leftoverU;
  const startS = joint.originS + Math.max(0, Math.log(high / leftover)) / joint.decayRatePerS;
  const part = within(samples, [startS, joint.endS]);
  if (!longEnough(part, frequencyHz, periods)) return null;
  // the transient's size there is known from the whole record; what else may be wrong is looked for
  const blocks = steadiness(part, frequencyHz, joint.amplitude);
  if (strays(blocks, 2 * LEFTOVER_LIMIT)) return null;
  const windowS = [part.timesS[0]!, joint.endS] as const;
  const size = leftoverAt(joint, windowS[0]);
  return {
    windowS,
    finding: { kind: 'steady' },
    model: whole.model,
    toneHz: whole.toneHz,
    leftover: { value: size, u: (size * joint.leftoverU) / joint.leftover },
    leftoverEffect: effectOn(joint, windowS, frequencyHz),
  };
}

/**
 * The steady window of a record: all of it where all is steady; the part after the start-up transient has died to
 * 1 % (2 % where the record is short); or the longest of a few parts that is steady by itself.
 *
 * @returns the judgement of the steady window, or of the whole record where no part is steady; null where no sine
 *   can be fitted
 */
export function findSteadyWindow(
  samples: Samples,
  driveHz: number,
  knowledge: FrequencyKnowledge,
): WindowJudgement | null {
  const whole = judgeWindow(samples, driveHz, knowledge);
  if (whole === null) return null;
  const steady = whole.finding.kind === 'steady';
  const leftoverNow = whole.leftover.value ?? 0;
  for (const [leftover, periods] of LEFTOVER_STEPS) {
    if (steady && leftoverNow <= leftover) return whole;
    const later = afterTransient(samples, whole, leftover, periods);
    if (later !== null) return later;
  }
  if (steady) return whole;
  // a transient that explains everything is there to the end: a part only hides it
  if (whole.model.joint !== null && whole.model.adequate) return whole;
  // a slow change that goes on all the time is in every part, only smaller
  const { finding } = whole;
  if (finding.kind === 'slide' || (finding.kind === 'trend' && Math.abs(finding.change) < SLOW_CHANGE))
    return whole;

  const [first, span] = [samples.timesS[0]!, spanS(samples)];
  for (const [from, to] of PARTS) {
    const part = within(samples, [first + from * span, first + to * span + 0.5 * medianIntervalS(samples)]);
    if (!longEnough(part, driveHz, PERIODS_WANTED)) continue;
    const blocks = steadiness(part, driveHz, whole.model.steady.amplitude);
    if (blocks !== null && Math.abs(blocks.change) > HOPELESS) continue;
    const judged = judgeWindow(part, driveHz, knowledge);
    if (judged?.finding.kind !== 'steady') continue;
    const tail = (judged.leftover.value ?? 0) > LEFTOVER_AIM;
    return (tail ? afterTransient(part, judged, LEFTOVER_AIM, PERIODS_WANTED) : null) ?? judged;
  }
  return whole;
}
