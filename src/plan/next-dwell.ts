import { chooseFrequencies, type FrequencyChoice, refineFrequencies } from './choose-frequencies.ts';
import type { DesignGoal } from './design-criterion.ts';
import {
  type FrequencyRange,
  frequencyRange,
  heldInformation,
  logSpread,
  onSteps,
  representatives,
  typicalOscillator,
} from './design-space.ts';
import type { Oscillator } from './dwell-information.ts';
import type { KnowledgeCloud } from './knowledge-cloud.ts';
import {
  type ExpectedChange,
  expectedChange,
  narrowing,
  type PlanTargets,
  type Spreads,
  verdictOn,
} from './next-dwell-gain.ts';
import type { PlanFit, PlanPoint, PlanSetting } from './plan-points.ts';
import { predictAmplitude } from './predicted-amplitude.ts';

/** What the next dwell is chosen from. */
export interface NextDwellTask {
  readonly setting: PlanSetting;
  readonly cloud: KnowledgeCloud;
  readonly points: readonly PlanPoint[];
  /** The fit of these points, or null where there is none (yet). */
  readonly fit: PlanFit | null;
  readonly resolutionHz: number | null;
  readonly allowed: (driveHz: number) => boolean;
  readonly goal?: DesignGoal;
  readonly targets?: PlanTargets;
  /** Stop where a further dwell lowers neither uncertainty by more than this fraction; 0.05 where left out. */
  readonly leastGain?: number;
}

/** The dwell to run next and what it is expected to bring. */
export interface NextDwell {
  /** Drive frequency on the generator's steps, Hz; null where no step may be run. */
  readonly driveHz: number | null;
  readonly purpose: 'begin' | 'narrow' | 'check-model' | 'none';
  readonly naturalHz: ExpectedChange;
  readonly dampingRatio: ExpectedChange;
  /** True where the test may end here. */
  readonly enough: boolean;
  /** Why this frequency, and where `enough`, why the test may end. */
  readonly sentence: string;
}

const FIT_NEEDS = 3;
const LEAST_GAIN = 0.05;
const CLIMB = 3; // before a fit: no step to a swing that may be more than this many times the largest so far
const FLANK_HALF_BANDWIDTHS = 3; // a dwell beyond this on a side checks the model there

/**
 * Proposes the dwell that narrows natural frequency and damping most, among those that the travel limit allows.
 *
 * Before anything is measured it is a dwell far below resonance; before a fit exists, the one that tells most on
 * average over all that the dwells so far leave possible, and never one that may (95 %) swing more than three
 * times as far as any so far (common practice: the peak is approached in steps; no source); with a fit, the one that tells most at the fit. When that is enough, a dwell on a flank
 * that has none is proposed as a check of the model.
 */
export function nextDwell(task: NextDwellTask): NextDwell {
  const { setting, cloud, points, fit } = task;
  const range = frequencyRange(cloud, task.resolutionHz);
  const runnable = range.candidates.filter(task.allowed);
  const before = spreadsBefore(cloud, fit, points.length);
  if (runnable.length === 0)
    return nothing(
      before,
      false,
      'No step of the range stays below the travel limit: lower the drive and plan again.',
    );
  if (points.length === 0)
    return {
      ...nothing(
        before,
        false,
        'Begin far below resonance: the swing is small there, and it shows whether scale, marker and drive are right.',
      ),
      driveHz: runnable[0]!,
      purpose: 'begin',
    };

  const fitted = fit !== null && points.length >= FIT_NEEDS;
  const oscillators: Oscillator[] = fitted ? [typicalOscillator(cloud)] : representatives(cloud);
  const held = oscillators.map((oscillator) =>
    heldInformation(setting, cloud, points, oscillator, fitted ? 0 : 1),
  );
  const steps = fitted ? runnable : runnable.filter((hz) => isGentle(task, hz));
  const choice: FrequencyChoice = {
    setting,
    oscillators,
    held,
    goal: task.goal ?? 'natural-frequency-and-damping',
    candidates: (steps.length > 0 ? steps : [runnable[0]!]).filter((hz) =>
      isNew(hz, points, range.resolutionHz),
    ),
    count: 1,
    leastSpacingHz: 0,
  };
  const best = bestStep(choice, task, range, fitted);
  if (best === null)
    return nothing(before, false, 'Every step of the generator that could be run has been measured.');
  const change = expectedChange(choice, best, before);
  const verdict = fitted ? verdictOn(change, task.targets ?? {}, task.leastGain ?? LEAST_GAIN) : null;
  if (verdict === null)
    return {
      driveHz: best,
      purpose: 'narrow',
      ...change,
      enough: false,
      sentence: narrowing(best, change, fitted),
    };

  const flank = uncheckedFlank(choice, points, range, runnable);
  return flank === null
    ? { driveHz: best, purpose: 'none', ...change, enough: true, sentence: verdict }
    : {
        driveHz: flank,
        purpose: 'check-model',
        ...expectedChange(choice, flank, before),
        enough: true,
        sentence: `${verdict} A dwell at ${flank} Hz, on a flank that has none, would still check that the model holds.`,
      };
}

