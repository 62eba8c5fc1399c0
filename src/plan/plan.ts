import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import { cautionsFor } from './cautions.ts';
import { cloudFromFit } from './cloud-from-fit.ts';
import { typicalOscillator, typicalPeak } from './design-space.ts';
import { cloudFromKnowledge, type KnowledgeCloud, quantileOf } from './knowledge-cloud.ts';
import { nextDwell } from './next-dwell.ts';
import { expectedNoise, type PlanFit, type PlanPoint, type PlanSetting } from './plan-points.ts';
import { cameraForSteps, judgeStep, planRows } from './plan-rows.ts';
import type { Plan, PlanInput, PlanRow, PlanTotals } from './plan-types.ts';
import { planWarnings, situationsOf } from './plan-warnings.ts';
import { makeRunSheet, type RunSheet } from './run-sheet.ts';
import { type FrequencySource, type StartingKnowledge, startingKnowledge } from './starting-knowledge.ts';
import { sweepAdvice } from './sweep-rate.ts';

export type { Plan, PlanInput, PlanRow, PlanTotals } from './plan-types.ts';

const DWELLS = 9;
const FEWEST_DWELLS = 3;
const HANDLING_S = 20; // common practice, no source
const HIGHEST_SWEPT_DAMPING = 0.35; // beyond there is no peak worth sweeping through

/**
 * Plans one configuration: which frequencies to dwell at, how long to wait and film at each, what swing to expect
 * and whether it passes the travel limit, how to set the camera, what to run next, and what to beware of. The same
 * entry serves the command line and the window.
 *
 * Never throws for what a user can enter: where nothing can be planned `reason` says what is missing.
 */
export function makePlan(input: PlanInput): Plan {
  const points = (input.points ?? []).filter(isUsable);
  const known = cloudOf(input, points);
  if (known.cloud === null) return emptyPlan(known.reason, input);
  const { cloud, fit } = known;
  const setting = settingOf(input, cloud, points);
  const allowed = allowance(input, cloud);

  const sheet = input.plannedHz == null ? sheetOf(input, cloud, setting, points, allowed) : null;
  const frequencies = sheet?.driveHz ?? plannedByHand(input.plannedHz ?? []);
  const steps = frequencies.map((driveHz) => judgeStep(input, cloud, driveHz));
  const camera = cameraForSteps(input, steps);
  const rows = camera === null ? [] : planRows(input, cloud, steps, camera);
  const { naturalHz, dampingRatio } = typicalOscillator(cloud);
  const next = nextDwell({
    setting,
    cloud,
    points,
    fit,
    resolutionHz: positive(input.resolutionHz),
    allowed,
    ...(input.goal !== undefined && { goal: input.goal }),
    ...(input.targets !== undefined && { targets: input.targets }),
  });
  const range = sheet?.range.wide;
  return {
    reason: null,
    naturalHz: measured(naturalHz, spreadOf(cloud.naturalHz)),
    dampingRatio: measured(dampingRatio, spreadOf(cloud.dampingRatio)),
    rows,
    totals: totalsOf(rows, input.handlingS ?? HANDLING_S),
    promised: sheet?.promised ?? null,
    next,
    camera,
    sweep:
      dampingRatio < HIGHEST_SWEPT_DAMPING
        ? sweepAdvice(naturalHz, dampingRatio, range === undefined ? 0.4 * naturalHz : range[1] - range[0])
        : null,
    cautions: cautionsFor(situationsOf(input, rows)),
    warnings: [...known.notes, ...(sheet?.notes ?? []), ...planWarnings(rows, cloud, input)],
  };
}

/** A dwell that planning can learn from. */
const isUsable = ({ driveHz, amplitudeMm }: PlanPoint): boolean =>
  driveHz > 0 && amplitudeMm > 0 && Number.isFinite(driveHz * amplitudeMm);

/** Whether a step stays below the travel limit; judged once for each frequency. */
function allowance(input: PlanInput, cloud: KnowledgeCloud): (driveHz: number) => boolean {
  if (input.travelLimitMm == null) return () => true;
  const judged = new Map<number, boolean>();
  return (driveHz) => {
    const before = judged.get(driveHz);
    if (before !== undefined) return before;
    const below = judgeStep(input, cloud, driveHz).travel.verdict !== 'refused';
    judged.set(driveHz, below);
    return below;
  };
}

