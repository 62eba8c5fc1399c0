import { seededRandom } from '../numeric/seeded-random.ts';
import { fitCurve } from './fit-curve.ts';
import { solveFrom } from './fit-solve.ts';
import { gatherObservations } from './observations.ts';
import { plainNumber } from './plain-number.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import type { ResonancePoint } from './resonance-points.ts';

/** What refitting simulated repeats of the whole test says about the fit's standard uncertainties. */
export interface BootstrapCheck {
  readonly runs: number;
  /** Repeats for which the fit did not converge; they are left out below. */
  readonly failed: number;
  /** Standard deviation of each free parameter over the repeats, in the fit's order. */
  readonly standardDeviations: readonly number[];
  /** Mean shift of each free parameter over its standard deviation: the bias that curvature brings. */
  readonly relativeBias: readonly number[];
  /** True where every standard deviation agrees with the covariance within `tolerance`. */
  readonly agrees: boolean;
  readonly sentence: string;
}

// A fifth: what a reader would still call the same uncertainty, and beyond chance from 200 repeats on.
const TOLERANCE = 0.2;

/**
 * Parametric bootstrap: repeats the test on the fitted curve with noise of the size the fit found, refits each
 * repeat and compares the spread of the parameters with the covariance.
 *
 * @param points those the fit was made from; `seed` makes the outcome repeatable
 * @returns null where the fit has no numbers or no covariance
 * Source: Efron and Tibshirani, An Introduction to the Bootstrap, chapter 6 (from memory).
 */
export function bootstrapCheck(
  fit: ResonanceFit,
  points: readonly ResonancePoint[],
  runs = 300,
  seed = 1,
): BootstrapCheck | null {
  if (fit.missing !== null || fit.covariance === null || fit.scatter === null) return null;
  const observations = gatherObservations(points, fit.mode);
  const curve = fitCurve(fit, observations.driveHz);
  if (curve === null) return null;
  const centre = Float64Array.from(fit.parameters, ({ value }) => value!);
  const widening = Math.sqrt(fit.scatter.varianceFactor ?? 1);
  const random = seededRandom(seed);
  const n = centre.length;
  const sums = new Float64Array(n);
  const squares = new Float64Array(n);
  let good = 0;
  for (let run = 0; run < runs; run++) {
    const value = observations.value.slice();
    for (let i = 0; i < observations.driveHz.length; i++) {
      const a = observations.amplitudeRow[i]!;
      const l = observations.lagRow[i]!;
      if (a >= 0) value[a] = curve.amplitude![i]! + widening * observations.u[a]! * random.normal();
      if (l >= 0)
        value[l] = (curve.lagDeg[i]! * Math.PI) / 180 + widening * observations.u[l]! * random.normal();
    }
    const { solution } = solveFrom(fit.layout, { ...observations, value }, centre);
    if (!solution.converged) continue;
    good++;
    for (let j = 0; j < n; j++) {
      const shift = solution.parameters[j]! - centre[j]!;
      sums[j]! += shift;
      squares[j]! += shift * shift;
    }
  }
  if (good < 2) return null;
  const mean = sums.map((sum) => sum / good);
  const deviations = squares.map((square, j) => Math.sqrt((square - good * mean[j]! ** 2) / (good - 1)));
  const ratios = fit.parameters.map(({ u }, j) => deviations[j]! / u!);
  const worst = ratios.reduce((a, b) => (Math.abs(Math.log(b)) > Math.abs(Math.log(a)) ? b : a));
  const agrees = Math.abs(worst - 1) <= TOLERANCE;
  return {
    runs,
    failed: runs - good,
    standardDeviations: Array.from(deviations),
    relativeBias: Array.from(mean, (shift, j) => shift / deviations[j]!),
    agrees,
    sentence: agrees
      ? `${good} simulated repeats of the test agree with the stated uncertainties (within ${plainNumber(100 * Math.abs(worst - 1), 2)} %).`
      : `In ${good} simulated repeats of the test the parameters spread ${plainNumber(worst, 2)} times as much as stated: trust the intervals rather than the standard uncertainties.`,
  };
}
