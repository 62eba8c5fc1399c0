import { solveLeastSquares } from '../numeric/levenberg-marquardt.ts';
import { type Measured, measured } from '../numeric/measured.ts';
import { centreAngle } from './circle-angles.ts';
import type { Circle } from './circle-fit.ts';
import type { CirclePlane } from './circle-plane.ts';
import { shortWayRound } from './fit-problem.ts';
import type { ResonanceModel } from './models.ts';

/** Resonance read from the way the responses run round their circle. */
export interface CircleResonance {
  readonly naturalHz: Measured;
  /** Damping ratio (viscous) or loss factor (structural). */
  readonly damping: Measured;
  /** How far the resonance point is turned about the centre from where the model puts it, degrees. */
  readonly turnDeg: Measured;
}

/** Direction from the centre in which the model, undisturbed and with a positive gain, has its resonance point. */
function resonanceDirection(model: ResonanceModel, damping: number): number {
  if (model.damping === 'structural') {
    return -Math.PI / 2 + (model.excitation === 'base' ? Math.atan(damping) : 0);
  }
  return model.excitation === 'force' || model.excitation === 'spring-end' ? 0 : Math.PI;
}

/**
 * Fits point = centre + radius exp(i (direction + angle(f))) to the plotted responses: centre, radius and
 * direction of the circle, natural frequency and damping, all free, so that the uncertainties know of each other.
 * At least four points.
 *
 * @param circle start values of the circle; `startHz` and `startDamping` those of the resonance
 * @returns null where the responses do not run round the circle as the model says
 */
export function fitCircleResonance(
  { driveHz, x, y, u }: CirclePlane,
  circle: Circle,
  model: ResonanceModel,
  startHz: number,
  startDamping: number,
): CircleResonance | null {
  const count = driveHz.length;
  const viscous = model.damping === 'viscous';
  const weight = driveHz.map((_, i) => 1 / (u?.[i] ?? 1));
  const start = [
    circle.centreX,
    circle.centreY,
    circle.radius,
    meanDirection(driveHz, x, y, circle, model, startHz, startDamping),
    startHz,
    startDamping,
  ];
  const solution = solveLeastSquares(
    {
      parameterCount: 6,
      residualCount: 2 * count,
      residuals(p, out) {
        for (let i = 0; i < count; i++) {
          const angle = p[3]! + centreAngle(model.damping, driveHz[i]!, p[4]!, p[5]!);
          out[2 * i] = weight[i]! * (p[0]! + p[2]! * Math.cos(angle) - x[i]!);
          out[2 * i + 1] = weight[i]! * (p[1]! + p[2]! * Math.sin(angle) - y[i]!);
        }
      },
      jacobian(p, out) {
        for (let i = 0; i < count; i++) {
          const r = driveHz[i]! / p[4]!;
          const g = viscous ? 2 * p[5]! * r : p[5]!;
          const a = 1 - r * r;
          const angle = p[3]! + 2 * Math.atan(a / g);
          // d(2 atan(a/g)) = 2 (g da - a dg) / (a^2 + g^2)
          const perSize = 2 / (a * a + g * g);
          const byHz = perSize * ((g * 2 * r * r) / p[4]! + (viscous ? (a * g) / p[4]! : 0));
          const byDamping = -perSize * a * (viscous ? 2 * r : 1);
          const [cos, sin] = [weight[i]! * Math.cos(angle), weight[i]! * Math.sin(angle)];
          const along = [-p[2]! * sin, p[2]! * cos] as const;
          out.set([weight[i]!, 0, cos, along[0], along[0] * byHz, along[0] * byDamping], 12 * i);
          out.set([0, weight[i]!, sin, along[1], along[1] * byHz, along[1] * byDamping], 12 * i + 6);
        }
      },
    },
    start,
  );
  const { parameters, unscaledCovariance: covariance, degreesOfFreedom: dof } = solution;
  const sum = solution.residualSumOfSquares;
  const damping = parameters[5]!;
  if (!solution.converged || covariance === null || sum === null || !(damping > 0)) return null;
  // points keep their own uncertainty unless they scatter more
  const factor = u === null ? sum / dof : Math.max(1, sum / dof);
  const uAt = (j: number) => Math.sqrt(covariance[7 * j]! * factor);
  const degrees = 180 / Math.PI;
  const turn = shortWayRound(parameters[3]! - resonanceDirection(model, damping));
  return {
    naturalHz: measured(parameters[4]!, uAt(4)),
    damping: measured(damping, uAt(5)),
    turnDeg: measured(turn * degrees, uAt(3) * degrees),
  };
}

/** Mean of what the model leaves of the angles seen from the centre. */
function meanDirection(
  driveHz: Float64Array,
  x: Float64Array,
  y: Float64Array,
  circle: Circle,
  model: ResonanceModel,
  naturalHz: number,
  damping: number,
): number {
  let cos = 0;
  let sin = 0;
  for (let i = 0; i < driveHz.length; i++) {
    const seen = Math.atan2(y[i]! - circle.centreY, x[i]! - circle.centreX);
    const left = seen - centreAngle(model.damping, driveHz[i]!, naturalHz, damping);
    cos += Math.cos(left);
    sin += Math.sin(left);
  }
  return Math.atan2(sin, cos);
}
