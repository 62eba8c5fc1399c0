import { chooseFrequencies, type FrequencyChoice, refineFrequencies } from './choose-frequencies.ts';
import { promisedU } from './design-criterion.ts';
import {
  type FrequencyRange,
  frequencyRange,
  heldInformation,
  logSpread,
  onSteps,
  representatives,
  typicalOscillator,
} from './design-space.ts';
import { addDwell } from './dwell-information.ts';
import { type KnowledgeCloud, quantileOf } from './knowledge-cloud.ts';
import type { PlanPoint, PlanSetting } from './plan-points.ts';

/** What a run sheet is made from. */
export interface RunSheetTask {
  readonly setting: PlanSetting;
  readonly cloud: KnowledgeCloud;
  /** Dwells measured already; they count, and flanks that have one get no other. */
  readonly points: readonly PlanPoint[];
  /** Number of dwells in all, measured ones among them, 3 or more. */
  readonly dwells: number;
  /** Smallest step of the generator, Hz, or null where unknown. */
  readonly resolutionHz: number | null;
  /** Whether a step may be run at all: false above the travel limit. */
  readonly allowed: (driveHz: number) => boolean;
}

/** Drive frequencies yet to run for a configuration, in the order in which they are run: from low to high. */
export interface RunSheet {
  readonly driveHz: readonly number[];
  readonly range: FrequencyRange;
  /** Relative standard uncertainties that the sheet promises, most likely; null where it cannot tell them. */
  readonly promised: { readonly naturalHz: number; readonly dampingRatio: number } | null;
  readonly notes: readonly string[];
}

const WIDE_FROM_DWELLS = 5; // with fewer dwells than this none can be spared for the flanks

/**
 * Makes the initial run sheet: two wide dwells that show whether the model holds, the rest where they tell most of
 * natural frequency and damping, averaged over all that both may be: close to the half-power points and the peak
 * where the natural frequency is well known, spread over its range where it is not.
 *
 * @returns fewer dwells than asked for, with a note, where steps or travel limit leave no more
 */
export function makeRunSheet(task: RunSheetTask): RunSheet {
  const { setting, cloud, dwells } = task;
  const range = frequencyRange(cloud, task.resolutionHz);
  const { naturalHz, dampingRatio } = typicalOscillator(cloud);
  const halfBandwidthHz = dampingRatio * naturalHz;
  const runnable = range.candidates.filter(task.allowed);
  const notes = notesOn(task, range, halfBandwidthHz, runnable.length);
  if (runnable.length === 0) return { driveHz: [], range, promised: null, notes };

  const toRun = Math.max(dwells - task.points.length, 0);
  const wide =
    dwells < WIDE_FROM_DWELLS ? [] : barrenFlanks(task.points, runnable, naturalHz, halfBandwidthHz);
  wide.splice(toRun);
  const oscillators = representatives(cloud);
  const share = backgroundShare(task.points);
  const choice: FrequencyChoice = {
    setting,
    oscillators,
    held: oscillators.map((oscillator) => {
      const information = heldInformation(setting, cloud, task.points, oscillator, share);
      for (const driveHz of wide) addDwell(information, setting, oscillator, driveHz);
      return information;
    }),
    goal: 'natural-frequency-and-damping',
    candidates: runnable.filter((driveHz) => !wide.includes(driveHz)),
    count: toRun - wide.length,
    // neighbours rather than repeats: equally telling, and they show a peak that is not where it is thought to be
    leastSpacingHz: Math.max(range.resolutionHz, halfBandwidthHz / 12),
  };
  const coarse = chooseFrequencies(choice);
  const gridHz = (range.wide[1] - range.wide[0]) / Math.max(range.candidates.length - 1, 1);
  const refined = refineFrequencies(choice, coarse, {
    reachHz: gridHz,
    toleranceHz: Math.max(range.resolutionHz, gridHz / 20) / 2,
    rounds: 1,
    rangeHz: [runnable[0]!, runnable.at(-1)!],
  });
  // between two candidates that may be run there may be a peak that may not
  const inner = refined.map((hz, i) => (task.allowed(onSteps(hz, range.resolutionHz)) ? hz : coarse[i]!));
  const driveHz = distinctOnSteps([...wide, ...inner], range.resolutionHz).filter(task.allowed);
  if (driveHz.length < toRun)
    notes.push(
      `Only ${driveHz.length} of ${toRun} dwells find a place below the travel limit and on the generator's steps.`,
    );
  return { driveHz, range, promised: promise(task, driveHz), notes };
}

