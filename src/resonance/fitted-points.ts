import { emptyResponse, fillResponse } from './full-response.ts';
import { lagDeg } from './models.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';
import type { FittedPoint, PlayedDownPoint } from './resonance-fit-types.ts';
import { pointName, type ResonancePoint } from './resonance-points.ts';

// A weight this close to 1 changes nothing that anyone could see.
const PLAYED_DOWN = 0.98;

/**
 * Sets every given point beside the curve; without parameters the points come back without one.
 *
 * @param residuals weighted residuals (model - observed) / u per row, and `rowWeights` the robust weights
 */
export function fittedPoints(
  points: readonly ResonancePoint[],
  observations: Observations,
  fit: {
    readonly layout: ParameterLayout;
    readonly parameters: Float64Array;
    readonly residuals: Float64Array;
    readonly rowWeights: Float64Array | null;
  } | null,
): FittedPoint[] {
  const response = fit === null ? null : emptyResponse(fit.layout);
  return points.map((point) => {
    const i = observations.points.indexOf(point);
    const rows = i < 0 ? [] : [observations.amplitudeRow[i]!, observations.lagRow[i]!];
    const used = rows.some((row) => row >= 0);
    const bare = { name: pointName(point), driveHz: point.driveHz, used };
    if (fit === null || response === null) {
      const none = { amplitude: null, lagDeg: null, amplitudeResidual: null, lagResidual: null };
      return { ...bare, ...none, weight: used ? 1 : 0 };
    }
    fillResponse(fit.layout, fit.parameters, point.driveHz, response);
    const residual = (row: number | undefined) =>
      row === undefined || row < 0 ? null : -fit.residuals[row]!;
    const weights = rows.filter((row) => row >= 0).map((row) => fit.rowWeights?.[row] ?? 1);
    const amplitude = Math.hypot(response.re, response.im);
    return {
      ...bare,
      amplitude: fit.layout.gain < 0 || !Number.isFinite(amplitude) ? null : amplitude,
      lagDeg: Number.isFinite(amplitude) ? lagDeg(response) : null,
      amplitudeResidual: residual(rows[0]),
      lagResidual: residual(rows[1]),
      weight: used ? Math.min(...weights) : 0,
    };
  });
}

/** The points whose robust weight is below 1, heaviest cut first. */
export function playedDownPoints(points: readonly FittedPoint[]): PlayedDownPoint[] {
  return points
    .filter((point) => point.used && point.weight < PLAYED_DOWN)
    .map(({ name, weight }) => ({ name, weight }))
    .sort((a, b) => a.weight - b.weight);
}
