import { INFORMATION_SIZE, LAG_ZERO, LOG_DAMPING, LOG_GAIN, LOG_NATURAL } from './dwell-information.ts';

/**
 * What the frequencies are chosen for: all parameters together, natural frequency and damping together (the gain
 * does not matter), or one of the two alone.
 */
export type DesignGoal = 'all' | 'natural-frequency-and-damping' | 'natural-frequency' | 'damping-ratio';

const NUISANCE: Readonly<Record<DesignGoal, readonly number[]>> = {
  all: [],
  'natural-frequency-and-damping': [LOG_GAIN, LAG_ZERO],
  'natural-frequency': [LOG_GAIN, LOG_DAMPING, LAG_ZERO],
  'damping-ratio': [LOG_GAIN, LOG_NATURAL, LAG_ZERO],
};

/**
 * Logarithm of the determinant of the rows and columns `keep` of a symmetric matrix of which the
 * lower triangle is given (`keep` ascending).
 * @returns -Infinity where that part is not positive definite
 */
function logDeterminant(matrix: Float64Array, keep: readonly number[]): number {
  const n = keep.length;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let value = matrix[keep[i]! * INFORMATION_SIZE + keep[j]!]!;
      for (let k = 0; k < j; k++) value -= root[i * INFORMATION_SIZE + k]! * root[j * INFORMATION_SIZE + k]!;
      if (i > j) root[i * INFORMATION_SIZE + j] = value / root[j * INFORMATION_SIZE + j]!;
      else if (value > 1e-14 * matrix[keep[i]! * INFORMATION_SIZE + keep[i]!]!) {
        root[i * INFORMATION_SIZE + i] = Math.sqrt(value);
        sum += Math.log(value);
      } else return Number.NEGATIVE_INFINITY;
    }
  }
  return sum;
}

const root = new Float64Array(INFORMATION_SIZE ** 2); // scratch: this runs in the innermost loop of a search
const EVERYTHING = [LOG_GAIN, LOG_NATURAL, LOG_DAMPING, LAG_ZERO] as const;

/**
 * How good an information matrix is for a goal, larger is better: minus the logarithm of the determinant of the
 * covariance of what is wanted. An increase of 2 ln 2 for one wanted parameter halves its uncertainty.
 * @returns -Infinity where the dwells do not determine what is wanted
 * Source: D- and Ds-optimality; Atkinson and Donev, Optimum Experimental Designs (from memory).
 */
export function designGoodness(information: Float64Array, goal: DesignGoal): number {
  const all = logDeterminant(information, EVERYTHING);
  return all === Number.NEGATIVE_INFINITY ? all : all - logDeterminant(information, NUISANCE[goal]);
}

/** Relative standard uncertainties that an information matrix promises; null where not determined. */
export interface PromisedU {
  readonly gain: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
}

/** Relative standard uncertainties of gain, natural frequency and damping ratio from an information matrix. */
export function promisedU(information: Float64Array): PromisedU | null {
  const all = logDeterminant(information, EVERYTHING);
  if (all === Number.NEGATIVE_INFINITY) return null;
  const without = (left: readonly number[]) => Math.exp(0.5 * (logDeterminant(information, left) - all));
  return {
    gain: without(EVERYTHING.filter((p) => p !== LOG_GAIN)),
    naturalHz: without(NUISANCE['natural-frequency']),
    dampingRatio: without(NUISANCE['damping-ratio']),
  };
}
