import type { Measured } from '../numeric/measured.ts';
import type { ResonanceModel } from '../resonance/models.ts';
import type { CameraAdvice, CameraKnowledge } from './camera-advice.ts';
import type { Caution, CautionSituation } from './cautions.ts';
import type { DesignGoal } from './design-criterion.ts';
import type { NextDwell } from './next-dwell.ts';
import type { PlanTargets } from './next-dwell-gain.ts';
import type { Observed, PlanFit, PlanPoint } from './plan-points.ts';
import type { PredictedAmplitude } from './predicted-amplitude.ts';
import type { DampingGuess, FrequencySource } from './starting-knowledge.ts';
import type { SweepAdvice } from './sweep-rate.ts';
import type { TravelVerdict } from './travel-limit.ts';

/**
 * What a plan for one configuration is made from. Everything but the model may be missing; what is missing is
 * assumed and said, or stops the plan with a sentence. Plain JSON. Lengths in mm, times in s, frequencies in Hz.
 */
export interface PlanInput {
  readonly model: ResonanceModel;
  /** First guess of the natural frequency; not needed once there is a fit. */
  readonly start?: FrequencySource | null;
  readonly damping?: DampingGuess | null;
  /** Static gain, mm: static deflection, base amplitude, or what the model's gain is. */
  readonly gainMm?: Measured | null;
  /** Dwells measured so far that count (none excluded); those without an amplitude above 0 teach nothing. */
  readonly points?: readonly PlanPoint[];
  /** Resonance fit of these points, where there is one. */
  readonly fit?: PlanFit | null;
  /** Drive frequencies planned by hand and not yet measured; null or left out: the plan chooses them. */
  readonly plannedHz?: readonly number[] | null;
  /** Displacement from rest that must not be passed. */
  readonly travelLimitMm?: number | null;
  /** Smallest step of the generator. */
  readonly resolutionHz?: number | null;
  /** Dwells in all, measured ones among them; 9 where left out. */
  readonly dwells?: number;
  /** Leftover of the transient wanted when filming starts, a fraction of the amplitude; 0.01 where left out. */
  readonly leftover?: number;
  /** Relative standard uncertainty wanted of each amplitude; 0.01 where left out. */
  readonly amplitudeRelativeU?: number;
  /** What is observed at each dwell; the amplitude alone where left out. */
  readonly observed?: Observed;
  readonly goal?: DesignGoal;
  readonly targets?: PlanTargets;
  readonly camera?: CameraKnowledge;
  /** Seconds between dwells for setting the generator and the camera; 20 where left out. */
  readonly handlingS?: number;
  /** What else about the rig calls for a caution, such as magnets or added masses. */
  readonly situations?: readonly CautionSituation[];
}

/** One step of the run sheet. */
export interface PlanRow {
  readonly driveHz: number;
  /** Wait after setting the drive, until the leftover is what is wanted. */
  readonly waitS: number;
  /** Period of the beat between drive and dying free motion; null where the two are in tune. */
  readonly beatPeriodS: number | null;
  /** Film this long; a whole number of drive periods. */
  readonly filmS: number;
  readonly frames: number;
  /** Null where nothing tells the size of the motion. */
  readonly predictedAmplitudeMm: PredictedAmplitude | null;
  /** Most likely amplitude in px at the advised or given scale; null where not known. */
  readonly predictedAmplitudePx: number | null;
  /** True where the step must not be run because it may pass the travel limit. */
  readonly aboveLimit: boolean;
  readonly travel: TravelVerdict;
  /** True at the first step that leads up toward the peak: show the cautions before it. */
  readonly cautionsHere: boolean;
  readonly advice: readonly string[];
}

/** Time on the rig, s. Steps that are refused count nothing. */
export interface PlanTotals {
  readonly dwells: number;
  readonly waitS: number;
  readonly filmS: number;
  readonly handlingS: number;
  readonly benchS: number;
}

/** The plan of one configuration. Plain JSON; numbers that cannot be known are null. */
export interface Plan {
  /** Why there are no rows, or null. */
  readonly reason: string | null;
  /** Natural frequency (Hz) and damping ratio that the plan reckons with, and their spreads. */
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
  readonly rows: readonly PlanRow[];
  readonly totals: PlanTotals;
  /** Relative standard uncertainties that the rows promise; null where they cannot be told. */
  readonly promised: { readonly naturalHz: number; readonly dampingRatio: number } | null;
  readonly next: NextDwell | null;
  readonly camera: CameraAdvice | null;
  readonly sweep: SweepAdvice | null;
  readonly cautions: readonly Caution[];
  /** What was assumed, is missing, or needs attention, one sentence each. */
  readonly warnings: readonly string[];
}