type Known =
  | { readonly cloud: KnowledgeCloud; readonly fit: PlanFit | null; readonly notes: readonly string[] }
  | { readonly cloud: null; readonly reason: string };

/** All that is known: the fit where it says more than the start, else starting knowledge joined with the dwells. */
function cloudOf(input: PlanInput, points: readonly PlanPoint[]): Known {
  const fit = input.fit ?? null;
  const source = input.start ?? guessFromDwells(points);
  const { knowledge, reason } = startingKnowledge(source, input.damping ?? null);
  if (fit !== null && (knowledge === null || isTelling(fit, knowledge)))
    return { cloud: cloudFromFit(fit), fit, notes: [] };
  if (knowledge === null) return { cloud: null, reason };
  const guessed =
    input.start == null
      ? ['No first natural frequency is given; that of the largest dwell so far is taken as a rough guess.']
      : [];
  return {
    cloud: cloudFromKnowledge(input.model, knowledge, input.gainMm ?? null, points),
    fit: null,
    notes: [...guessed, ...knowledge.notes],
  };
}

const TELLING_HALF_BANDWIDTHS = 0.3;
const TELLING_DAMPING = 0.5; // of itself

/** Whether a fit is worth planning from: as good as the start, or good beside its bandwidth. One of few dwells may not be. */
function isTelling({ naturalHz, dampingRatio, covariance }: PlanFit, start: StartingKnowledge): boolean {
  const uHz = Math.sqrt(covariance[4] ?? Number.POSITIVE_INFINITY);
  const uDamping = Math.sqrt(covariance[8] ?? Number.POSITIVE_INFINITY) / dampingRatio;
  const { low, high } = start.dampingRatio;
  return (
    uHz <= Math.max(start.naturalHz.u, TELLING_HALF_BANDWIDTHS * dampingRatio * naturalHz) &&
    uDamping <= Math.max(Math.log(high / low), TELLING_DAMPING)
  );
}

const ROUGH_RELATIVE_U = 0.15;

function guessFromDwells(points: readonly PlanPoint[]): FrequencySource | null {
  if (points.length === 0) return null;
  const largest = points.reduce((a, b) => (b.amplitudeMm > a.amplitudeMm ? b : a));
  return { kind: 'stated', naturalHz: largest.driveHz, uHz: ROUGH_RELATIVE_U * largest.driveHz };
}

function settingOf(input: PlanInput, cloud: KnowledgeCloud, points: readonly PlanPoint[]): PlanSetting {
  const peak = typicalPeak(input, typicalOscillator(cloud));
  return {
    model: input.model,
    observed: input.observed ?? 'amplitude',
    noise: expectedNoise(points, peak, input.amplitudeRelativeU),
  };
}

function sheetOf(
  input: PlanInput,
  cloud: KnowledgeCloud,
  setting: PlanSetting,
  points: readonly PlanPoint[],
  allowed: (driveHz: number) => boolean,
): RunSheet {
  return makeRunSheet({
    setting,
    cloud,
    points,
    dwells: Math.max(Math.round(input.dwells ?? DWELLS), FEWEST_DWELLS),
    resolutionHz: positive(input.resolutionHz),
    allowed,
  });
}

const positive = (value: number | null | undefined): number | null =>
  value != null && value > 0 ? value : null;

/** From low to high, as the steps are run; what is no frequency is left out. */
const plannedByHand = (frequencies: readonly number[]): number[] =>
  frequencies.filter((driveHz) => Number.isFinite(driveHz) && driveHz > 0).sort((a, b) => a - b);

const spreadOf = (values: Float64Array) => (quantileOf(values, 0.8413) - quantileOf(values, 0.1587)) / 2;

function totalsOf(rows: readonly PlanRow[], handlingS: number): PlanTotals {
  const run = rows.filter((row) => !row.aboveLimit);
  const waitS = run.reduce((sum, row) => sum + row.waitS, 0);
  const filmS = run.reduce((sum, row) => sum + row.filmS, 0);
  const handling = handlingS * run.length;
  return { dwells: run.length, waitS, filmS, handlingS: handling, benchS: waitS + filmS + handling };
}

function emptyPlan(reason: string, input: PlanInput): Plan {
  return {
    reason,
    naturalHz: NOT_MEASURED,
    dampingRatio: NOT_MEASURED,
    rows: [],
    totals: totalsOf([], 0),
    promised: null,
    next: null,
    camera: null,
    sweep: null,
    cautions: cautionsFor(situationsOf(input, [])),
    warnings: [],
  };
}
