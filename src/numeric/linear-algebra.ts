import { CholeskyDecomposition, EigenvalueDecomposition, Matrix, SVD } from 'ml-matrix';
import { backSubstitute, reduceToTriangle } from './householder.ts';

/**
 * Outcome of a linear least-squares fit.
 * `unscaledCovariance` is (D'D)^-1 of the design D, row-major, columns x columns: multiplied by the residual
 * variance it is the covariance of the coefficients when residuals are independent and alike.
 */
export interface LinearFit {
  readonly coefficients: Float64Array;
  readonly unscaledCovariance: Float64Array;
  readonly residuals: Float64Array;
  readonly residualSumOfSquares: number;
  readonly degreesOfFreedom: number;
}

/** Singular value decomposition M = U diag(s) V'. All matrices row-major; k = min(rows, columns). */
export interface ThinSvd {
  /** rows x k */
  readonly left: Float64Array;
  /** k values, largest first */
  readonly singularValues: Float64Array;
  /** columns x k */
  readonly right: Float64Array;
}

// Columns scaled to unit length: a pivot of R below this means the columns are dependent in double precision.
const SMALLEST_PIVOT = 1e-12;

function toMatrix(values: Float64Array, rows: number, columns: number): Matrix {
  if (values.length !== rows * columns) {
    throw new Error(`matrix of ${rows} x ${columns} given ${values.length} values`);
  }
  return Matrix.from1DArray(rows, columns, values);
}

/** Rounding may leave two mirrored entries apart by a digit; the decomposition wants them equal. */
function toSymmetricMatrix(values: Float64Array, n: number): Matrix {
  const matrix = toMatrix(values, n, n);
  for (let row = 0; row < n; row++) {
    for (let column = 0; column < row; column++) {
      const mean = (values[row * n + column]! + values[column * n + row]!) / 2;
      matrix.set(row, column, mean);
      matrix.set(column, row, mean);
    }
  }
  return matrix;
}

function toFlat(matrix: Matrix, columns = matrix.columns): Float64Array {
  const flat = new Float64Array(matrix.rows * columns);
  for (let row = 0; row < matrix.rows; row++) {
    for (let column = 0; column < columns; column++) flat[row * columns + column] = matrix.get(row, column);
  }
  return flat;
}

function columnNorms(design: Float64Array, rows: number, columns: number): Float64Array {
  const norms = new Float64Array(columns);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) norms[column]! += design[row * columns + column]! ** 2;
  }
  return norms.map(Math.sqrt);
}

/** Inverse of an upper triangular matrix, row-major n x n; pivots must not be zero. */
function invertUpperTriangle(upper: Float64Array, n: number): Float64Array {
  const inverse = new Float64Array(n * n);
  for (let column = 0; column < n; column++) {
    const unit = new Float64Array(n);
    unit[column] = 1;
    const solution = backSubstitute(upper, n, unit);
    for (let row = 0; row <= column; row++) inverse[row * n + column] = solution[row]!;
  }
  return inverse;
}

/**
 * Least-squares solution of design x = target by Householder QR, columns scaled to unit length first.
 *
 * @param design row-major, rows x columns
 * @param target length = rows
 * @returns null where there are fewer rows than columns, where the columns are dependent to 1e-12, or where
 *   a value is not finite
 * @throws Error where lengths disagree
 * Source: Golub and Van Loan, Matrix Computations, section 5.3 (from memory).
 */
