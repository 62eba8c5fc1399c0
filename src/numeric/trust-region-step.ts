import { thinSvd } from './linear-algebra.ts';

/** The linearised problem in coordinates in which every parameter has the same weight. */
export interface LocalModel {
  /** Singular values of the column-scaled Jacobian, largest first. */
  readonly singularValues: Float64Array;
  /** U'r: the residuals in the left singular directions. */
  readonly projected: Float64Array;
  /** Right singular vectors, row-major parameterCount x parameterCount. */
  readonly right: Float64Array;
  /** How many singular values stand above rounding. */
  readonly rank: number;
}

/** A damped step and what it promises. */
export interface DampedStep {
  /** Step in scaled coordinates (parameter step times its scale), length parameterCount. */
  readonly scaledStep: Float64Array;
  /** Euclidean length of `scaledStep`. */
  readonly length: number;
  /** By how much the linear model says the sum of squares falls. */
  readonly predictedReduction: number;
}

/**
 * Decomposes the Jacobian with its columns divided by `scale`.
 *
 * @param jacobian row-major, rows x columns; `scale` has one positive number per column
 */
export function localModel(
  jacobian: Float64Array,
  rows: number,
  columns: number,
  scale: Float64Array,
  residuals: Float64Array,
): LocalModel {
  const scaled = new Float64Array(rows * columns);
  for (let i = 0; i < scaled.length; i++) scaled[i] = jacobian[i]! / scale[i % columns]!;
  const { left, singularValues, right } = thinSvd(scaled, rows, columns);
  const projected = new Float64Array(columns);
  for (let row = 0; row < rows; row++) {
    for (let k = 0; k < columns; k++) projected[k]! += left[row * columns + k]! * residuals[row]!;
  }
  const floor = singularValues[0]! * Number.EPSILON * Math.max(rows, columns);
  const rank = singularValues.filter((value) => value > floor).length;
  return { singularValues, projected, right, rank };
}

// Hitting the radius to a tenth is all a trust region needs (Moré 1978).
const RADIUS_SLACK = 0.1;

/**
 * The Levenberg-Marquardt step whose length is at most `radius`: the full Gauss-Newton step where that is short
 * enough, else the damped one that reaches the radius within a tenth.
 * Source: J. J. Moré, The Levenberg-Marquardt algorithm: implementation and theory, Springer LNM
 * 630 (1978) 105, section 5 (from memory); here the damping is found from the singular values.
 */
export function dampedStep(model: LocalModel, radius: number): DampedStep {
  const damping = dampingForRadius(model, radius);
  const { singularValues, projected, right, rank } = model;
  const columns = projected.length;
  const scaledStep = new Float64Array(columns);
  let squaredLength = 0;
  let predictedReduction = 0;
  for (let k = 0; k < rank; k++) {
    const s = singularValues[k]!;
    const c = projected[k]!;
    const along = (-s * c) / (s * s + damping);
    const left = damping / (s * s + damping);
    squaredLength += along * along;
    predictedReduction += c * c * (1 - left * left);
    for (let j = 0; j < columns; j++) scaledStep[j]! += right[j * columns + k]! * along;
  }
  return { scaledStep, length: Math.sqrt(squaredLength), predictedReduction };
}

/** Newton's iteration on 1/length, which is nearly straight in the damping; it climbs from zero. */
function dampingForRadius({ singularValues, projected, rank }: LocalModel, radius: number): number {
  let damping = 0;
  for (let pass = 0; pass < 60; pass++) {
    let squaredLength = 0;
    let slope = 0;
    for (let k = 0; k < rank; k++) {
      const s2 = singularValues[k]! ** 2;
      const term = (s2 * projected[k]! ** 2) / (s2 + damping) ** 2;
      squaredLength += term;
      slope += term / (s2 + damping);
    }
    const length = Math.sqrt(squaredLength);
    if (length <= (1 + RADIUS_SLACK) * radius) return damping;
    damping += ((length - radius) / radius) * (squaredLength / slope);
  }
  return damping;
}
