import { InputError } from '../errors.ts';
import type { Warning } from '../numeric/warning.ts';
import { type FundamentalMotion, fundamentalMotion, scatter } from './axis-fit.ts';
import { isSeen, type PointPx, type PointTrack, seenCount } from './point-track.ts';

const DEG_PER_RAD = 180 / Math.PI;

/**
 * The two-way direction of a motion needs a sign, and any rule for it jumps somewhere. It jumps here at
 * -67.5 degrees, far from the horizontal and the vertical along which parts are set up.
 */
const SIGN_JUMP_DEG = -67.5;

/** An ellipse whose minor axis is above this fraction of its major axis is not a straight motion. */
const STRAIGHT_ELLIPTICITY = 0.05;

/** An angle known worse than this costs more than 0.1 % of the amplitude at two standard uncertainties. */
const UNCERTAIN_ANGLE_DEG = 1.3;

/** A motion below this fraction of the coordinates' own size is rounding, not motion. */
const STANDSTILL = 1e-9;

/** Frames below which a direction is not looked for. */
const MIN_FRAMES = 8;

/** The line along which displacement is measured, positive toward +x (toward +y where it stands within 22.5 degrees of the vertical). */
export interface MotionAxis {
  /** Unit vector, in the coordinates of the track it was found in (px or mm, y down). */
  readonly directionX: number;
  readonly directionY: number;
  /** Angle from +x toward +y, degrees, above -67.5 to 112.5. */
  readonly angleDeg: number;
  /** Standard uncertainty of the angle, degrees; null where it cannot be had. */
  readonly uAngleDeg: number | null;
  /** `motion`: found from the marker's own motion; `given`: two points marked by the user. */
  readonly origin: 'motion' | 'given';
  /** Minor over major axis of the ellipse the marker runs, 0 for a straight line; null where not known. */
  readonly ellipticity: number | null;
  readonly warning: Warning | null;
}

/** Angle of a two-way direction brought into the range in which its sign is stable, degrees. */
export function signedAxisAngleDeg(angleDeg: number): number {
  const turned = (((angleDeg - SIGN_JUMP_DEG) % 180) + 180) % 180;
  // the jump itself belongs to the upper end
  return turned === 0 ? SIGN_JUMP_DEG + 180 : turned + SIGN_JUMP_DEG;
}

/**
 * Principal direction of a marker's motion. With a known frequency the sine at that frequency is fitted to
 * both coordinates, with offset and linear and quadratic drift, and the direction is that of its ellipse, so
 * that drift, sway at other frequencies and slow camera motion do not turn it; without one it is the
 * principal axis of the detrended scatter. The frequency is the true one, also above half the frame rate.
 *
 * @param track px or mm, camera motion taken out; a steady window serves best
 * @param frequencyHz drive frequency, or null
 * @returns null where the marker was seen in fewer than eight frames or did not move
 */
export function axisFromMotion(track: PointTrack, frequencyHz: number | null): MotionAxis | null {
  if (seenCount(track) < MIN_FRAMES) return null;
  if (frequencyHz !== null && !(frequencyHz > 0 && Number.isFinite(frequencyHz))) {
    throw new InputError(`Drive frequency is ${frequencyHz} Hz; give a frequency above 0.`);
  }
  const motion = (frequencyHz === null ? null : fundamentalMotion(track, frequencyHz)) ?? scatter(track);
  if (motion === null || !(motion.major > STANDSTILL * size(track))) return null;
  const angleDeg = signedAxisAngleDeg(motion.angleRad * DEG_PER_RAD);
  const uAngleDeg = motion.uAngleRad * DEG_PER_RAD;
  return {
    ...directionOf(angleDeg),
    angleDeg,
    uAngleDeg,
    origin: 'motion',
    ellipticity: motion.minor / motion.major,
    warning: axisWarning(motion, uAngleDeg),
  };
}

/**
 * Motion axis through two marked points, with the uncertainty that their clicks leave.
 *
 * @param clickU standard uncertainty of each coordinate, in the unit of the points
 * @throws InputError where the points are alike
 */
