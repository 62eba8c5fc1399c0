import type { LeastSquaresProblem } from './least-squares-problem.ts';

/**
 * The same least-squares problem with its many residuals condensed to parameterCount + 1 that have the same sum of
 * squares and the same products with the Jacobian, so that every step of a solver is the same and costs next to
 * nothing. For few parameters and thousands of residuals. Halves the digits of the normal equations: for the final
 * covariance go back to the full Jacobian.
 */
export function condensed(problem: LeastSquaresProblem): LeastSquaresProblem {
  const { parameterCount: columns, residualCount: rows } = problem;
  const size = columns + 1;
  const residuals = new Float64Array(rows);
  const jacobian = new Float64Array(rows * columns);
  const upper = new Float64Array(size * size);
  let knownAt: Float64Array | null = null;

  const update = (parameters: Float64Array): void => {
    if (knownAt?.every((value, k) => value === parameters[k])) return;
    knownAt = parameters.slice();
    problem.residuals(parameters, residuals);
    if (!residuals.every(Number.isFinite)) {
      upper.fill(Number.NaN);
      return;
    }
    problem.jacobian(parameters, jacobian);
    choleskyInPlace(gramOf(jacobian, residuals, columns, upper), size);
  };
  return {
    parameterCount: columns,
    residualCount: size,
    residuals(parameters, out) {
      update(parameters);
      for (let row = 0; row < size; row++) out[row] = upper[row * size + columns]!;
    },
    jacobian(parameters, out) {
      update(parameters);
      for (let row = 0; row < size; row++) {
        for (let column = 0; column < columns; column++) {
          out[row * columns + column] = upper[row * size + column]!;
        }
      }
    },
  };
}

/** [J r]'[J r] into `gram`, upper triangle, row-major. */
function gramOf(
  jacobian: Float64Array,
  residuals: Float64Array,
  columns: number,
  gram: Float64Array,
): Float64Array {
  const size = columns + 1;
  gram.fill(0);
  for (let i = 0; i < residuals.length; i++) {
    const residual = residuals[i]!;
    for (let a = 0; a < columns; a++) {
      const left = jacobian[i * columns + a]!;
      for (let b = a; b < columns; b++) gram[a * size + b]! += left * jacobian[i * columns + b]!;
      gram[a * size + columns]! += left * residual;
    }
    gram[size * size - 1]! += residual * residual;
  }
  return gram;
}

/** Upper Cholesky factor in place; a direction without length gets a row of zeros. */
function choleskyInPlace(upper: Float64Array, size: number): void {
  for (let k = 0; k < size; k++) {
    const pivot = upper[k * size + k]!;
    const root = pivot > 0 ? Math.sqrt(pivot) : 0;
    for (let column = 0; column < size; column++) {
      upper[k * size + column] = column < k || root === 0 ? 0 : upper[k * size + column]! / root;
    }
    for (let row = k + 1; row < size; row++) {
      for (let column = row; column < size; column++) {
        upper[row * size + column]! -= upper[k * size + row]! * upper[k * size + column]!;
      }
    }
  }
}
