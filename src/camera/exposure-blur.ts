import type { Correction, KnownCorrection, Warning } from '../numeric/warning.ts';

/** Relative standard uncertainty of a stated exposure: nominal shutter times are rounded by up to 3 % (rectangular). */
export const DEFAULT_EXPOSURE_REL_U = 0.017;

/** Fraction of a period beyond which the correction is refused: the seen motion is under 30 % and falls to nothing at 1. */
const REFUSED_FRACTION = 0.75;

/** Fraction of a period beyond which the engineer is told to shorten the exposure. */
const LONG_FRACTION = 0.34;

/** Possible amplitude error of an unknown exposure below which nothing is said. */
const NEGLIGIBLE_LOSS = 0.01;

/**
 * Seen over true amplitude of a sine averaged over the exposure: sin(pi f Te) / (pi f Te). Negative beyond a
 * whole period, where the picture moves against the part. The phase is that of the middle of the exposure.
 */
export function exposureAttenuation(frequencyHz: number, exposureS: number): number {
  const x = Math.PI * frequencyHz * exposureS;
  return Math.abs(x) < 1e-8 ? 1 : Math.sin(x) / x;
}

/** Lag that appears when a frame is stamped at the start of its exposure instead of its middle, degrees: 180 f Te. Cancels between two markers of one frame. */
export function exposureStampLagDeg(frequencyHz: number, exposureS: number): number {
  return 180 * frequencyHz * exposureS;
}

/**
 * Correction for a known exposure: factor 1 / sinc(f Te); u from the exposure's own uncertainty,
 * u(factor) / factor = |1 - pi f Te cot(pi f Te)| u(Te) / Te. Refused beyond three quarters of a period.
 *
 * @param exposureUS standard uncertainty of the exposure, s; null: `DEFAULT_EXPOSURE_REL_U` of it
 */
export function exposureCorrection(
  frequencyHz: number,
  exposureS: number,
  exposureUS: number | null = null,
): Correction {
  if (!(frequencyHz >= 0 && exposureS >= 0)) throw new Error('frequency and exposure must be 0 or more');
  const fraction = frequencyHz * exposureS;
  if (fraction > REFUSED_FRACTION) return { factor: null, u: null, warning: tooLong(frequencyHz, fraction) };
  const factor = 1 / exposureAttenuation(frequencyHz, exposureS);
  const relExposureU = exposureS === 0 ? 0 : (exposureUS ?? DEFAULT_EXPOSURE_REL_U * exposureS) / exposureS;
  const x = Math.PI * fraction;
  const slope = x < 1e-4 ? (x * x) / 3 : 1 - x / Math.tan(x);
  return {
    factor,
    u: factor * Math.abs(slope) * relExposureU,
    warning: fraction > LONG_FRACTION ? long(frequencyHz, fraction, factor) : null,
  };
}

/**
 * What an exposure that nobody stated could cost: it is at most the frame interval, so the true amplitude lies
 * between the seen one and 1 / sinc(f T) of it. Nothing is corrected (factor 1); u is the root mean square
 * of a loss anywhere in between, (1 / sinc(f T) - 1) / sqrt(3), so that 2 u covers the whole range. An
 * exposure beyond three quarters of a period would leave no marker to follow, so the range ends there: the
 * amplitude is then little more than a lower bound, but the resonance can still be fitted, since every
 * dwell of the setup is smeared nearly alike.
 */
export function unknownExposure(frequencyHz: number, frameIntervalS: number): KnownCorrection {
  if (!(frequencyHz >= 0 && frameIntervalS > 0))
    throw new Error('frequency and frame interval must be positive');
  const longestS = Math.min(frameIntervalS, REFUSED_FRACTION / Math.max(frequencyHz, Number.MIN_VALUE));
  const loss = 1 / exposureAttenuation(frequencyHz, longestS) - 1;
  return { factor: 1, u: loss / Math.sqrt(3), warning: loss > NEGLIGIBLE_LOSS ? unknown(loss) : null };
}

function percent(fraction: number): string {
  return `${(100 * fraction).toPrecision(2)} %`;
}

/** Shutter to ask for: a tenth of a period, as 1/n s with a round n. */
function shutterFor(frequencyHz: number): string {
  const rates = [30, 60, 125, 250, 500, 1000, 2000, 4000, 8000];
  return `1/${rates.find((rate) => rate >= 10 * frequencyHz) ?? 8000} s`;
}

function tooLong(frequencyHz: number, fraction: number): Warning {
  return {
    code: 'exposure-too-long',
    sentence:
      `The exposure lasts ${fraction.toFixed(2)} of a drive period, so the motion is smeared away and cannot be corrected; ` +
      `film with a shutter of ${shutterFor(frequencyHz)} or shorter and more light.`,
  };
}

function long(frequencyHz: number, fraction: number, factor: number): Warning {
  return {
    code: 'exposure-long',
    sentence:
      `The exposure lasts ${fraction.toFixed(2)} of a drive period; the amplitude is corrected by ${percent(factor - 1)}, ` +
      `but a shutter of ${shutterFor(frequencyHz)} would leave less to correct.`,
  };
}

function unknown(loss: number): Warning {
  return {
    code: 'exposure-unknown',
    sentence:
      `The exposure is not stated, and the amplitude could be up to ${percent(loss)} larger than seen; state the clip's ` +
      'exposure, or film with a faster shutter.',
  };
}
