/**
 * Measurement model y = f(x): from the input quantities to one or more outputs. Must be smooth within a
 * standard uncertainty of the inputs.
 */
export type MeasurementModel = (x: Float64Array) => Float64Array;

/** Outputs of a measurement model with their joint uncertainty. */
export interface Propagated {
  readonly y: Float64Array;
  /** Standard uncertainty of each output. */
  readonly u: Float64Array;
  /** Covariance of the outputs, row-major, outputs x outputs. */
  readonly covariance: Float64Array;
  /** Correlation of the outputs, row-major, outputs x outputs; 0 off the diagonal where an output has no uncertainty. */
  readonly correlation: Float64Array;
  /** Sensitivities dy/dx, row-major, outputs x inputs. */
  readonly sensitivities: Float64Array;
}

/** Step of the central differences as a fraction of an input's standard uncertainty. */
const STEP = 1e-3;

/**
 * Covariance matrix from standard uncertainties and correlation coefficients.
 *
 * @param u standard uncertainties, length n, 0 or more
 * @param correlation row-major n x n with a unit diagonal; null: independent
 * @throws Error where lengths disagree
 */
export function covarianceFrom(u: Float64Array, correlation: Float64Array | null = null): Float64Array {
  const n = u.length;
  if (correlation !== null && correlation.length !== n * n) throw new Error('correlation must be n x n');
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const r = i === j ? 1 : correlation === null ? 0 : correlation[i * n + j]!;
      covariance[i * n + j] = r * u[i]! * u[j]!;
    }
  }
  return covariance;
}

/**
 * Law of propagation of uncertainty with correlated inputs, first order: U_y = C U_x C', the sensitivities C
 * by central differences over a thousandth of each input's standard uncertainty.
 *
 * @param x input estimates, length n
 * @param covariance of the inputs, row-major n x n
 * Source: JCGM 100:2008, 5.2.2 equation (13), and H.2.3 for several outputs.
 */
export function propagate(model: MeasurementModel, x: Float64Array, covariance: Float64Array): Propagated {
  const n = x.length;
  if (covariance.length !== n * n)
    throw new Error(`covariance of ${covariance.length} values for ${n} inputs`);
  const y = model(x);
  const sensitivities = sensitivitiesOf(model, x, covariance, y.length);
  const m = y.length;
  const out = new Float64Array(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = a; b < m; b++) {
      let sum = 0;
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) {
          sum += sensitivities[a * n + i]! * covariance[i * n + j]! * sensitivities[b * n + j]!;
        }
      }
      out[a * m + b] = sum;
      out[b * m + a] = sum;
    }
  }
  const u = Float64Array.from({ length: m }, (_, a) => Math.sqrt(Math.max(0, out[a * m + a]!)));
  return { y, u, covariance: out, correlation: correlationFrom(out, u), sensitivities };
}

/** Correlation coefficients of a covariance matrix, given the roots of its diagonal. */
function correlationFrom(covariance: Float64Array, u: Float64Array): Float64Array {
  const m = u.length;
  return covariance.map((value, k) => {
    const [a, b] = [Math.floor(k / m), k % m];
    if (a === b) return 1;
    return u[a]! > 0 && u[b]! > 0 ? value / (u[a]! * u[b]!) : 0;
  });
}

function sensitivitiesOf(
  model: MeasurementModel,
  x: Float64Array,
  covariance: Float64Array,
  outputs: number,
): Float64Array {
  const n = x.length;
  const sensitivities = new Float64Array(outputs * n);
  for (let i = 0; i < n; i++) {
    const u = Math.sqrt(covariance[i * n + i]!);
    // an exactly known input contributes nothing
    if (!(u > 0)) continue;
    const low = model(moved(x, i, -STEP * u));
    const high = model(moved(x, i, STEP * u));
    for (let a = 0; a < outputs; a++) sensitivities[a * n + i] = (high[a]! - low[a]!) / (2 * STEP * u);
  }
  return sensitivities;
}

/**
 * The second-order addition to the variance of one output for independent, symmetric inputs, where
 * sensitivities vanish or the model bends: sum over i, j of (f_ij^2 / 2 + f_i f_ijj) u_i^2 u_j^2, with the
 * derivatives by differences over one standard uncertainty.
 *
 * @returns the variance to add to the first-order one
 * Source: JCGM 100:2008, note to 5.1.2.
 */
export function secondOrderVariance(
  model: (x: Float64Array) => number,
  x: Float64Array,
  u: Float64Array,
): number {
  const at = (i: number, a: number, j: number, b: number): number =>
    model(moved(moved(x, i, a * u[i]!), j, b * u[j]!));
  const centre = model(x);
  let variance = 0;
  for (let i = 0; i < x.length; i++) {
    if (!(u[i]! > 0)) continue;
    const first = (at(i, 1, i, 0) - at(i, -1, i, 0)) / 2;
    for (let j = 0; j < x.length; j++) {
      if (!(u[j]! > 0)) continue;
      // derivatives in units of one standard uncertainty
      const mixed =
        i === j
          ? at(i, 1, i, 0) - 2 * centre + at(i, -1, i, 0)
          : (at(i, 1, j, 1) - at(i, 1, j, -1) - at(i, -1, j, 1) + at(i, -1, j, -1)) / 4;
      const third =
        i === j
          ? (at(i, 2, i, 0) - 2 * at(i, 1, i, 0) + 2 * at(i, -1, i, 0) - at(i, -2, i, 0)) / 2
          : (bend(at, i, 1, j) - bend(at, i, -1, j)) / 2;
      variance += mixed ** 2 / 2 + first * third;
    }
  }
  return variance;
}

function bend(
  at: (i: number, a: number, j: number, b: number) => number,
  i: number,
  a: number,
  j: number,
): number {
  return at(i, a, j, 1) - 2 * at(i, a, j, 0) + at(i, a, j, -1);
}

function moved(x: Float64Array, i: number, by: number): Float64Array {
  const copy = x.slice();
  copy[i]! += by;
  return copy;
}
