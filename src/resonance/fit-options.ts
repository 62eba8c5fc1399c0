import type { Damping, Excitation } from './models.ts';
import type { FitMode } from './resonance-points.ts';

/** What to fit and how; only the excitation must be stated, because no data can tell it reliably. */
export interface ResonanceFitOptions {
  readonly excitation: Excitation;
  /** Default `viscous`. */
  readonly damping?: Damping;
  /** Default: `complex` where two or more dwells have a lag, else `amplitude`. */
  readonly mode?: FitMode;
  /** Amplitudes are `mm` (default) or the `gain` response over drive. */
  readonly amplitudeUnit?: 'mm' | 'gain';
  /** Adds a complex constant to the response: crosstalk, a rigid motion seen with the part's own. Default false. */
  readonly rigidOffset?: boolean;
  /** Adds a complex term that grows evenly with frequency, for what other modes leave in the band. Default false. */
  readonly slowResidual?: boolean;
  /** Huber's weights: outlying dwells are played down and named. Default false. */
  readonly robust?: boolean;
  /**
   * `auto` (default): the points' own uncertainties hold unless they are too small for the scatter, then all are
   * widened alike; `absolute`: they always hold; `scatter`: only their ratios hold, the size comes from the scatter.
   */
  readonly weighting?: 'auto' | 'absolute' | 'scatter';
  /** Relative standard uncertainty common to all amplitudes (scale, axis). Default 0. */
  readonly commonRelativeU?: number;
  /** Moving mass in kg with its standard uncertainty, for stiffness and damping constant. */
  readonly movingMassKg?: { readonly value: number; readonly u: number | null };
  /** Coverage of the intervals, in (0, 1). Default 0.95. */
  readonly confidence?: number;
  /** Profile-likelihood intervals. Default true. */
  readonly intervals?: boolean;
}