export function linearLeastSquares(
  design: Float64Array,
  rows: number,
  columns: number,
  target: Float64Array,
): LinearFit | null {
  if (target.length !== rows) throw new Error(`target of ${target.length} values for ${rows} rows`);
  if (design.length !== rows * columns) {
    throw new Error(`design of ${design.length} values for ${rows} x ${columns}`);
  }
  if (rows < columns || columns === 0) return null;
  const norms = columnNorms(design, rows, columns);
  if (!norms.every((norm) => norm > 0 && Number.isFinite(norm))) return null;

  const byColumn = new Float64Array(rows * columns);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      byColumn[column * rows + row] = design[row * columns + column]! / norms[column]!;
    }
  }
  const { upper, rotated } = reduceToTriangle(byColumn, rows, columns, target.slice());
  for (let k = 0; k < columns; k++) {
    if (!(Math.abs(upper[k * columns + k]!) > SMALLEST_PIVOT)) return null;
  }
  const coefficients = backSubstitute(upper, columns, rotated).map((value, k) => value / norms[k]!);
  if (!coefficients.every(Number.isFinite)) return null;

  const residuals = new Float64Array(rows);
  let residualSumOfSquares = 0;
  for (let row = 0; row < rows; row++) {
    let model = 0;
    for (let k = 0; k < columns; k++) model += design[row * columns + k]! * coefficients[k]!;
    residuals[row] = target[row]! - model;
    residualSumOfSquares += residuals[row]! ** 2;
  }

  // (D'D)^-1 = R^-1 R^-T, undoing the column scale
  const inverse = invertUpperTriangle(upper, columns);
  const unscaledCovariance = new Float64Array(columns * columns);
  for (let a = 0; a < columns; a++) {
    for (let b = a; b < columns; b++) {
      let sum = 0;
      for (let k = b; k < columns; k++) sum += inverse[a * columns + k]! * inverse[b * columns + k]!;
      const value = sum / (norms[a]! * norms[b]!);
      unscaledCovariance[a * columns + b] = value;
      unscaledCovariance[b * columns + a] = value;
    }
  }
  return {
    coefficients,
    unscaledCovariance,
    residuals,
    residualSumOfSquares,
    degreesOfFreedom: rows - columns,
  };
}

/**
 * Solves the symmetric positive definite system matrix x = target by Cholesky decomposition.
 *
 * @param matrix row-major, n x n
 * @param target length = n
 * @returns null where the matrix is not positive definite
 */
export function solveSymmetric(matrix: Float64Array, n: number, target: Float64Array): Float64Array | null {
  const cholesky = new CholeskyDecomposition(toSymmetricMatrix(matrix, n));
  if (!cholesky.isPositiveDefinite()) return null;
  const solution = toFlat(cholesky.solve(Matrix.from1DArray(n, 1, target)));
  return solution.every(Number.isFinite) ? solution : null;
}

/**
 * Inverse of a symmetric positive definite matrix (row-major, n x n), computed on the matrix scaled to a unit
 * diagonal so that parameters of very different size do no harm.
 *
 * @returns null where the matrix is not positive definite
 */
export function invertSymmetric(matrix: Float64Array, n: number): Float64Array | null {
  const scale = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const diagonal = matrix[k * n + k]!;
    if (!(diagonal > 0) || !Number.isFinite(diagonal)) return null;
    scale[k] = 1 / Math.sqrt(diagonal);
  }
  const scaled = matrix.map((value, index) => value * scale[Math.floor(index / n)]! * scale[index % n]!);
  const cholesky = new CholeskyDecomposition(toSymmetricMatrix(scaled, n));
  if (!cholesky.isPositiveDefinite()) return null;
  const inverse = toFlat(cholesky.solve(Matrix.eye(n, n)));
  for (let k = 0; k < inverse.length; k++) inverse[k]! *= scale[Math.floor(k / n)]! * scale[k % n]!;
  return inverse.every(Number.isFinite) ? inverse : null;
}

/** Singular value decomposition of a row-major matrix; singular values come largest first. */
export function thinSvd(matrix: Float64Array, rows: number, columns: number): ThinSvd {
  const svd = new SVD(toMatrix(matrix, rows, columns), { autoTranspose: true });
  const k = Math.min(rows, columns);
  return {
    left: toFlat(svd.leftSingularVectors, k),
    singularValues: Float64Array.from(svd.diagonal),
    right: toFlat(svd.rightSingularVectors, k),
  };
}

/**
 * Condition number of a row-major matrix: its largest over its smallest singular value, Infinity where the
 * matrix is singular. Scale the columns first where their units differ.
 */
export function conditionNumber(matrix: Float64Array, rows: number, columns: number): number {
  const values = thinSvd(matrix, rows, columns).singularValues;
  const smallest = values[values.length - 1] ?? 0;
  return smallest > 0 ? values[0]! / smallest : Number.POSITIVE_INFINITY;
}

/** Eigenvalues of a square row-major matrix, n x n, as real and imaginary parts of length n. */
export function eigenvalues(
  matrix: Float64Array,
  n: number,
): { readonly real: Float64Array; readonly imaginary: Float64Array } {
  const decomposition = new EigenvalueDecomposition(toMatrix(matrix, n, n));
  return {
    real: Float64Array.from(decomposition.realEigenvalues),
    imaginary: Float64Array.from(decomposition.imaginaryEigenvalues),
  };
}
