import type { Verdict } from '../motion/dwell-judgement.ts';
import type { Measured } from '../numeric/measured.ts';

/**
 * The results of a test: what `results.json` holds, and what every screen, table and report is made from.
 * Lengths in mm, frequencies in Hz, angles in degrees, times in s. Amplitudes are zero-to-peak of the fundamental.
 */

/** The format name in results.json. */
export const RESULTS_FORMAT = 'dwellbook-results';
/** The version of that format. */
export const RESULTS_VERSION = 1;

/** One source of a dwell's uncertainty. */
export interface BudgetLine {
  readonly source: string;
  /** Standard uncertainty in mm. */
  readonly u: number;
  /** True where the error is the same for every dwell of the camera setup (scale). */
  readonly common: boolean;
}

/** What a clip is and how its markers fared. */
export interface ClipResult {
  readonly id: string;
  readonly file: string;
  readonly frames: number;
  readonly duration: number;
  readonly codec: string;
  readonly width: number;
  readonly height: number;
  /** Measured frame rate in true time, frames/s; null where it cannot be told. */
  readonly frameRate: number | null;
  readonly sha256: string | null;
  readonly markers: readonly MarkerResult[];
  readonly warnings: readonly string[];
  readonly error: string | null;
}

/** How well a marker was followed through a clip. */
export interface MarkerResult {
  readonly id: string;
  readonly role: 'response' | 'drive' | 'ground';
  readonly lostFrames: number;
  readonly doubtfulFrames: number;
  readonly medianScore: number | null;
  /** Expected standard uncertainty of one frame's position, px. */
  readonly expectedUPx: number | null;
}

/** One dwell: what was measured, how sure it is, and what to do about it. */
export interface DwellResult {
  readonly configuration: string;
  readonly id: string;
  readonly clip: string | null;
  readonly driveHz: number | null;
  readonly frequency: Measured;
  readonly amplitude: Measured;
  readonly lag: Measured;
  readonly driveAmplitude: Measured;
  readonly gain: Measured;
  /** Expanded uncertainty of the amplitude at 95 %, mm, and its coverage factor. */
  readonly amplitudeU95: number | null;
  readonly lagU95: number | null;
  readonly coverageFactor: number | null;
  /** Uncertainty of the amplitude that is not shared with other dwells, mm: the weight in a resonance fit. */
  readonly independentU: number | null;
  readonly amplitudePx: number | null;
  /** Smallest amplitude that could be told from noise in this clip, mm; null where nothing at rest is in view. */
  readonly noiseFloor: number | null;
  readonly window: readonly [number, number] | null;
  readonly frames: number;
  readonly lostFrames: number;
  readonly verdict: Verdict;
  /** What the verdict means for the engineer, one sentence. */
  readonly sentence: string;
  readonly leftover: number | null;
  /** True where the steady amplitude was told apart from the transient by the joint fit. */
  readonly jointFit: boolean;
  readonly transient: { readonly naturalHz: Measured; readonly dampingRatio: Measured } | null;
  readonly harmonics: readonly number[];
  readonly budget: readonly BudgetLine[];
  readonly excluded: string | null;
  readonly typed: boolean;
  readonly codecLimited: boolean;
  readonly warnings: readonly string[];
  readonly error: string | null;
}

/** One free decay. */
export interface RingDownResult {
  readonly configuration: string;
  readonly id: string;
  readonly clip: string;
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
  /** Swing at the start of the window, mm zero-to-peak. */
  readonly amplitude: Measured;
  /** Whether damping depends on the swing. */
  readonly envelope: 'viscous' | 'friction' | 'growing-with-amplitude' | 'unknown';
  readonly window: readonly [number, number] | null;
  readonly frames: number;
  readonly sentence: string;
  readonly warnings: readonly string[];
  readonly error: string | null;
}

