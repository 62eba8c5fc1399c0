import type { StopReason } from '../numeric/least-squares-problem.ts';
import type { Measured } from '../numeric/measured.ts';
import type { ProfileInterval } from '../numeric/profile-interval.ts';
import type { DerivedQuantities } from './derived.ts';
import type { LackOfFit } from './lack-of-fit.ts';
import type { ResonanceModel } from './models.ts';
import type { ParameterLayout, ParameterName } from './parameter-layout.ts';
import type { FitMode } from './resonance-points.ts';
import type { ScatterJudgement } from './scatter-judgement.ts';

/** One given point beside the fitted curve. */
export interface FittedPoint {
  readonly name: string;
  readonly driveHz: number;
  /** False where the point was excluded or lacks what the mode needs. */
  readonly used: boolean;
  /** Amplitude and lag (degrees) of the curve at the point's drive frequency; null where there is no curve. */
  readonly amplitude: number | null;
  readonly lagDeg: number | null;
  /** Observed minus curve over the standard uncertainty used; null where the row was not used. */
  readonly amplitudeResidual: number | null;
  readonly lagResidual: number | null;
  /** Least robust weight of the point's rows in (0, 1]; 1 without the robust option; 0 where not used. */
  readonly weight: number;
}

/** A dwell that the robust option plays down. */
export interface PlayedDownPoint {
  readonly name: string;
  readonly weight: number;
}

/** A resonance fit with everything needed to judge it. Where `missing` is a sentence, all numbers are null. */
export interface ResonanceFit {
  readonly model: ResonanceModel;
  readonly mode: FitMode;
  readonly amplitudeUnit: 'mm' | 'gain';
  /** The formula fitted, and what it stands for in words. */
  readonly formula: string;
  readonly description: string;
  /** What is missing for a fit, as a sentence that says what to run; null where the numbers hold. */
  readonly missing: string | null;
  /** Points used, residuals minus parameters, and how the solver ended. */
  readonly pointCount: number;
  readonly dof: number | null;
  readonly iterations: number;
  readonly stopReason: StopReason | null;
  /** The free parameters: names and places, values in that order with their independent uncertainty. */
  readonly layout: ParameterLayout;
  readonly parameterNames: readonly ParameterName[];
  readonly parameters: readonly Measured[];
  /** Covariance of the free parameters by what is independent from dwell to dwell, row-major; null where unknown. */
  readonly covariance: Float64Array | null;
  /** Correlation of the free parameters, one array per row; empty where unknown. */
  readonly correlation: readonly (readonly number[])[];
  /** Natural frequency, damping and what follows from them. */
  readonly quantities: DerivedQuantities;
  /** Coverage of the intervals and the factor k that gives it on a standard uncertainty; k null where unknown. */
  readonly confidence: number;
  readonly coverageFactor: number | null;
  /** Profile-likelihood intervals; null where not asked for or not to be had. */
  readonly intervals: {
    readonly staticGain: ProfileInterval | null;
    readonly naturalHz: ProfileInterval | null;
    /** Damping ratio (viscous) or loss factor (structural). */
    readonly damping: ProfileInterval | null;
  };
  /** How the scatter was judged; null where nothing was fitted. */
  readonly scatter: ScatterJudgement | null;
  /** Sum of squared residuals over own uncertainties, null where the dwells brought none. */
  readonly chi2: number | null;
  readonly aicc: number | null;
  readonly lackOfFit: LackOfFit | null;
  readonly points: readonly FittedPoint[];
  readonly playedDown: readonly PlayedDownPoint[];
  readonly warnings: readonly string[];
}