export function axisFromPoints(from: PointPx, to: PointPx, clickU: number): MotionAxis {
  const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
  if (!(length > 0) || !Number.isFinite(length)) {
    throw new InputError(
      'The two points of the motion axis are alike; mark two points far apart, or let the axis be found.',
    );
  }
  const angleDeg = signedAxisAngleDeg(Math.atan2(to[1] - from[1], to[0] - from[0]) * DEG_PER_RAD);
  const uAngleDeg = Math.atan((Math.SQRT2 * clickU) / length) * DEG_PER_RAD;
  return {
    ...directionOf(angleDeg),
    angleDeg,
    uAngleDeg,
    origin: 'given',
    ellipticity: null,
    warning: uAngleDeg > UNCERTAIN_ANGLE_DEG ? uncertainAxis(uAngleDeg) : null,
  };
}

/** How two axes compare. */
export interface AxisComparison {
  /** Angle between the two lines, 0 to 90 degrees. */
  readonly differenceDeg: number;
  readonly warning: Warning | null;
}

/**
 * Compares the response axis with the drive marker's. They are one line on a straight rig; a difference
 * beyond three standard uncertainties and two degrees means a wrong marker, a rocking part or an oblique view.
 */
export function compareAxes(response: MotionAxis, drive: MotionAxis): AxisComparison {
  const turn = Math.abs(response.angleDeg - drive.angleDeg) % 180;
  const differenceDeg = Math.min(turn, 180 - turn);
  const u = Math.hypot(response.uAngleDeg ?? 0, drive.uAngleDeg ?? 0);
  if (differenceDeg <= Math.max(2, 3 * u)) return { differenceDeg, warning: null };
  return {
    differenceDeg,
    warning: {
      code: 'axis-disagrees',
      sentence:
        `Response and drive move along lines ${differenceDeg.toFixed(1)} degrees apart; check that both markers are on ` +
        'the right parts and that the camera looks square at the motion.',
    },
  };
}

/** Relative error of the amplitude, root mean square, from the axis's angle: sqrt(3) / 2 u^2 (u in radians), one-sided as 1 - cos. */
export function axisAngleRelU(axis: MotionAxis): number {
  const u = (axis.uAngleDeg ?? 0) / DEG_PER_RAD;
  return (Math.sqrt(3) / 2) * u * u;
}

/** Largest coordinate of the track. */
function size(track: PointTrack): number {
  let largest = 0;
  for (let i = 0; i < track.x.length; i++) {
    if (isSeen(track, i)) largest = Math.max(largest, Math.abs(track.x[i]!), Math.abs(track.y[i]!));
  }
  return largest;
}

function directionOf(angleDeg: number): { directionX: number; directionY: number } {
  // exact zeros for an axis along the picture's edges
  if (angleDeg === 0) return { directionX: 1, directionY: 0 };
  if (angleDeg === 90) return { directionX: 0, directionY: 1 };
  return { directionX: Math.cos(angleDeg / DEG_PER_RAD), directionY: Math.sin(angleDeg / DEG_PER_RAD) };
}

function axisWarning(motion: FundamentalMotion, uAngleDeg: number): Warning | null {
  if (uAngleDeg > UNCERTAIN_ANGLE_DEG) return uncertainAxis(uAngleDeg);
  const ellipticity = motion.minor / motion.major;
  if (motion.minor < 3 * motion.uMinor || ellipticity <= STRAIGHT_ELLIPTICITY) return null;
  return {
    code: 'axis-not-straight',
    sentence:
      `The marker runs an ellipse, ${(100 * ellipticity).toFixed(0)} % as wide as long, not a line; look for a rocking part ` +
      'or a loose guide, the amplitude given is that along the long axis.',
  };
}

function uncertainAxis(uAngleDeg: number): Warning {
  return {
    code: 'axis-uncertain',
    sentence:
      `The direction of motion is known only to ${uAngleDeg.toFixed(1)} degrees; film closer, or mark the motion axis by ` +
      'two points far apart.',
  };
}
