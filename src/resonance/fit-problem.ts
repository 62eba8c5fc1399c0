import type { LeastSquaresProblem } from '../numeric/least-squares-problem.ts';
import { emptyResponse, fillResponse } from './full-response.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';

/**
 * The weighted least-squares problem of a resonance fit: one residual (model - observed) / u per observed
 * amplitude and per observed lag, lags compared the short way round the circle.
 *
 * @param rowScale optional factor per row, such as the square root of a robust weight
 */
export function fitProblem(
  layout: ParameterLayout,
  observations: Observations,
  rowScale: Float64Array | null = null,
): LeastSquaresProblem {
  const { driveHz, amplitudeRow, lagRow, value, u } = observations;
  const parameterCount = layout.names.length;
  const weight = u.map((uncertainty, row) => (rowScale?.[row] ?? 1) / uncertainty);
  const response = emptyResponse(layout);

  return {
    parameterCount,
    residualCount: value.length,
    residuals(p, out) {
      for (let i = 0; i < driveHz.length; i++) {
        fillResponse(layout, p, driveHz[i]!, response);
        const { re, im } = response;
        const a = amplitudeRow[i]!;
        if (a >= 0) out[a] = (Math.hypot(re, im) - value[a]!) * weight[a]!;
        const l = lagRow[i]!;
        if (l >= 0) out[l] = shortWayRound(Math.atan2(-im, re) - value[l]!) * weight[l]!;
      }
    },
    jacobian(p, out) {
      for (let i = 0; i < driveHz.length; i++) {
        fillResponse(layout, p, driveHz[i]!, response);
        const { re, im, reBy, imBy } = response;
        const square = re * re + im * im;
        const a = amplitudeRow[i]!;
        const l = lagRow[i]!;
        for (let j = 0; j < parameterCount; j++) {
          if (a >= 0) {
            out[a * parameterCount + j] = ((re * reBy[j]! + im * imBy[j]!) / Math.sqrt(square)) * weight[a]!;
          }
          if (l >= 0) out[l * parameterCount + j] = ((im * reBy[j]! - re * imBy[j]!) / square) * weight[l]!;
        }
      }
    },
  };
}

/** The same angle in radians within (-pi, pi]. */
export function shortWayRound(angle: number): number {
  const turns = Math.round(angle / (2 * Math.PI));
  return angle - turns * 2 * Math.PI;
}
