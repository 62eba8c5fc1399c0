import { type Measured, measured } from '../numeric/measured.ts';
import { type DecayingFit, fitDecaying } from '../sine/decaying-fit.ts';
import { type DecayingModel, projectedSum, projectModel } from '../sine/decaying-model.ts';
import { localNoise } from '../sine/residual-spectrum.ts';
import type { Samples } from '../sine/samples.ts';
import { recordCentre } from '../sine/three-parameter.ts';
import { transientStarts } from './transient-starts.ts';

/**
 * Steady motion and decaying transient fitted together:
 * x = amplitude cos(2 pi f (t - referenceTimeS) + phaseRad)
 *   + transient exp(-decayRate (t - originS)) cos(2 pi dampedHz (t - originS) + transientPhaseRad) + baseline.
 * Amplitudes zero to peak in the unit of the values; u are standard uncertainties that hold for correlated residuals.
 */
export interface JointFit {
  readonly frequencyHz: number;
  /** Null where the drive frequency was given. */
  readonly frequencyU: number | null;
  readonly amplitude: number;
  readonly amplitudeU: number;
  readonly phaseRad: number;
  readonly phaseU: number;
  readonly referenceTimeS: number;
  /** First and last time of the fit, seconds. */
  readonly originS: number;
  readonly endS: number;
  /** Amplitude of the transient at originS. */
  readonly transient: number;
  readonly transientPhaseRad: number;
  /** Transient over steady amplitude at originS. */
  readonly leftover: number;
  readonly leftoverU: number;
  /** Transient over steady amplitude at endS. */
  readonly leftoverAtEnd: number;
  /** Decay rate of the transient in 1/s; negative where it grew. */
  readonly decayRatePerS: number;
  readonly decayRateU: number;
  readonly dampedHz: number;
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
  /**
   * True where the record tells steady motion and transient apart: the amplitude is known to 3 % and the decay is
   * seen. Where it is false the amplitude must not be used.
   */
  readonly conditioned: boolean;
  readonly residuals: Float64Array;
  readonly residualSumOfSquares: number;
  readonly residualSd: number;
  /** Noise variance per frame at the drive frequency, with its degrees of freedom. */
  readonly noiseVariance: number;
  readonly effectiveDof: number;
  readonly frames: number;
  readonly degreesOfFreedom: number;
  readonly iterations: number;
  readonly converged: boolean;
}

/** Choices for a joint fit. */
export interface JointFitOptions {
  readonly driveHz: number;
  /** Find the drive frequency too, starting from driveHz. Default false. */
  readonly driveFree?: boolean;
  /** Slow baseline: 0 none, 1 offset, 2 and slope. Default 1. */
  readonly baselineTerms?: number;
  /**
   * Residuals of a steady fit at driveHz, where the caller has them: they show where to look, and that there is
   * nothing to look for.
   */
  readonly steadyResiduals?: Float64Array;
}

// Beyond this relative uncertainty a joint amplitude is no better than waiting.
const LARGEST_RELATIVE_U = 0.03;
const STARTS_REFINED = 2;
// A start must take this many noise variances off the residual; refining gains a few times more at most.
const LEAST_PROMISE = 14;
const LARGEST_PROMISED_SHARE = 0.2;
// A natural frequency below this share of the drive frequency is not looked for.
const SLOWEST_SHARE = 0.2;

/**
 * Fits steady motion and decaying transient together, so that the steady amplitude is known before the transient has
 * gone; it also yields natural frequency and damping ratio.
 *
 * @param samples at least twelve frames
 * @returns null where no such model is determined by the samples
 * Source: solution of the driven single-degree-of-freedom system (Rao, Mechanical Vibrations, ch. 3); variable
 * projection.
 */
export function fitJoint(samples: Samples, options: JointFitOptions): JointFit | null {
  const frames = samples.timesS.length;
  const baselineTerms = options.baselineTerms ?? 1;
  if (frames < 12 || !(options.driveHz > 0)) return null;
  const model: DecayingModel = {
    originS: samples.timesS[0]!,
    ...recordCentre(samples),
    baselineTerms,
    steady: { frequencyHz: options.driveHz, free: options.driveFree ?? false },
  };
  const residuals = options.steadyResiduals ?? samples.values;
  let best: DecayingFit | null = null;
  for (const start of transientStarts(samples, residuals, model, options.driveHz, STARTS_REFINED)) {
    const from = model.steady?.free ? [...start, options.driveHz] : start;
    if (best === null && hopeless(model, samples, from, options)) return null;
    const fit = fitDecaying(model, samples, from);
    if (fit === null || !plausible(fit)) continue;
    if (best === null || fit.residualSumOfSquares < best.residualSumOfSquares) best = fit;
  }
  return best === null ? null : describe(samples, best, options);
}

/** The transient of a joint fit at one time, in the unit of the samples. */
export function transientAt(joint: JointFit, timeS: number): number {
  const elapsed = timeS - joint.originS;
  const angle = 2 * Math.PI * joint.dampedHz * elapsed + joint.transientPhaseRad;
  return joint.transient * Math.exp(-joint.decayRatePerS * elapsed) * Math.cos(angle);
}

