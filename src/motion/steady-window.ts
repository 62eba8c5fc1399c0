import { medianIntervalS, presentSamples, type Samples, spanS } from '../sine/samples.ts';
import {
  effectOn,
  judgeWindow,
  LEFTOVER_AIM,
  LEFTOVER_LIMIT,
  leftoverAt,
  type WindowJudgement,
} from './judge-window.ts';
import type { FrequencyKnowledge, MotionModel } from './motion-model.ts';
import { steadiness, strays } from './steadiness.ts';

// A steady window shorter than this is not chosen while a longer look is possible.
const PERIODS_WANTED = 5;
const FEWEST_PERIODS = 3;
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
    leftover: { value: size, u: (size * joint.leftoverU) / joint.leftover },
    leftoverEffect: effectOn(joint, windowS, frequencyHz),
    change: { value: blocks?.change ?? null, u: blocks?.changeU ?? null },
  };
}

/**
 * The steady window of a record: all of it where all is steady; the part after the start-up transient has died to
 * 1 % (2 % where the record is short); or the longest of a few parts that is steady by itself.
 *
 * @param samples harmonics and foreign tones already taken out
 * @param model of all the samples, where the caller has it
 * @returns the judgement of the steady window, or of the whole record where no part is steady; null where no sine
 *   can be fitted
 */
export function findSteadyWindow(
  samples: Samples,
  driveHz: number,
  knowledge: FrequencyKnowledge,
  model?: MotionModel | null,
): WindowJudgement | null {
  const whole = judgeWindow(samples, driveHz, knowledge, model);
  if (whole === null) return null;
  const over = (whole.leftover.value ?? 0) > LEFTOVER_AIM;
  if (whole.finding.kind === 'steady' && !over) return whole;

  const later =
    afterTransient(samples, whole, LEFTOVER_AIM, PERIODS_WANTED) ??
    (whole.finding.kind === 'steady'
      ? whole
      : afterTransient(samples, whole, LEFTOVER_LIMIT, FEWEST_PERIODS));
  if (later !== null) return later;
  // a transient that explains everything is there to the end: no part is better
  if (whole.model.joint?.conditioned && whole.model.adequate) return whole;

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
