import { durationS, type Samples } from './samples.ts';
import { whittleLevel } from './whittle-level.ts';

/** A fitted linear (or linearised) model: what it took out of the residuals. */
export interface FittedDesign {
  /** Row-major, samples x columns. */
  readonly design: Float64Array;
  readonly columns: number;
  /** (D'D)^-1, row-major, columns x columns. */
  readonly unscaledCovariance: Float64Array;
}

/** Noise around one frequency, told as the variance per frame that white noise of the same level would have. */
export interface LocalNoise {
  readonly variance: number;
  /** Degrees of freedom of that estimate, for Student's t. */
  readonly effectiveDof: number;
}

/** One ordinate of the residual spectrum, scaled so that white noise of variance 1 gives a mean power of 1. */
interface Ordinate {
  readonly frequencyHz: number;
  readonly real: number;
  readonly imaginary: number;
  /** Share of the frequency's energy that the fit did not take out, 0 to 1. */
  readonly share: number;
}

// A frequency the fit took out by more than this tells nothing about the noise there.
const LEAST_SHARE_LEFT = 0.5;
const MOST_ORDINATES = 24;
const FEWEST_ORDINATES = 4;
// The farthest ordinate lies at this share of the kernel's reach.
const KERNEL_REACH = 1.15;

function ordinateAt(
  samples: Samples,
  residuals: Float64Array,
  fitted: FittedDesign,
  frequencyHz: number,
): Ordinate {
  const { design, columns, unscaledCovariance } = fitted;
  const n = residuals.length;
  const alongCos = new Float64Array(columns);
  const alongSin = new Float64Array(columns);
  let real = 0;
  let imaginary = 0;
  for (let i = 0; i < n; i++) {
    const angle = 2 * Math.PI * frequencyHz * samples.timesS[i]!;
    const cos = Math.cos(angle);
    const sin = Math.sin(angle);
    real += cos * residuals[i]!;
    imaginary -= sin * residuals[i]!;
    for (let k = 0; k < columns; k++) {
      const value = design[i * columns + k]!;
      alongCos[k]! += cos * value;
      alongSin[k]! += sin * value;
    }
  }
  let taken = 0;
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < columns; b++) {
      const weight = unscaledCovariance[a * columns + b]!;
      taken += weight * (alongCos[a]! * alongCos[b]! + alongSin[a]! * alongSin[b]!);
    }
  }
  const left = Math.max(n - taken, 1e-9 * n);
  const scale = 1 / Math.sqrt(left);
  return {
    frequencyHz,
    real: real * scale,
    imaginary: imaginary * scale,
    share: left / n,
  };
}

/** Frequencies a whole number of 1/duration away from `centreHz`, nearest first, not folded back by sampling. */
function neighbours(samples: Samples, centreHz: number): number[] {
  const duration = durationS(samples);
  const nyquistHz = samples.timesS.length / (2 * duration);
  const zone = Math.floor(centreHz / nyquistHz);
  const lowest = zone * nyquistHz + 0.5 / duration;
  const highest = (zone + 1) * nyquistHz - 0.25 / duration;
  const found: number[] = [];
  const reach = Math.ceil(nyquistHz * duration) + 1;
  const wanted = Math.min(MOST_ORDINATES, Math.max(8, Math.round(samples.timesS.length / 8)));
  for (let k = 1; k <= reach && found.length < wanted; k++) {
    for (const frequencyHz of [centreHz - k / duration, centreHz + k / duration]) {
      if (frequencyHz < lowest || frequencyHz > highest) continue;
      // what the motion does at twice or three times the drive frequency is not noise at the drive frequency
      const multiple = centreHz > 0 ? Math.round(frequencyHz / centreHz) : 0;
      const harmonic = multiple >= 2 && Math.abs(frequencyHz - multiple * centreHz) < 0.5 / duration;
      if (!harmonic) found.push(frequencyHz);
    }
  }
  return found;
}

