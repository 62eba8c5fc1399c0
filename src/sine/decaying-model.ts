import type { LeastSquaresProblem } from '../numeric/least-squares-problem.ts';
import { invertSymmetric } from '../numeric/linear-algebra.ts';
import type { Samples } from './samples.ts';
import { legendre } from './sine-model.ts';

/**
 * A decaying sine, with or without a steady sine and a slow baseline beside it:
 * exp(-s (t - origin)) (c cos wd (t - origin) + d sin wd (t - origin))
 * + a cos w (t - reference) + b sin w (t - reference) + baseline.
 */
export interface DecayingModel {
  /** Time at which the decaying part has its full amplitude, seconds. */
  readonly originS: number;
  /** Middle and half span of the record, seconds. */
  readonly referenceTimeS: number;
  readonly halfSpanS: number;
  readonly baselineTerms: number;
  /** Frequency of the steady part in Hz, null for none; `free` where it is to be found too. */
  readonly steady: { readonly frequencyHz: number; readonly free: boolean } | null;
}

/** Number of linear coefficients: decaying cosine and sine, steady cosine and sine, baseline. */
export function linearCount(model: DecayingModel): number {
  return 2 + (model.steady === null ? 0 : 2) + model.baselineTerms;
}

/** Number of non-linear parameters: decay rate s in 1/s, angular frequency wd in rad/s, and the steady Hz if free. */
export function nonlinearCount(model: DecayingModel): number {
  return model.steady?.free ? 3 : 2;
}

/** Writes the linear design at time `timeS` into `design` from index `at` on, linearCount values. */
export function fillDecayingRow(
  model: DecayingModel,
  parameters: ArrayLike<number>,
  timeS: number,
  design: Float64Array,
  at: number,
): void {
  const elapsed = timeS - model.originS;
  const envelope = Math.exp(-parameters[0]! * elapsed);
  const angle = parameters[1]! * elapsed;
  design[at] = envelope * Math.cos(angle);
  design[at + 1] = envelope * Math.sin(angle);
  let column = at + 2;
  const time = timeS - model.referenceTimeS;
  if (model.steady !== null) {
    const steadyHz = model.steady.free ? parameters[2]! : model.steady.frequencyHz;
    const steadyAngle = 2 * Math.PI * steadyHz * time;
    design[column++] = Math.cos(steadyAngle);
    design[column++] = Math.sin(steadyAngle);
  }
  for (let degree = 0; degree < model.baselineTerms; degree++) {
    design[column++] = legendre(degree, model.halfSpanS > 0 ? time / model.halfSpanS : 0);
  }
}

/**
 * Writes d model / d parameter at one time into `slopes` from index `to` on, nonlinearCount values, from that time's
 * row of `design`, which begins at `at`.
 */
export function fillSlopes(
  model: DecayingModel,
  coefficients: Float64Array,
  timeS: number,
  design: Float64Array,
  at: number,
  slopes: Float64Array,
  to: number,
): void {
  const elapsed = timeS - model.originS;
  const [c, d] = [coefficients[0]!, coefficients[1]!];
  slopes[to] = -elapsed * (c * design[at]! + d * design[at + 1]!);
  slopes[to + 1] = elapsed * (d * design[at]! - c * design[at + 1]!);
  if (model.steady?.free) {
    const turn = 2 * Math.PI * (timeS - model.referenceTimeS);
    slopes[to + 2] = turn * (coefficients[3]! * design[at + 2]! - coefficients[2]! * design[at + 3]!);
  }
}

/** The linear part solved for given non-linear parameters. */
export interface ProjectedModel {
  /** Row-major, samples x linearCount. */
  readonly design: Float64Array;
  readonly gramInverse: Float64Array;
  readonly coefficients: Float64Array;
}

