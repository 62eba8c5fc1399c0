import { type Measured, measured } from '../numeric/measured.ts';
import { fitSine } from '../sine/four-parameter.ts';
import type { DwellSpec } from '../testfile/schema.ts';
import { inWindow, sineInWindow } from './dwell-at-frequency.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import type { Verdict } from './results.ts';

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

/** Judges the dwell in its window, or finds one. */
export function judgeClipDwell(clip: EvaluatedClip, spec: DwellSpec): JudgedDwell | UnjudgedDwell {
  const { timesS } = clip.response;
  const window: readonly [number, number] = spec.window ?? [timesS[0] ?? 0, timesS.at(-1) ?? 0];
  const part = inWindow(clip.response, window);
  const lostFrames = part.displacementMm.filter((value) => !Number.isFinite(value)).length;
  const free = fitSine(
    part.timesS,
    part.displacementMm,
    spec.driveHz === undefined ? {} : { startHz: spec.driveHz },
  );
  const frequencyHz = spec.driveHz ?? free?.frequencyHz ?? 0;
  const sine = sineInWindow(clip.response, window, frequencyHz);
  if (!sine) return { error: 'too little', verdict: 'failed', lostFrames };
  return {
    frequencyHz,
    measuredHz: measured(free?.frequencyHz ?? null, free?.frequencyU ?? null),
    amplitudeMm: sine.amplitude,
    amplitudeU: sine.amplitudeU,
    dof: sine.dof,
    phaseRad: sine.phaseRad,
    phaseU: sine.phaseU,
    residualRmsMm: sine.residualRms,
    window,
    lostFrames,
    verdict: 'steady',
    sentence: '',
    leftover: null,
    leftoverU: 0,
    driftU: 0,
    jointFit: false,
    transient: null,
    harmonics: [],
    warnings: [],
  };
}
