import { type DuffingBranch, type DuffingParameters, duffingBranches } from './duffing-curve.ts';

const DAMPINGS = [0.002, 0.005, 0.01, 0.02, 0.05, 0.1];
// Bending at the peak in units of the damping ratio; a fold begins at about 3.
const BENDINGS = [-8, -4, -2, -1, -0.3, 0.3, 1, 2, 4, 8];

/** The branch nearest to an observed amplitude; null where there is no steady amplitude at all. */
export function nearestBranch(
  parameters: DuffingParameters,
  driveHz: number,
  observed: number,
): DuffingBranch | null {
  let nearest: DuffingBranch | null = null;
  for (const branch of duffingBranches(parameters, driveHz)) {
    const closer =
      nearest === null || Math.abs(branch.amplitude - observed) < Math.abs(nearest.amplitude - observed);
    if (closer) nearest = branch;
  }
  return nearest;
}

/**
 * Start values for a bent resonance: the largest amplitude is taken for the peak, on the backbone, and a ladder of
 * dampings and bendings is tried; best first.
 *
 * @param u standard uncertainty of each amplitude, positive
 */
export function duffingStarts(
  driveHz: Float64Array,
  amplitude: Float64Array,
  u: Float64Array,
  keep = 3,
): DuffingParameters[] {
  const top = amplitude.indexOf(Math.max(...amplitude));
  const peak = amplitude[top]!;
  const tried: { readonly start: DuffingParameters; readonly cost: number }[] = [];
  for (const dampingRatio of DAMPINGS) {
    for (const bending of BENDINGS) {
      const hardening = (bending * dampingRatio) / (peak * peak);
      const stiffening = 1 + bending * dampingRatio;
      if (!(stiffening > 0)) continue;
      const start = {
        staticGain: 2 * dampingRatio * peak,
        naturalHz: driveHz[top]! / Math.sqrt(stiffening),
        dampingRatio,
        hardening,
      };
      let cost = 0;
      for (let i = 0; i < driveHz.length; i++) {
        const branch = nearestBranch(start, driveHz[i]!, amplitude[i]!);
        cost +=
          branch === null ? Number.POSITIVE_INFINITY : ((branch.amplitude - amplitude[i]!) / u[i]!) ** 2;
      }
      if (Number.isFinite(cost)) tried.push({ start, cost });
    }
  }
  return tried
    .sort((a, b) => a.cost - b.cost)
    .slice(0, keep)
    .map(({ start }) => start);
}
