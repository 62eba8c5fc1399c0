import { thinSvd } from './linear-algebra.ts';

// Below this ratio of singular values (columns scaled to unit length) a direction is not determined by the data
// in double precision.
const SMALLEST_RATIO = 1e-12;
// A column that shrank to this share of its largest norm belongs to a parameter that no longer does anything:
// the solver ran away along it.
const VANISHED_COLUMN = 1e-9;

/**
 * (J'J)^-1 from the singular values of the Jacobian with its columns scaled to unit length, row-major
 * columns x columns; null where the Jacobian is rank-deficient or a column has all but vanished against
 * `largestNorms` (the largest norm of each column met on the way; same length as columns).
 */
export function unscaledCovariance(
  jacobian: Float64Array,
  rows: number,
  columns: number,
  largestNorms: Float64Array,
): Float64Array | null {
  const norms = new Float64Array(columns);
  for (let i = 0; i < jacobian.length; i++) norms[i % columns]! += jacobian[i]! ** 2;
  for (let j = 0; j < columns; j++) {
    norms[j] = Math.sqrt(norms[j]!);
    if (!(norms[j]! > VANISHED_COLUMN * largestNorms[j]!) || !Number.isFinite(norms[j]!)) return null;
  }
  const scaled = jacobian.map((value, i) => value / norms[i % columns]!);
  const { singularValues, right } = thinSvd(scaled, rows, columns);
  if (!(singularValues[columns - 1]! > SMALLEST_RATIO * singularValues[0]!)) return null;
  const covariance = new Float64Array(columns * columns);
  for (let a = 0; a < columns; a++) {
    for (let b = a; b < columns; b++) {
      let sum = 0;
      for (let k = 0; k < columns; k++) {
        sum += (right[a * columns + k]! * right[b * columns + k]!) / singularValues[k]! ** 2;
      }
      covariance[a * columns + b] = covariance[b * columns + a] = sum / (norms[a]! * norms[b]!);
    }
  }
  return covariance;
}
