/** One ordinate of a spectrum: its power, and where it lies from the point the level is wanted at. */
export interface SpectrumPoint {
  /** Distance along which the logarithm of the spectrum is taken as straight, 0 at the point wanted. */
  readonly x: number;
  /** Squared magnitude, exponentially distributed about the spectrum. */
  readonly power: number;
  /** Weight in the fit, 0 to 1. */
  readonly weight: number;
}

/** A spectrum's level with the degrees of freedom of that estimate, for Student's t. */
export interface SpectrumLevel {
  readonly level: number;
  readonly effectiveDof: number;
}

// Spectra of motion noise fall with some power of frequency; the slope is held to about 0 +- 3 where few ordinates
// tell it.
const SLOPE_PRIOR_SD = 3;

/** Sums of weight^power times 1, x and x^2. */
function moments(points: readonly SpectrumPoint[], power: number): readonly [number, number, number] {
  let [zeroth, first, second] = [0, 0, 0];
  for (const { weight, x } of points) {
    const w = weight ** power;
    zeroth += w;
    first += w * x;
    second += w * x * x;
  }
  return [zeroth, first, second];
}

/**
 * Level at x = 0 of a spectrum whose logarithm is straight in x, by weighted Whittle likelihood. Zero where all
 * powers are zero.
 *
 * @param points at least one, weights positive
 * Source: Whittle, Arkiv for Matematik 2 (1953) 423; local likelihood after Fan and Kreutzberger, Scand. J. Stat. 25
 * (1998) 359 (both from memory). Degrees of freedom: those whose log-variance is the estimate's, 2/variance.
 */
export function whittleLevel(points: readonly SpectrumPoint[]): SpectrumLevel {
  const [w0, w1, w2] = moments(points, 1);
  const precision = w2 + 1 / SLOPE_PRIOR_SD ** 2;
  const determinant = w0 * precision - w1 ** 2;

  // variance of the level: the estimating equation's weights, squared once
  const [s0, s1, s2] = moments(points, 2);
  const logVariance = (precision ** 2 * s0 - 2 * precision * w1 * s1 + w1 ** 2 * s2) / determinant ** 2;
  const effectiveDof = 2 / logVariance;

  const mean = points.reduce((sum, { weight, power }) => sum + weight * power, 0) / w0;
  if (!(mean > 0)) return { level: 0, effectiveDof };

  // Newton steps with the expected second derivatives
  let level = Math.log(mean);
  let slope = 0;
  for (let iteration = 0; iteration < 60; iteration++) {
    let gradientLevel = 0;
    let gradientSlope = -slope / SLOPE_PRIOR_SD ** 2;
    for (const { weight, power, x } of points) {
      const excess = weight * (power * Math.exp(-level - slope * x) - 1);
      gradientLevel += excess;
      gradientSlope += excess * x;
    }
    const stepLevel = (precision * gradientLevel - w1 * gradientSlope) / determinant;
    const stepSlope = (w0 * gradientSlope - w1 * gradientLevel) / determinant;
    // far from the answer the exponential makes full steps too long
    const damping = Math.min(1, 1 / Math.max(Math.abs(stepLevel), Math.abs(stepSlope), 1e-300));
    level += damping * stepLevel;
    slope += damping * stepSlope;
    if (Math.abs(stepLevel) + Math.abs(stepSlope) < 1e-10) break;
  }
  // the slope was taken from the same ordinates: one of them is spent, as in RSS/(n - p)
  const sameX = points.every(({ x }) => x === 0);
  const count = w0 ** 2 / s0;
  const spent = sameX || count < 2 ? 1 : count / (count - 1);
  return { level: spent * Math.exp(level), effectiveDof };
}
