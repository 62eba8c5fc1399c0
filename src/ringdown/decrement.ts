/** Logarithmic decrement of viscous damping: ln of the ratio of two peaks one damped period apart. */
export function decrementOf(dampingRatio: number): number {
  requireUnderdamped(dampingRatio);
  return (2 * Math.PI * dampingRatio) / Math.sqrt(1 - dampingRatio ** 2);
}

/** Damping ratio from the logarithmic decrement; any size of decrement, not only small ones. */
export function dampingRatioOf(decrement: number): number {
  if (!(decrement >= 0)) throw new Error(`a decrement cannot be ${decrement}`);
  return decrement / Math.hypot(2 * Math.PI, decrement);
}

/**
 * Logarithmic decrement from two amplitudes of the same side, `periods` damped periods apart (half periods count as
 * 0.5 when amplitudes of both sides are compared).
 */
export function decrementFromAmplitudes(first: number, later: number, periods: number): number {
  if (!(first > 0 && later > 0 && periods > 0)) throw new Error('amplitudes and periods must be positive');
  return Math.log(first / later) / periods;
}

/** Damped periods until the amplitude has fallen to the given fraction. */
export function periodsToFraction(dampingRatio: number, fraction: number): number {
  if (!(fraction > 0 && fraction < 1))
    throw new Error(`a fraction between 0 and 1 is needed, not ${fraction}`);
  return Math.log(1 / fraction) / decrementOf(dampingRatio);
}

/** Fraction of the vibration's energy lost in one damped period. */
export function energyLossPerPeriod(dampingRatio: number): number {
  return 1 - Math.exp(-2 * decrementOf(dampingRatio));
}

/** Damped frequency of a natural frequency, in its unit. */
export function dampedFrequency(natural: number, dampingRatio: number): number {
  requireUnderdamped(dampingRatio);
  return natural * Math.sqrt(1 - dampingRatio ** 2);
}

function requireUnderdamped(dampingRatio: number): void {
  if (!(dampingRatio >= 0 && dampingRatio < 1)) {
    throw new Error(`damping ratio must lie in [0, 1), not ${dampingRatio}`);
  }
}