/** The usable ordinates around a frequency; null where there are too few. */
function ordinatesAround(
  samples: Samples,
  residuals: Float64Array,
  fitted: FittedDesign,
  frequencyHz: number,
): readonly Ordinate[] | null {
  if (samples.timesS.length <= fitted.columns + FEWEST_ORDINATES) return null;
  const ordinates = neighbours(samples, frequencyHz)
    .map((frequency) => ordinateAt(samples, residuals, fitted, frequency))
    .filter(({ share }) => share >= LEAST_SHARE_LEFT);
  return ordinates.length < FEWEST_ORDINATES ? null : ordinates;
}

/** Level at the frequency itself, from ordinates beside it: near ones count most, so that a bend does little. */
function levelAt(ordinates: readonly Ordinate[], powers: Float64Array, frequencyHz: number): LocalNoise {
  const distances = ordinates.map((o) => Math.abs(o.frequencyHz - frequencyHz));
  const reach = KERNEL_REACH * Math.max(...distances);
  const { level, effectiveDof } = whittleLevel(
    ordinates.map((ordinate, k) => ({
      x: frequencyHz > 0 ? Math.log(ordinate.frequencyHz / frequencyHz) : 0,
      power: powers[k]!,
      weight: ordinate.share * (1 - (distances[k]! / reach) ** 2),
    })),
  );
  return { variance: level, effectiveDof };
}

/**
 * Noise level of a fit's residuals around one frequency, from the residual spectrum beside it: what decides the
 * uncertainty of an amplitude at that frequency, whether the noise is white, correlated or drifting. Each ordinate
 * is corrected for what the fit took out; the level at the frequency itself comes from a line through the logarithm
 * of the spectrum. At frequency 0 the lowest ordinates are averaged.
 *
 * @param frequencyHz 0 or positive; may lie above half the frame rate (its neighbours alias as it does)
 * @returns null where fewer than four ordinates can be used
 * Source: large-sample theory of sinusoids in correlated noise, variance 2 S(w)/N (Montgomery and O'Donoghue,
 * Delta Scuti Newsletter 13 (1999) 28).
 */
export function localNoise(
  samples: Samples,
  residuals: Float64Array,
  fitted: FittedDesign,
  frequencyHz: number,
): LocalNoise | null {
  const ordinates = ordinatesAround(samples, residuals, fitted, frequencyHz);
  if (ordinates === null) return null;
  const powers = Float64Array.from(ordinates, ({ real, imaginary }) => real ** 2 + imaginary ** 2);
  return levelAt(ordinates, powers, frequencyHz);
}

/** A complex amplitude: y = Re((real + i imaginary) exp(i 2 pi f t)). */
export interface Phasor {
  readonly real: number;
  readonly imaginary: number;
}

/**
 * Relative noise between two records around one frequency: the spectrum of R/Zr - S/Zs for residuals R and S of sine
 * fits with complex amplitudes Zr and Zs. Noise common to both, such as camera shake, cancels or adds as it does in
 * their ratio: variances of log gain and of lag are both 2/frames times this variance.
 *
 * @returns null where fewer than four ordinates can be used
 */
export function relativeNoise(
  samples: Samples,
  first: { readonly residuals: Float64Array; readonly phasor: Phasor },
  second: { readonly residuals: Float64Array; readonly phasor: Phasor },
  fitted: FittedDesign,
  frequencyHz: number,
): LocalNoise | null {
  const r = ordinatesAround(samples, first.residuals, fitted, frequencyHz);
  const s = ordinatesAround(samples, second.residuals, fitted, frequencyHz);
  if (r === null || s === null) return null;
  const powers = Float64Array.from(r, (ordinate, k) => {
    const a = divide(ordinate, first.phasor);
    const b = divide(s[k]!, second.phasor);
    return (a.real - b.real) ** 2 + (a.imaginary - b.imaginary) ** 2;
  });
  return levelAt(r, powers, frequencyHz);
}

function divide(a: Phasor, b: Phasor): Phasor {
  const square = b.real ** 2 + b.imaginary ** 2;
  return {
    real: (a.real * b.real + a.imaginary * b.imaginary) / square,
    imaginary: (a.imaginary * b.real - a.real * b.imaginary) / square,
  };
}