/** Solves the linear coefficients by normal equations; null where they are not determined. */
export function projectModel(
  model: DecayingModel,
  samples: Samples,
  parameters: ArrayLike<number>,
): ProjectedModel | null {
  const n = samples.timesS.length;
  const columns = linearCount(model);
  const design = new Float64Array(n * columns);
  const gram = new Float64Array(columns * columns);
  const moment = new Float64Array(columns);
  for (let i = 0; i < n; i++) {
    const at = i * columns;
    fillDecayingRow(model, parameters, samples.timesS[i]!, design, at);
    const value = samples.values[i]!;
    for (let a = 0; a < columns; a++) {
      const left = design[at + a]!;
      moment[a]! += left * value;
      for (let b = a; b < columns; b++) gram[a * columns + b]! += left * design[at + b]!;
    }
  }
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < a; b++) gram[a * columns + b] = gram[b * columns + a]!;
  }
  const gramInverse = invertSymmetric(gram, columns);
  if (gramInverse === null) return null;
  const coefficients = new Float64Array(columns);
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < columns; b++) coefficients[a]! += gramInverse[a * columns + b]! * moment[b]!;
  }
  return { design, gramInverse, coefficients };
}

/** Sum of squared residuals of a projected model; Infinity for null. */
export function projectedSum(projected: ProjectedModel | null, samples: Samples): number {
  if (projected === null) return Number.POSITIVE_INFINITY;
  const columns = projected.coefficients.length;
  let sum = 0;
  for (let i = 0; i < samples.values.length; i++) {
    let fitted = 0;
    for (let k = 0; k < columns; k++)
      fitted += projected.design[i * columns + k]! * projected.coefficients[k]!;
    sum += (samples.values[i]! - fitted) ** 2;
  }
  return sum;
}

/**
 * The non-linear problem left when the linear coefficients are always solved for (variable projection), with
 * Kaufman's Jacobian: the slopes, less what the linear part can make of them.
 * Source: Golub and Pereyra, SIAM J. Numer. Anal. 10 (1973) 413; Kaufman, BIT 15 (1975) 49 (from memory).
 */
export function projectedProblem(model: DecayingModel, samples: Samples): LeastSquaresProblem {
  const n = samples.timesS.length;
  const columns = linearCount(model);
  const count = nonlinearCount(model);
  let known: { parameters: Float64Array; projected: ProjectedModel | null } | null = null;
  const projectedAt = (parameters: Float64Array): ProjectedModel | null => {
    if (known === null || !known.parameters.every((value, k) => value === parameters[k])) {
      known = { parameters: parameters.slice(), projected: projectModel(model, samples, parameters) };
    }
    return known.projected;
  };
  return {
    parameterCount: count,
    residualCount: n,
    residuals(parameters, out) {
      const projected = projectedAt(parameters);
      if (projected === null) {
        out.fill(Number.NaN);
        return;
      }
      const { design, coefficients } = projected;
      for (let i = 0; i < n; i++) {
        let fitted = 0;
        for (let k = 0; k < columns; k++) fitted += design[i * columns + k]! * coefficients[k]!;
        out[i] = fitted - samples.values[i]!;
      }
    },
    jacobian(parameters, out) {
      const projected = projectedAt(parameters);
      if (projected === null) {
        out.fill(Number.NaN);
        return;
      }
      const { design, gramInverse, coefficients } = projected;
      const moments = new Float64Array(columns * count);
      for (let i = 0; i < n; i++) {
        fillSlopes(model, coefficients, samples.timesS[i]!, design, i * columns, out, i * count);
        for (let p = 0; p < count; p++) {
          const slope = out[i * count + p]!;
          for (let k = 0; k < columns; k++) moments[k * count + p]! += design[i * columns + k]! * slope;
        }
      }
      const along = new Float64Array(columns * count);
      for (let a = 0; a < columns; a++) {
        for (let b = 0; b < columns; b++) {
          for (let p = 0; p < count; p++) {
            along[a * count + p]! += gramInverse[a * columns + b]! * moments[b * count + p]!;
          }
        }
      }
      for (let i = 0; i < n; i++) {
        for (let p = 0; p < count; p++) {
          for (let k = 0; k < columns; k++) {
            out[i * count + p]! -= design[i * columns + k]! * along[k * count + p]!;
          }
        }
      }
    },
  };
}
