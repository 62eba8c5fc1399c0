import { type MotionAxis, signedAxisAngleDeg } from '../scale/motion-axis.ts';

const DEG_PER_RAD = 180 / Math.PI;
const LEAST_U_DEG = 0.01; // no fit knows the camera better than this: lens distortion alone is of that order

/** Difference of two line directions, -90 to 90 degrees. */
function lineDifferenceDeg(a: number, b: number): number {
  return ((((a - b + 90) % 180) + 180) % 180) - 90;
}

/**
 * One motion axis for a camera setup from the axes found in its clips: the mean of their angles, weighted by
 * 1/u^2 (large motions, whose direction is well known, decide), with the uncertainty widened where the clips
 * disagree by more than they should (Birge ratio).
 * @returns null where no clip shows a direction
 */
export function setupAxis(axes: readonly MotionAxis[]): MotionAxis | null {
  const known = axes.filter((axis) => axis.uAngleDeg !== null && axis.uAngleDeg < 45);
  const best = [...known].sort((a, b) => (a.uAngleDeg ?? 0) - (b.uAngleDeg ?? 0))[0];
  if (!best) return axes[0] ?? null;
  let sumW = 0;
  let sumWD = 0;
  const deviations = known.map((axis) => {
    const u = Math.max(axis.uAngleDeg ?? 0, LEAST_U_DEG);
    const difference = lineDifferenceDeg(axis.angleDeg, best.angleDeg);
    sumW += 1 / (u * u);
    sumWD += difference / (u * u);
    return { difference, u };
  });
  const mean = sumWD / sumW;
  const chi2 = deviations.reduce((sum, each) => sum + ((each.difference - mean) / each.u) ** 2, 0);
  const birge = known.length > 1 ? Math.max(1, Math.sqrt(chi2 / (known.length - 1))) : 1;
  const angleDeg = signedAxisAngleDeg(best.angleDeg + mean);
  return {
    ...best,
    angleDeg,
    directionX: Math.cos(angleDeg / DEG_PER_RAD),
    directionY: Math.sin(angleDeg / DEG_PER_RAD),
    uAngleDeg: birge / Math.sqrt(sumW),
  };
}
