import { solveLeastSquares } from '../../src/numeric/levenberg-marquardt.ts';
import type { PlanFit, PlanPoint } from '../../src/plan/plan-points.ts';
import { planResponse } from '../../src/plan/plan-response.ts';
import type { ResonanceModel } from '../../src/resonance/models.ts';

export const FORCE: ResonanceModel = { excitation: 'force', damping: 'viscous' };

/** A rig whose truth is known. Noise: u^2 = floorMm^2 + (relative * amplitude)^2. */
export interface SimulatedRig {
  readonly gainMm: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
  readonly relative: number;
  readonly floorMm: number;
}

/** Measures one dwell on the rig. */
export function measureDwell(rig: SimulatedRig, driveHz: number, normal: () => number): PlanPoint {
  const amplitude = rig.gainMm * planResponse(FORCE, driveHz, rig.naturalHz, rig.dampingRatio).amplitude;
  const u = Math.hypot(rig.floorMm, rig.relative * amplitude);
  return { driveHz, amplitudeMm: amplitude + u * normal(), uAmplitudeMm: u };
}

/** Least-squares fit of gain, natural frequency and damping in logarithms; null where it does not converge. */
export function fitDwells(points: readonly PlanPoint[], start: PlanFit | SimulatedRig): PlanFit | null {
  const solution = solveLeastSquares(
    {
      parameterCount: 3,
      residualCount: points.length,
      residuals: (p, out) => {
        points.forEach(({ driveHz, amplitudeMm, uAmplitudeMm }, i) => {
          const h = planResponse(FORCE, driveHz, Math.exp(p[1]!), Math.exp(p[2]!));
          out[i] = (Math.exp(p[0]!) * h.amplitude - amplitudeMm) / uAmplitudeMm!;
        });
      },
      jacobian: (p, out) => {
        points.forEach(({ driveHz, uAmplitudeMm }, i) => {
          const h = planResponse(FORCE, driveHz, Math.exp(p[1]!), Math.exp(p[2]!));
          const weight = (Math.exp(p[0]!) * h.amplitude) / uAmplitudeMm!;
          out.set([weight, weight * h.logByLogNatural, weight * h.logByLogDamping], 3 * i);
        });
      },
    },
    [Math.log(start.gainMm), Math.log(start.naturalHz), Math.log(start.dampingRatio)],
  );
  if (!solution.converged || solution.unscaledCovariance === null) return null;
  const values = Array.from(solution.parameters, Math.exp);
  const [gainMm, naturalHz, dampingRatio] = values as [number, number, number];
  const covariance = Array.from(
    solution.unscaledCovariance,
    (c, i) => c * values[Math.floor(i / 3)]! * values[i % 3]!,
  );
  return { gainMm, naturalHz, dampingRatio, covariance };
}

/** Root mean square. */
export const rms = (values: readonly number[]) =>
  Math.sqrt(values.reduce((s, v) => s + v * v, 0) / values.length);