/** The resonance of one configuration. */
export interface ResonanceResult {
  readonly configuration: string;
  readonly model: string;
  readonly damping: 'viscous' | 'structural';
  /** The model in plain signs. */
  readonly formula: string;
  /** What was fitted: amplitude alone, lag alone, or both together. */
  readonly quantity: 'amplitude' | 'lag' | 'amplitude and lag';
  readonly points: number;
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
  readonly q: Measured;
  readonly peakHz: Measured;
  readonly peakAmplitude: Measured;
  readonly bandwidthHz: Measured;
  readonly staticGain: Measured;
  readonly lossFactor: Measured;
  readonly logDecrement: Measured;
  /** Half-power points, Hz, and the usual approximation of the bandwidth, 2 zeta fn. */
  readonly lowerHalfPowerHz: Measured;
  readonly upperHalfPowerHz: Measured;
  readonly classicBandwidthHz: Measured;
  /** Unit of staticGain and peakAmplitude: mm, or 1 where the drive amplitude is known. */
  readonly gainUnit: 'mm' | '1';
  readonly stiffness: Measured;
  readonly dampingCoefficient: Measured;
  /** Profile-likelihood intervals at the stated coverage; a side is null where the data do not bound it. */
  readonly intervals: ResonanceIntervals;
  readonly coverage: number;
  readonly coverageFactor: number | null;
  /** Of static gain, natural frequency, damping ratio, in that order; null where nothing was fitted. */
  readonly correlation: readonly (readonly number[])[] | null;
  readonly chi2: number | null;
  readonly dof: number | null;
  readonly aicc: number | null;
  readonly opinions: SecondOpinions | null;
  /** Each dwell beside the curve. */
  readonly fitted: readonly FittedDwell[];
  readonly notes: readonly string[];
  readonly warnings: readonly string[];
  readonly error: string | null;
}

/** What other readings of the same dwells say beside the fit; each sentence is for the engineer. */
export interface SecondOpinions {
  /** From the circle plot; null where no lag is known. */
  readonly circle: {
    readonly naturalHz: Measured;
    readonly dampingRatio: Measured;
    /** True where it differs from the fit beyond uncertainty; null where that cannot be told. */
    readonly disagrees: boolean | null;
    readonly sentence: string;
  } | null;
  /** Read off the dwells by interpolation. */
  readonly halfPower: {
    readonly peakHz: Measured;
    readonly lowerHz: Measured;
    readonly upperHz: Measured;
    readonly bandwidthHz: Measured;
    readonly naturalHz: Measured;
    readonly dampingRatio: Measured;
    /** What is missing; null where all was read. */
    readonly missing: string | null;
  };
  /** Other models of the same dwells, ranked by the corrected Akaike criterion. */
  readonly models: {
    readonly sentence: string;
    readonly ranking: readonly {
      readonly model: string;
      readonly delta: number | null;
      readonly weight: number | null;
    }[];
  };
  readonly nonlinearity: { readonly noticed: boolean | null; readonly sentences: readonly string[] };
  /** Velocity and acceleration at the peak; not measured where the fit is in gain. */
  readonly peakVelocityMmPerS: Measured;
  readonly peakAccelerationMPerS2: Measured;
  readonly peakAccelerationG: Measured;
}

/** Lower and upper ends, or null where there is no interval. */
export type Interval = readonly [number | null, number | null];

/** Intervals of the fitted parameters. */
export interface ResonanceIntervals {
  readonly naturalHz: Interval | null;
  readonly dampingRatio: Interval | null;
  readonly staticGain: Interval | null;
}

/** One dwell beside the fitted curve. */
export interface FittedDwell {
  readonly dwell: string;
  readonly driveHz: number;
  readonly used: boolean;
  /** Curve at the drive frequency: amplitude in `gainUnit`, lag in degrees. */
  readonly amplitude: number | null;
  readonly lagDeg: number | null;
  /** Measured minus curve over the standard uncertainty. */
  readonly amplitudeResidual: number | null;
  readonly lagResidual: number | null;
}

/** Everything that was found out about a test. */
export interface Results {
  readonly format: typeof RESULTS_FORMAT;
  readonly version: typeof RESULTS_VERSION;
  readonly program: string;
  readonly test: string;
  readonly clips: readonly ClipResult[];
  readonly dwells: readonly DwellResult[];
  readonly ringdowns: readonly RingDownResult[];
  readonly resonances: readonly ResonanceResult[];
}
