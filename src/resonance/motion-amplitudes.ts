import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';

/** Standard acceleration of free fall, m/s2 (exact by convention; ISO 80000-3). */
export const STANDARD_GRAVITY = 9.80665;

/** One sinusoidal motion in the three quantities that are specified for tests, all zero to peak. */
export interface MotionAmplitudes {
  readonly displacementMm: Measured;
  readonly velocityMmPerS: Measured;
  readonly accelerationMPerS2: Measured;
  /** Acceleration in multiples of standard gravity. */
  readonly accelerationG: Measured;
}

/**
 * Velocity and acceleration amplitude of a sinusoidal displacement: 2 pi f X and (2 pi f)^2 X.
 *
 * @param frequencyHz positive, with its uncertainty where that matters
 * @param correlation correlation coefficient of amplitude and frequency, 0 unless both come from one fit
 */
export function motionAmplitudes(
  amplitudeMm: Measured,
  frequencyHz: Measured,
  correlation = 0,
): MotionAmplitudes {
  const x = amplitudeMm.value;
  const f = frequencyHz.value;
  if (x === null || f === null) {
    return {
      displacementMm: amplitudeMm,
      velocityMmPerS: NOT_MEASURED,
      accelerationMPerS2: NOT_MEASURED,
      accelerationG: NOT_MEASURED,
    };
  }
  const omega = 2 * Math.PI * f;
  const relativeX = x === 0 || amplitudeMm.u === null ? null : amplitudeMm.u / x;
  const relativeF = f === 0 ? 0 : (frequencyHz.u ?? 0) / f;
  const withPower = (value: number, power: number): Measured => {
    if (relativeX === null) return measured(value, null);
    const square =
      relativeX ** 2 + (power * relativeF) ** 2 + 2 * power * correlation * relativeX * relativeF;
    return measured(value, Math.abs(value) * Math.sqrt(Math.max(0, square)));
  };
  const acceleration = (omega * omega * x) / 1000;
  return {
    displacementMm: amplitudeMm,
    velocityMmPerS: withPower(omega * x, 1),
    accelerationMPerS2: withPower(acceleration, 2),
    accelerationG: withPower(acceleration / STANDARD_GRAVITY, 2),
  };
}
