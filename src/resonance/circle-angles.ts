import type { Damping } from './models.ts';

/**
 * Angle at the circle's centre from the resonance point, in radians: 2 atan((1 - r^2) / (2 zeta r)) or
 * 2 atan((1 - r^2) / eta), r = f/fn; positive below resonance.
 */
export function centreAngle(damping: Damping, driveHz: number, naturalHz: number, loss: number): number {
  const r = driveHz / naturalHz;
  const g = damping === 'viscous' ? 2 * loss * r : loss;
  return 2 * Math.atan((1 - r * r) / g);
}

/**
 * Damping from two points of the circle, one on each side of resonance.
 * Viscous: 2 zeta fn = (fa^2 - fb^2) / (fa tan(a/2) + fb tan(b/2)); structural: eta = (fa^2 - fb^2) /
 * (fn^2 (tan(a/2) + tan(b/2))).
 *
 * @param aboveHz, belowHz drive frequencies above and below the natural frequency
 * @param aboveAngle, belowAngle angles at the centre from the resonance point, magnitudes in (0, pi)
 * Source: Ewins, Modal Testing (from memory).
 */
export function dampingFromAngles(
  damping: Damping,
  naturalHz: number,
  aboveHz: number,
  aboveAngle: number,
  belowHz: number,
  belowAngle: number,
): number {
  const a = Math.tan(aboveAngle / 2);
  const b = Math.tan(belowAngle / 2);
  const difference = aboveHz * aboveHz - belowHz * belowHz;
  return damping === 'viscous'
    ? difference / (aboveHz * a + belowHz * b) / (2 * naturalHz)
    : difference / (naturalHz * naturalHz * (a + b));
}
