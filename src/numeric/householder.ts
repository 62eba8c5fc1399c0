/** R of a QR decomposition and Q'y, enough to solve a least-squares problem. */
export interface TriangularSystem {
  /** Upper triangle, row-major columns x columns. */
  readonly upper: Float64Array;
  /** First `columns` entries of Q'y. */
  readonly rotated: Float64Array;
}

/**
 * Reduces a tall least-squares problem to a triangular one by Householder reflections. Written out because the
 * matrix library copies a matrix entry by entry through a generator, ten times the cost of the arithmetic here, and
 * this runs for every fit of every dwell.
 *
 * @param byColumn the design, column after column, rows x columns; overwritten
 * @param target length rows; overwritten
 * Source: Golub and Van Loan, Matrix Computations, algorithms 5.1.1 and 5.2.1 (from memory).
 */
export function reduceToTriangle(
  byColumn: Float64Array,
  rows: number,
  columns: number,
  target: Float64Array,
): TriangularSystem {
  const upper = new Float64Array(columns * columns);
  for (let k = 0; k < columns; k++) {
    const start = k * rows;
    let square = 0;
    for (let i = k; i < rows; i++) square += byColumn[start + i]! ** 2;
    const pivot = byColumn[start + k]!;
    const length = Math.sqrt(square);
    const diagonal = pivot > 0 ? -length : length;
    upper[k * columns + k] = diagonal;
    if (length === 0) continue;

    // reflector v = x - diagonal e1; v'v = 2 (x'x - diagonal x1)
    byColumn[start + k] = pivot - diagonal;
    const factor = 1 / (square - diagonal * pivot);
    for (let column = k + 1; column < columns; column++) {
      reflect(byColumn, start, byColumn, column * rows, k, rows, factor);
      upper[k * columns + column] = byColumn[column * rows + k]!;
    }
    reflect(byColumn, start, target, 0, k, rows, factor);
  }
  return { upper, rotated: target.slice(0, columns) };
}

/** x -= factor v (v'x) for the entries from `from` on. */
function reflect(
  reflector: Float64Array,
  reflectorStart: number,
  vector: Float64Array,
  vectorStart: number,
  from: number,
  rows: number,
  factor: number,
): void {
  let along = 0;
  for (let i = from; i < rows; i++) along += reflector[reflectorStart + i]! * vector[vectorStart + i]!;
  along *= factor;
  for (let i = from; i < rows; i++) vector[vectorStart + i]! -= along * reflector[reflectorStart + i]!;
}

/** Solves upper x = target by back substitution; pivots must not be zero. */
export function backSubstitute(upper: Float64Array, columns: number, target: Float64Array): Float64Array {
  const solution = target.slice();
  for (let k = columns - 1; k >= 0; k--) {
    for (let column = k + 1; column < columns; column++) {
      solution[k]! -= upper[k * columns + column]! * solution[column]!;
    }
    solution[k]! /= upper[k * columns + k]!;
  }
  return solution;
}
