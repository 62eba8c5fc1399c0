/**
 * Damping ratio from a free decay in which the amplitude falls to `remaining` of itself in `cycles` cycles.
 *
 * @param remaining fraction of the amplitude left, between 0 and 1, ends excluded
 * @param cycles number of cycles, above 0, need not be whole
 * @throws Error outside these ranges
 * Source: logarithmic decrement d = ln(1/remaining)/cycles, zeta = d / sqrt(4 pi^2 + d^2) (textbooks).
 */
export function dampingFromDecay(remaining: number, cycles: number): number {
  if (!(remaining > 0 && remaining < 1 && cycles > 0 && Number.isFinite(cycles)))
    throw new Error(`need a remaining fraction in (0, 1) and cycles above 0, got ${remaining} and ${cycles}`);
  const decrement = -Math.log(remaining) / cycles;
  return decrement / Math.hypot(2 * Math.PI, decrement);
}

/** Damped free frequency, Hz, of an oscillator with this undamped natural frequency; 0 from critical damping on. */
export function dampedHz(naturalHz: number, dampingRatio: number): number {
  return naturalHz * Math.sqrt(Math.max(1 - dampingRatio ** 2, 0));
}
