import { type FittedDesign, type Ordinate, ordinatesAround } from './ordinates.ts';
import type { Samples } from './samples.ts';
import { whittleLevel } from './whittle-level.ts';

/** Noise around one frequency, told as the variance per frame that white noise of the same level would have. */
export interface LocalNoise {
  readonly variance: number;
  /** Degrees of freedom of that estimate, for Student's t. */
  readonly effectiveDof: number;
}

// The farthest ordinate lies at this share of the kernel's reach, so that its weight is small but not nothing.
const KERNEL_REACH = 1.15;

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

/** A complex amplitude told at mid-record tr: y = Re((real + i imaginary) exp(i 2 pi f (t - tr))). */
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