const FLANK_HALF_BANDWIDTHS = 3; // a dwell beyond this on a side counts as one on the flank

/** The outermost runnable steps of those flanks that have no dwell yet, ascending. */
function barrenFlanks(
  points: readonly PlanPoint[],
  runnable: readonly number[],
  naturalHz: number,
  halfBandwidthHz: number,
): number[] {
  const out = FLANK_HALF_BANDWIDTHS * halfBandwidthHz;
  const low = points.some((point) => point.driveHz < naturalHz - out) ? [] : runnable.slice(0, 1);
  const high = points.some((point) => point.driveHz > naturalHz + out) ? [] : runnable.slice(-1);
  return [...new Set([...low, ...high])];
}

/** With points the cloud has learnt from them already: its spread then is a faint background only. */
const backgroundShare = (points: readonly PlanPoint[]) => (points.length === 0 ? 1 : 0.01);

/** Rounds to the generator's steps, ascending, moving up what would fall on a step that is taken. */
function distinctOnSteps(frequencies: readonly number[], resolutionHz: number): number[] {
  const steps: number[] = [];
  for (const frequency of [...frequencies].sort((a, b) => a - b)) {
    const last = steps.at(-1);
    const rounded = onSteps(frequency, resolutionHz);
    steps.push(last !== undefined && rounded <= last ? onSteps(last + resolutionHz, resolutionHz) : rounded);
  }
  return steps;
}

function promise(task: RunSheetTask, driveHz: readonly number[]): RunSheet['promised'] {
  const { setting, cloud } = task;
  const share = backgroundShare(task.points);
  const all = representatives(cloud).flatMap((oscillator) => {
    const information = heldInformation(setting, cloud, task.points, oscillator, share);
    for (const hz of driveHz) addDwell(information, setting, oscillator, hz);
    return promisedU(information) ?? [];
  });
  if (all.length === 0) return null;
  return {
    naturalHz: quantileOf(
      all.map((u) => u.naturalHz),
      0.5,
    ),
    dampingRatio: quantileOf(
      all.map((u) => u.dampingRatio),
      0.5,
    ),
  };
}

function notesOn(
  { cloud, resolutionHz, dwells }: RunSheetTask,
  range: FrequencyRange,
  halfBandwidthHz: number,
  runnable: number,
): string[] {
  const notes: string[] = [];
  const spreadHz = logSpread(cloud.naturalHz) * quantileOf(cloud.naturalHz, 0.5);
  const round = (value: number) => Number(value.toPrecision(2));
  if (resolutionHz === null)
    notes.push(`The generator's smallest step is not stated; ${range.resolutionHz} Hz is assumed.`);
  if (range.resolutionHz > halfBandwidthHz / 3)
    notes.push(
      `The generator's step of ${range.resolutionHz} Hz is coarse beside the half-bandwidth of about ${round(halfBandwidthHz)} Hz: the peak may fall between two steps. Near the peak steps of a hundredth, then a thousandth of its frequency are common practice.`,
    );
  if (spreadHz > halfBandwidthHz)
    notes.push(
      `The natural frequency is known to ${round(spreadHz)} Hz only, more than the half-bandwidth of about ${round(halfBandwidthHz)} Hz, so the sheet searches first. Plan again after three or four dwells, or measure a ring-down.`,
    );
  if (dwells < WIDE_FROM_DWELLS)
    notes.push('So few dwells leave none for the flanks, and with them no check that the model holds.');
  if (runnable === 0) notes.push('Every step of the range would pass the travel limit: lower the drive.');
  else if (runnable < range.candidates.length)
    notes.push(
      'Steps that would pass the travel limit are left out; with a lower drive they could be run and would tell more.',
    );
  return notes;
}
