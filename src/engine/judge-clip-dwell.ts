import type { DwellJudgement, Verdict } from '../motion/dwell-judgement.ts';
import type { JointFit } from '../motion/joint-fit.ts';
import type { MotionRecord } from '../motion/motion-record.ts';
import { judgeDwell } from '../motion/verdict.ts';
import { type Measured, measured } from '../numeric/measured.ts';
import type { SineFit } from '../sine/sine-fit.ts';
import type { DwellSpec } from '../testfile/schema.ts';
import { inWindow } from './dwell-at-frequency.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';

/** The steady motion of a dwell as seen, before any correction for filming. */
export interface JudgedDwell {
  /** Drive frequency as set, else as measured, Hz. */
  readonly frequencyHz: number;
  /** Frequency from a fit that leaves it free, Hz. */
  readonly measuredHz: Measured;
  readonly amplitudeMm: number;
  readonly amplitudeU: number;
  readonly dof: number;
  /** Phase of the cosine at t = 0 of the clip, rad. */
  readonly phaseRad: number;
  readonly phaseU: number;
  readonly residualRmsMm: number;
  readonly window: readonly [number, number];
  readonly lostFrames: number;
  readonly verdict: Verdict;
  readonly sentence: string;
  readonly leftover: number | null;
  /** What leftover and drift leave uncertain in the amplitude, mm. */
  readonly leftoverU: number;
  readonly driftU: number;
  readonly jointFit: boolean;
  readonly transient: { readonly naturalHz: Measured; readonly dampingRatio: Measured } | null;
  readonly harmonics: readonly number[];
  readonly warnings: readonly string[];
}

/** A dwell whose motion cannot be judged, with the reason in one sentence. */
export interface UnjudgedDwell {
  readonly error: string;
  readonly verdict: Verdict;
  readonly lostFrames: number;
}

/** The sine that counts: the joint fit where it can tell steady motion from transient, else the fit of the window. */
function steadySine(judgement: DwellJudgement): SteadySine | null {
  const { jointFit, fit } = judgement;
  if (jointFit?.conditioned) return { ...asSteady(jointFit), joint: jointFit };
  return fit ? { ...asSteady(fit), joint: null } : null;
}

interface SteadySine {
  readonly amplitudeMm: number;
  readonly amplitudeU: number;
  readonly dof: number;
  readonly phaseRad: number;
  readonly phaseU: number;
  readonly residualRmsMm: number;
  readonly joint: JointFit | null;
}

function asSteady(fit: SineFit | JointFit): Omit<SteadySine, 'joint'> {
  return {
    amplitudeMm: fit.amplitude,
    amplitudeU: fit.amplitudeU,
    dof: fit.effectiveDof,
    phaseRad: fit.phaseRad - 2 * Math.PI * fit.frequencyHz * fit.referenceTimeS,
    phaseU: fit.phaseU,
    residualRmsMm: Math.sqrt(fit.residualSumOfSquares / Math.max(1, fit.frames)),
  };
}

/** An effect of unknown sign that is at most `largest`: rectangular distribution (JCGM 100, 4.3.7). */
function rectangularU(largest: number): number {
  return Math.abs(largest) / Math.sqrt(3);
}

const STANDS_STILL = 0.02; // of the swing: less than this from the first place is no motion yet

/**
 * The record without the time before anything moves, which no sine and no transient describes. A motion that begins at
 * its turning point loses a few frames, which costs nothing.
 */
function fromOnset(record: MotionRecord): readonly [number, number] {
  const { timesS, displacementMm } = record;
  const seen = displacementMm.filter(Number.isFinite);
  const swing =
    seen.reduce((most, value) => Math.max(most, value), -Infinity) -
    seen.reduce((least, value) => Math.min(least, value), Infinity);
  const first = seen[0] ?? 0;
  const moved = displacementMm.findIndex((value) => Math.abs(value - first) > STANDS_STILL * swing);
  return [timesS[Math.max(0, moved - 1)] ?? 0, timesS.at(-1) ?? 0];
}

/** Judges the dwell in the window given, or finds its steady window, and fits it. */
export function judgeClipDwell(clip: EvaluatedClip, spec: DwellSpec): JudgedDwell | UnjudgedDwell {
  const moving = fromOnset(clip.response);
  const part = (record: MotionRecord): MotionRecord => (spec.window ? record : inWindow(record, moving));
  const judgement = judgeDwell(part(clip.response), {
    driveHz: spec.driveHz ?? null,
    ...(spec.window ? { window: spec.window } : {}),
    ...(clip.drive ? { driveRecord: part(clip.drive) } : {}),
  });
  const { frequencyHz, windowS, verdict, lostFrames, sentence } = judgement;
  const sine = steadySine(judgement);
  if (!sine || frequencyHz === null || windowS === null) return { error: sentence, verdict, lostFrames };
  const { joint } = sine;
  const steady = joint !== null || verdict === 'steady';
  return {
    ...sine,
    frequencyHz,
    measuredHz: measured(
      judgement.freeFit?.frequencyHz ?? frequencyHz,
      judgement.freeFit?.frequencyU ?? null,
    ),
    window: joint ? [joint.originS, joint.endS] : windowS,
    lostFrames,
    verdict,
    sentence,
    leftover: judgement.leftover.value,
    leftoverU: joint ? 0 : rectangularU((judgement.leftoverEffect ?? 0) * sine.amplitudeMm),
    driftU: steady ? 0 : rectangularU(((judgement.drift.value ?? 0) / 2) * sine.amplitudeMm),
    jointFit: joint !== null,
    transient: joint ? { naturalHz: joint.naturalHz, dampingRatio: joint.dampingRatio } : null,
    harmonics: judgement.harmonics.map((each) => each.value ?? 0),
    warnings: judgement.warnings.map((warning) => warning.sentence),
  };
}
