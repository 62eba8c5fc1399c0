/** Every caution that camera physics or scaling can raise; hosts may group or hide by code, never by sentence. */
export type WarningCode =
  | 'alias-folded'
  | 'alias-refused'
  | 'alias-unknown'
  | 'axis-disagrees'
  | 'axis-not-straight'
  | 'axis-uncertain'
  | 'below-floor'
  | 'codec-limited'
  | 'exposure-long'
  | 'exposure-too-long'
  | 'exposure-unknown'
  | 'few-frames'
  | 'frequency-mismatch'
  | 'harmonic-folded'
  | 'marker-smeared'
  | 'parallax-large'
  | 'plane-residual'
  | 'rolling-shutter-strong'
  | 'rolling-shutter-unknown'
  | 'scale-short'
  | 'shake-not-removed'
  | 'slow-motion-likely'
  | 'stamps-coarse'
  | 'stamps-irregular'
  | 'tilt-large';

/** A caution: `sentence` says what was found and what to do about it, for the engineer at the bench. */
export interface Warning {
  readonly code: WarningCode;
  readonly sentence: string;
}

/** A factor to multiply a seen amplitude by, to get nearer the true one, with its standard uncertainty (k = 1). */
export interface KnownCorrection {
  readonly factor: number;
  readonly u: number;
  readonly warning: Warning | null;
}

/** No honest factor exists; the warning says why. */
export interface RefusedCorrection {
  readonly factor: null;
  readonly u: null;
  readonly warning: Warning;
}

/** What one effect of filming asks for. */
export type Correction = KnownCorrection | RefusedCorrection;
