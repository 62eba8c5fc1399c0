import { InputError } from '../errors.ts';
import type { KnownCorrection } from '../numeric/warning.ts';

/** Standard uncertainty, degrees, of the camera's squareness to the motion where none is stated. */
export const DEFAULT_TILT_U_DEG = 1;

/** Above this tilt the picture is oblique and the plane of motion should be marked instead. */
const LARGE_TILT_DEG = 10;

const RAD_PER_DEG = Math.PI / 180;

/** Fraction of the amplitude that a tilt of the motion against the measuring direction hides: 1 - cos(tilt). */
export function tiltLoss(tiltDeg: number): number {
  return 1 - Math.cos(tiltDeg * RAD_PER_DEG);
}

/**
 * Relative error, root mean square, that an unknown tilt of standard deviation `tiltUDeg` about zero leaves
 * when nothing is corrected. The loss 1 - cos(a) = a^2 / 2 is one-sided, and for a normal a its mean square
 * is 3 u^4 / 4, so the figure is sqrt(3) / 2 u^2 (u in radians).
 */
export function unknownTiltRelU(tiltUDeg: number): number {
  return (Math.sqrt(3) / 2) * (tiltUDeg * RAD_PER_DEG) ** 2;
}

/**
 * KnownCorrection for a known tilt between motion and picture plane: factor 1 / cos(tilt), with
 * u = factor * (tan(tilt) u_tilt and the one-sided rest, in quadrature). A tilt of 0 gives factor 1.
 * @throws InputError for a tilt outside -80 to 80 degrees or a negative uncertainty.
 */
export function tiltCorrection(tiltDeg: number, tiltUDeg: number = DEFAULT_TILT_U_DEG): KnownCorrection {
  if (!(Math.abs(tiltDeg) <= 80))
    throw new InputError(
      `A tilt of ${tiltDeg} degrees cannot be measured; turn the camera square to the motion.`,
    );
  if (!(tiltUDeg >= 0)) throw new InputError('The uncertainty of the tilt must be 0 degrees or more.');
  const factor = 1 / Math.cos(tiltDeg * RAD_PER_DEG);
  const slope = Math.tan(Math.abs(tiltDeg) * RAD_PER_DEG) * tiltUDeg * RAD_PER_DEG;
  const u = factor * Math.hypot(slope, unknownTiltRelU(tiltUDeg));
  if (Math.abs(tiltDeg) <= LARGE_TILT_DEG) return { factor, u, warning: null };
  return {
    factor,
    u,
    warning: {
      code: 'tilt-large',
      sentence:
        `The motion is tilted ${Math.abs(tiltDeg).toFixed(0)} degrees out of the picture; turn the camera square to it, or mark ` +
        'four points of the plane of motion.',
    },
  };
}