function spreadsBefore(cloud: KnowledgeCloud, fit: PlanFit | null, points: number): Spreads {
  if (fit === null || points < FIT_NEEDS)
    return { naturalHz: logSpread(cloud.naturalHz), dampingRatio: logSpread(cloud.dampingRatio) };
  return {
    naturalHz: Math.sqrt(fit.covariance[4] ?? 0) / fit.naturalHz,
    dampingRatio: Math.sqrt(fit.covariance[8] ?? 0) / fit.dampingRatio,
  };
}

function nothing(before: Spreads, enough: boolean, sentence: string): NextDwell {
  return {
    driveHz: null,
    purpose: 'none',
    naturalHz: { before: before.naturalHz, after: null },
    dampingRatio: { before: before.dampingRatio, after: null },
    enough,
    sentence,
  };
}

/** The best candidate, moved to the best step of the generator near it where that may be run and is new. */
function bestStep(
  choice: FrequencyChoice,
  task: NextDwellTask,
  range: FrequencyRange,
  fitted: boolean,
): number | null {
  const [coarse] = chooseFrequencies(choice);
  if (coarse === undefined) return null;
  const reachHz = (range.wide[1] - range.wide[0]) / range.candidates.length;
  const how = { reachHz, toleranceHz: range.resolutionHz / 4, rounds: 1, rangeHz: range.wide };
  const [fine] = refineFrequencies(choice, [coarse], how).map((hz) => onSteps(hz, range.resolutionHz));
  const runnable =
    fine !== undefined &&
    task.allowed(fine) &&
    isNew(fine, task.points, range.resolutionHz) &&
    (fitted || isGentle(task, fine));
  return runnable ? fine : coarse;
}

/** Whether a step swings, with 95 %, no more than a few times as far as any dwell so far. */
function isGentle({ setting, cloud, points }: NextDwellTask, driveHz: number): boolean {
  const predicted = predictAmplitude(setting.model, cloud, driveHz);
  const largest = Math.max(...points.map((point) => point.amplitudeMm));
  return predicted === null || predicted.upperMm <= CLIMB * largest;
}

const isNew = (driveHz: number, points: readonly PlanPoint[], resolutionHz: number): boolean =>
  points.every((point) => Math.abs(point.driveHz - driveHz) > 0.5 * resolutionHz);

/** The wide step on a side of the peak where no dwell lies well out, or null where both sides have one. */
function uncheckedFlank(
  choice: FrequencyChoice,
  points: readonly PlanPoint[],
  range: FrequencyRange,
  runnable: readonly number[],
): number | null {
  const { naturalHz, dampingRatio } = choice.oscillators[0]!;
  const out = FLANK_HALF_BANDWIDTHS * dampingRatio * naturalHz;
  const low = runnable[0]!;
  const high = runnable.at(-1)!;
  if (!points.some((point) => point.driveHz < naturalHz - out) && low === range.wide[0]) return low;
  if (!points.some((point) => point.driveHz > naturalHz + out) && high === range.wide[1]) return high;
  return null;
}
