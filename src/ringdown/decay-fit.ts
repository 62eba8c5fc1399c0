import { type Measured, measured } from '../numeric/measured.ts';
import { type DecayingFit, fitDecaying } from '../sine/decaying-fit.ts';
import type { DecayingModel } from '../sine/decaying-model.ts';
import { localNoise } from '../sine/residual-spectrum.ts';
import type { Samples } from '../sine/samples.ts';
import { recordCentre } from '../sine/three-parameter.ts';
import { type DecayPole, pencilPole } from './matrix-pencil.ts';
import { strongestTone } from './strongest-tone.ts';

/** A free decay x = amplitude exp(-s (t - originS)) cos(wd (t - originS) + phaseRad) + offset, in the unit of the values. */
export interface DecayFit {
  readonly naturalHz: Measured;
  readonly dampedHz: Measured;
  readonly dampingRatio: Measured;
  readonly decayRatePerS: Measured;
  /** Zero-to-peak at originS. */
  readonly amplitude: Measured;
  readonly phaseRad: number;
  readonly offset: Measured;
  readonly originS: number;
  readonly endS: number;
  readonly residuals: Float64Array;
  readonly residualSd: number;
  readonly frames: number;
  readonly degreesOfFreedom: number;
  readonly converged: boolean;
}

const FEWEST_FRAMES = 12;
const SAMPLES_PER_PERIOD = 12;
const MOST_PENCIL_SAMPLES = 180; // fifteen periods: a start needs no more
const RATIOS_TRIED = [0.003, 0.01, 0.03, 0.1, 0.25]; // where linear prediction finds no pole

/** Start values: the pencil's pole, then the spectrum's frequency with a range of dampings. */
function starts(samples: Samples): DecayPole[] {
  const tone = strongestTone(samples);
  if (tone === null) return [];
  const omega = 2 * Math.PI * tone.frequencyHz;
  const stride = Math.max(1, Math.floor(1 / (SAMPLES_PER_PERIOD * tone.frequencyHz * tone.intervalS)));
  const values = tone.values.filter((_, k) => k % stride === 0).slice(0, MOST_PENCIL_SAMPLES);
  const pole = pencilPole(values, tone.intervalS * stride);
  const tried = RATIOS_TRIED.map((ratio) => ({ decayRatePerS: ratio * omega, omegaRadPerS: omega }));
  return [...(pole && pole.decayRatePerS > 0 ? [pole] : []), ...tried];
}

/**
 * Natural frequency and damping of a free decay by non-linear least squares from a linear-prediction start, with
 * uncertainties that hold when the residuals are correlated.
 *
 * @returns null where no oscillating decay is determined by the samples
 */
export function fitDecay(samples: Samples): DecayFit | null {
  if (samples.timesS.length < FEWEST_FRAMES) return null;
  const model: DecayingModel = {
    originS: samples.timesS[0] ?? 0,
    ...recordCentre(samples),
    baselineTerms: 1,
    steady: null,
  };
  let best: DecayingFit | null = null;
  for (const start of starts(samples)) {
    const fit = fitDecaying(model, samples, [start.decayRatePerS, start.omegaRadPerS]);
    if (fit === null || !isDecay(fit)) continue;
    if (best === null || fit.residualSumOfSquares < best.residualSumOfSquares * (1 - 1e-9)) best = fit;
    else if (best.converged) break; // two starts that end alike: the others would too
  }
  return best === null ? null : describe(samples, best);
}

function isDecay({ parameters }: DecayingFit): boolean {
  const [rate = 0, omega = 0] = parameters;
  return omega > 0 && Math.abs(rate) < omega;
}

function describe(samples: Samples, fit: DecayingFit): DecayFit {
  const { parameters, coefficients, fitted, degreesOfFreedom } = fit;
  const [rate = 0, omega = 0] = parameters;
  const [c = 0, d = 0, offset = 0] = coefficients;
  const dampedHz = omega / (2 * Math.PI);
  const white = fit.residualSumOfSquares / degreesOfFreedom;
  const variance = localNoise(samples, fit.residuals, fitted, dampedHz)?.variance ?? white;
  const spread = (gradient: readonly (readonly [number, number])[], noise = variance): number => {
    let sum = 0;
    for (const [p, left] of gradient) {
      for (const [q, right] of gradient)
        sum += left * right * (fitted.unscaledCovariance[p * fitted.columns + q] ?? 0);
    }
    return Math.sqrt(Math.max(0, noise * sum));
  };
  // columns: cosine, sine, offset, decay rate, angular frequency
  const natural = Math.hypot(rate, omega);
  const amplitude = Math.hypot(c, d);
  return {
    naturalHz: measured(
      natural / (2 * Math.PI),
      spread([
        [3, rate / natural],
        [4, omega / natural],
      ]) /
        (2 * Math.PI),
    ),
    dampedHz: measured(dampedHz, spread([[4, 1]]) / (2 * Math.PI)),
    dampingRatio: measured(
      rate / natural,
      spread([
        [3, omega ** 2 / natural ** 3],
        [4, (-rate * omega) / natural ** 3],
      ]),
    ),
    decayRatePerS: measured(rate, spread([[3, 1]])),
    amplitude: measured(
      amplitude,
      spread([
        [0, c / amplitude],
        [1, d / amplitude],
      ]),
    ),
    phaseRad: Math.atan2(-d, c),
    offset: measured(offset, spread([[2, 1]], white)),
    originS: fit.model.originS,
    endS: samples.timesS.at(-1) ?? 0,
    residuals: fit.residuals,
    residualSd: Math.sqrt(white),
    frames: samples.timesS.length,
    degreesOfFreedom,
    converged: fit.converged,
  };
}
