import type { Measured } from '../numeric/measured.ts';
import type { LagFit } from '../sine/lag.ts';
import type { SineFit } from '../sine/sine-fit.ts';
import type { JointFit } from './joint-fit.ts';
import type { MotionRecord } from './motion-record.ts';

/** How a dwell is to be judged. */
export interface JudgeOptions {
  /** What the exciter was set to, Hz; null where it is not known and must be measured. */
  readonly driveHz: number | null;
  /** Judge this part of the record, seconds; found where absent. */
  readonly window?: readonly [number, number];
  /** The exciter's own motion at the same times, for the lag and the drive's true frequency. */
  readonly driveRecord?: MotionRecord;
}

/**
 * What a dwell's motion is: `steady`; `settling`, the start-up transient still there; `beating`, amplitude swelling
 * and shrinking; `drifting`, a change that is neither; `lost`, the marker not seen often enough; `failed`, nothing
 * could be measured, for the reason in the sentence.
 */
export type Verdict = 'steady' | 'settling' | 'beating' | 'drifting' | 'lost' | 'failed';

/** Kinds of things worth telling beside the verdict. */
export type WarningCode =
  | 'leftover'
  | 'frequency-differs'
  | 'other-tone'
  | 'harmonics'
  | 'few-periods'
  | 'lost-frames'
  | 'phase-gap'
  | 'slow-drift'
  | 'joint-fit-ill-conditioned';

/** A warning for the engineer: `code` for programs, `sentence` for people. */
export interface MotionWarning {
  readonly code: WarningCode;
  readonly sentence: string;
}

/** Steady amplitude (mm zero to peak), and where the drive was seen its lag (degrees) and gain. */
export interface BestValues {
  /**
   * `window` where the dwell is steady; `joint-fit` where it is not, but steady motion and transient could be told
   * apart; `unsteady-window` where all there is is a sine through motion that is not steady; null without any.
   */
  readonly source: 'window' | 'joint-fit' | 'unsteady-window' | null;
  readonly amplitude: Measured;
  readonly lagDeg: Measured;
  /** Response amplitude over drive amplitude. */
  readonly gain: Measured;
  /** Degrees of freedom of these uncertainties, for Student's t; null without values. */
  readonly effectiveDof: number | null;
}

/** The judgement of one dwell. Amplitudes in mm zero to peak, times in s of the record. */
export interface DwellJudgement {
  readonly verdict: Verdict;
  /** What the engineer should know or do, one or two plain sentences. */
  readonly sentence: string;
  /** The steady window, or the window judged where none is steady; null where nothing was judged. */
  readonly windowS: readonly [number, number] | null;
  /** Frames with a displacement inside the window. */
  readonly frames: number;
  /** Frames inside the window (the whole record without one) in which the marker was lost. */
  readonly lostFrames: number;
  /** Frequency the amplitude was taken at, Hz: the drive frequency, or the measured one where they differ. */
  readonly frequencyHz: number | null;
  /**
   * Sine fit at `frequencyHz` over the window. In a steady window what little is left of a transient that the joint
   * fit knows was taken out before.
   */
  readonly fit: SineFit | null;
  /** Sine fit with the frequency free over the window: the measured frequency. */
  readonly freeFit: SineFit | null;
  /** Steady motion and transient fitted together over the whole record judged, where a transient was found. */
  readonly jointFit: JointFit | null;
  /** Response against drive over the window, where there is a drive record; the response as for `fit`. */
  readonly lag: LagFit | null;
  /** The values to go on with, and what they rest on. */
  readonly best: BestValues;
  /** Start-up transient over steady amplitude at the window's start, as a fraction. */
  readonly leftover: Measured;
  /**
   * Largest share by which the leftover can still have moved the amplitude of `fit`, what was taken out allowed for;
   * null where it is not known.
   */
  readonly leftoverEffect: number | null;
  /** Change of the amplitude over the window as a fraction of it. */
  readonly drift: Measured;
  /** Harmonics 2 to 5 over the fundamental. */
  readonly harmonics: readonly Measured[];
  /** Seconds to wait beyond the end of the record until the leftover is 1 %; null where that is not known. */
  readonly waitS: number | null;
  readonly warnings: readonly MotionWarning[];
}