/** Whether the best start takes so little off the steady fit's residual that refining it cannot find a transient. */
function hopeless(
  model: DecayingModel,
  samples: Samples,
  start: readonly number[],
  { steadyResiduals }: JointFitOptions,
): boolean {
  if (steadyResiduals === undefined) return false;
  let steadySum = 0;
  for (const residual of steadyResiduals) steadySum += residual * residual;
  // in a short record the sum of squares is itself only a few variances
  const share = Math.min(LEAST_PROMISE / (samples.timesS.length - 5), LARGEST_PROMISED_SHARE);
  return steadySum - projectedSum(projectModel(model, samples, start), samples) < share * steadySum;
}

/**
 * The decaying part must be an oscillation of its own: not over-damped, not growing beyond doubling its size in the
 * record, and not so slow against drive and record that it is the baseline's drift.
 */
function plausible({ parameters, model }: DecayingFit): boolean {
  const [rate, omega] = [parameters[0]!, parameters[1]!];
  const span = 2 * model.halfSpanS;
  const slowestHz = Math.max(SLOWEST_SHARE * (model.steady?.frequencyHz ?? 0), 1 / span);
  return omega > 2 * Math.PI * slowestHz && rate < omega && rate * span > -0.7;
}

function describe(samples: Samples, fit: DecayingFit, options: JointFitOptions): JointFit {
  const { model, parameters, coefficients, fitted } = fit;
  const free = model.steady?.free ?? false;
  const frequencyHz = free ? parameters[2]! : options.driveHz;
  const noise = localNoise(samples, fit.residuals, fitted, frequencyHz) ?? {
    variance: fit.residualSumOfSquares / fit.degreesOfFreedom,
    effectiveDof: fit.degreesOfFreedom,
  };
  const columns = fitted.columns;
  const spread = (gradient: readonly (readonly [number, number])[]): number => {
    let sum = 0;
    for (const [p, left] of gradient) {
      for (const [q, right] of gradient) sum += left * right * fitted.unscaledCovariance[p * columns + q]!;
    }
    return Math.sqrt(Math.max(0, noise.variance * sum));
  };

  const [c, d, a, b] = [coefficients[0]!, coefficients[1]!, coefficients[2]!, coefficients[3]!];
  const amplitude = Math.hypot(a, b);
  const transient = Math.hypot(c, d);
  const leftover = transient / amplitude;
  const leftoverU = spread([
    [0, c / (transient * amplitude)],
    [1, d / (transient * amplitude)],
    [2, (-leftover * a) / amplitude ** 2],
    [3, (-leftover * b) / amplitude ** 2],
  ]);
  const rateColumn = 4 + model.baselineTerms;
  const [rate, omega] = [parameters[0]!, parameters[1]!];
  const natural = Math.hypot(rate, omega);
  const naturalU = spread([
    [rateColumn, rate / natural],
    [rateColumn + 1, omega / natural],
  ]);
  // d (s/wn) = wd (wd ds - s dwd)/wn^3
  const ratioU = spread([
    [rateColumn, omega ** 2 / natural ** 3],
    [rateColumn + 1, (-rate * omega) / natural ** 3],
  ]);
  const amplitudeU = spread([
    [2, a / amplitude],
    [3, b / amplitude],
  ]);
  const decayRateU = spread([[rateColumn, 1]]);
  const endS = samples.timesS[samples.timesS.length - 1]!;
  return {
    frequencyHz,
    frequencyU: free ? spread([[rateColumn + 2, 1]]) : null,
    amplitude,
    amplitudeU,
    phaseRad: Math.atan2(-b, a),
    phaseU: spread([
      [2, b / amplitude ** 2],
      [3, -a / amplitude ** 2],
    ]),
    referenceTimeS: model.referenceTimeS,
    originS: model.originS,
    endS,
    transient,
    transientPhaseRad: Math.atan2(-d, c),
    leftover,
    leftoverU,
    leftoverAtEnd: leftover * Math.exp(-rate * (endS - model.originS)),
    decayRatePerS: rate,
    decayRateU,
    dampedHz: omega / (2 * Math.PI),
    naturalHz: measured(natural / (2 * Math.PI), naturalU / (2 * Math.PI)),
    dampingRatio: measured(rate / natural, ratioU),
    conditioned: fit.converged && amplitudeU <= LARGEST_RELATIVE_U * amplitude && rate > 2 * decayRateU,
    residuals: fit.residuals,
    residualSumOfSquares: fit.residualSumOfSquares,
    residualSd: Math.sqrt(fit.residualSumOfSquares / fit.degreesOfFreedom),
    noiseVariance: noise.variance,
    effectiveDof: Math.min(noise.effectiveDof, fit.degreesOfFreedom),
    frames: samples.timesS.length,
    degreesOfFreedom: fit.degreesOfFreedom,
    iterations: fit.iterations,
    converged: fit.converged,
  };
}
