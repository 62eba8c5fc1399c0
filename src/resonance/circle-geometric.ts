import { solveLeastSquares } from '../numeric/levenberg-marquardt.ts';
import { algebraicCircle, type Circle } from './circle-fit.ts';

/** A circle by geometric fit, with its uncertainty. */
export interface GeometricCircle extends Circle {
  /** Sum of squared distances of the points from the circle. */
  readonly residualSumOfSquares: number;
  /** Standard uncertainties by the scatter of the points; null with only three points. */
  readonly uCentreX: number | null;
  readonly uCentreY: number | null;
  readonly uRadius: number | null;
}

/**
 * Circle with the least sum of squared distances from the points, started from Taubin's.
 *
 * @param weights weight of each point's squared distance, positive; all alike where absent
 * @returns null for fewer than three points, points on a straight line, or where the fit does not settle
 * Source: Gander, Golub and Strebel, BIT 34 (1994) 558 (from memory).
 */
export function geometricCircle(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  weights: ArrayLike<number> | null = null,
): GeometricCircle | null {
  const start = algebraicCircle(x, y, 'taubin');
  if (start === null) return null;
  const root = Float64Array.from(x, (_, i) => Math.sqrt(weights?.[i] ?? 1));
  const solution = solveLeastSquares(
    {
      parameterCount: 3,
      residualCount: x.length,
      residuals(p, out) {
        for (let i = 0; i < out.length; i++) {
          out[i] = root[i]! * (Math.hypot(x[i]! - p[0]!, y[i]! - p[1]!) - p[2]!);
        }
      },
      jacobian(p, out) {
        for (let i = 0; i < root.length; i++) {
          const dx = p[0]! - x[i]!;
          const dy = p[1]! - y[i]!;
          const distance = Math.hypot(dx, dy);
          out[3 * i] = (root[i]! * dx) / distance;
          out[3 * i + 1] = (root[i]! * dy) / distance;
          out[3 * i + 2] = -root[i]!;
        }
      },
    },
    [start.centreX, start.centreY, start.radius],
  );
  const { parameters, residualSumOfSquares, degreesOfFreedom, unscaledCovariance } = solution;
  if (!solution.converged || residualSumOfSquares === null) return null;
  const u = (j: number): number | null =>
    degreesOfFreedom > 0 && unscaledCovariance !== null
      ? Math.sqrt((unscaledCovariance[4 * j]! * residualSumOfSquares) / degreesOfFreedom)
      : null;
  return {
    centreX: parameters[0]!,
    centreY: parameters[1]!,
    radius: parameters[2]!,
    residualSumOfSquares,
    uCentreX: u(0),
    uCentreY: u(1),
    uRadius: u(2),
  };
}
