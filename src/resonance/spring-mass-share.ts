/** How much of a spring's own mass moves with its load. */
export interface SpringMassShare {
  /** First root x of x tan x = ms / M, between 0 and pi/2: the wave number times the spring's length. */
  readonly root: number;
  /** Share of the spring's mass that counts as moving, between 1/3 (heavy load) and 4/pi^2 = 0.405 (no load). */
  readonly share: number;
  /** That share of the spring's mass, kg. */
  readonly effectiveKg: number;
}

/** Share of a spring's own mass that moves when the load is much heavier than the spring. */
export const HEAVY_LOAD_SHARE = 1 / 3;
/** Share of a spring's own mass that moves when it carries nothing. */
export const NO_LOAD_SHARE = 4 / Math.PI ** 2;

// below this ratio of spring to load the series in it is exact to 1e-11, better than the difference 1/x^2 - M/ms in doubles
const SERIES_BELOW = 1e-3;

/** First root of x tan x = ratio, by bisection on x sin x - ratio cos x. */
function firstRoot(ratio: number): number {
  let low = 0;
  let high = Math.PI / 2;
  for (let k = 0; k < 60; k++) {
    const middle = (low + high) / 2;
    if (middle * Math.sin(middle) < ratio * Math.cos(middle)) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/**
 * Share of a uniform spring's own mass that moves with the load it carries: the mass that, put at the load,
 * gives the same lowest natural frequency as the spring with its mass spread along it.
 *
 * @param springMassKg mass of the spring between its fixed end and the load, above 0
 * @param loadKg mass at its moving end, 0 or more
 * @throws Error outside these ranges
 * Source: wave equation of a uniform spring with a load, x tan x = ms / M and omega = x sqrt(k / ms);
 * E. E. Galloni and M. Kohen, Am. J. Phys. 47 (1979) 1076 (from memory).
 */
export function springMassShare(springMassKg: number, loadKg: number): SpringMassShare {
  if (!(springMassKg > 0 && Number.isFinite(springMassKg)) || !(loadKg >= 0 && Number.isFinite(loadKg)))
    throw new Error(
      `need a spring mass above 0 and a load of 0 or more, got ${springMassKg} and ${loadKg} kg`,
    );
  const ratio = springMassKg / loadKg; // Infinity without load
  if (ratio < SERIES_BELOW) {
    // the share as a difference of two large numbers would lose its digits: series in ms / M instead
    const root = Math.sqrt(ratio) * (1 - ratio / 6 + (11 * ratio ** 2) / 360);
    const share = HEAVY_LOAD_SHARE + ratio / 45 - ratio ** 2 / 189;
    return { root, share, effectiveKg: share * springMassKg };
  }
  const root = loadKg === 0 ? Math.PI / 2 : firstRoot(ratio);
  const share = 1 / root ** 2 - 1 / ratio;
  return { root, share, effectiveKg: share * springMassKg };
}

/**
 * Lowest natural frequency, Hz, of a load on a uniform spring whose own mass is spread along it.
 * @param stiffnessNPerM stiffness of the spring, N/m, above 0
 */
export function loadedSpringHz(stiffnessNPerM: number, springMassKg: number, loadKg: number): number {
  return (
    Math.sqrt(stiffnessNPerM / (loadKg + springMassShare(springMassKg, loadKg).effectiveKg)) / (2 * Math.PI)
  );
}
