import type { Observed, PlanPoint, PlanSetting } from './plan-points.ts';
import { planResponse } from './plan-response.ts';

/** An oscillator of which frequencies are judged: static gain (mm, or 1), natural frequency, damping ratio. */
export interface Oscillator {
  readonly gain: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
}

/** Place of the logarithm of the static gain in an information matrix. */
export const LOG_GAIN = 0;
/** Place of the logarithm of the natural frequency. */
export const LOG_NATURAL = 1;
/** Place of the logarithm of the damping ratio. */
export const LOG_DAMPING = 2;
/** Place of the lag's zero, in radians. */
export const LAG_ZERO = 3;
/** Parameters of an information matrix, which is row-major INFORMATION_SIZE x INFORMATION_SIZE. */
export const INFORMATION_SIZE = 4;

const SMALLEST_LAG_U_RAD = 0.002; // a tenth of a degree: no lag from a clip is better

/**
 * Information before any dwell. The lag's zero counts as known (and then stands apart from all else) unless it has
 * to be found with the rest.
 */
export function noInformation(observed: Observed): Float64Array {
  const information = new Float64Array(INFORMATION_SIZE ** 2);
  if (observed !== 'amplitude-and-lag-from-unknown-zero')
    information[LAG_ZERO * INFORMATION_SIZE + LAG_ZERO] = 1;
  return information;
}

/**
 * Adds to a Fisher information matrix what one more dwell tells of an oscillator: its amplitude and, where
 * observed, its lag, whose uncertainty is the relative one of the amplitude in radians.
 *
 * @param information lower triangle of row-major 4 x 4, see the places above; changed in place
 * @param uAmplitude standard uncertainty of the amplitude where it is known, else the expected noise is used
 * @param uLagRad standard uncertainty of the lag in radians where it is known
 * Source: Fisher information of independent normal observations, J' W J.
 */
export function addDwell(
  information: Float64Array,
  setting: PlanSetting,
  { gain, naturalHz, dampingRatio }: Oscillator,
  driveHz: number,
  uAmplitude: number | null = null,
  uLagRad: number | null = null,
): void {
  const h = planResponse(setting.model, driveHz, naturalHz, dampingRatio);
  const amplitude = gain * h.amplitude;
  const { relative, floorMm } = setting.noise;
  const relativeVariance =
    uAmplitude === null ? relative ** 2 + (floorMm / amplitude) ** 2 : (uAmplitude / amplitude) ** 2;
  addRow(information, 1, h.logByLogNatural, h.logByLogDamping, 0, 1 / relativeVariance);
  if (setting.observed === 'amplitude') return;
  const lagVariance = (uLagRad === null ? relativeVariance : uLagRad ** 2) + SMALLEST_LAG_U_RAD ** 2;
  const byZero = setting.observed === 'amplitude-and-lag' ? 0 : 1;
  addRow(information, 0, h.lagByLogNatural, h.lagByLogDamping, byZero, 1 / lagVariance);
}

function addRow(
  information: Float64Array,
  byGain: number,
  byNatural: number,
  byDamping: number,
  byZero: number,
  weight: number,
): void {
  // lower triangle only: everything that reads an information matrix keeps to it
  information[0]! += weight * byGain * byGain;
  information[4]! += weight * byNatural * byGain;
  information[5]! += weight * byNatural * byNatural;
  information[8]! += weight * byDamping * byGain;
  information[9]! += weight * byDamping * byNatural;
  information[10]! += weight * byDamping * byDamping;
  information[12]! += weight * byZero * byGain;
  information[13]! += weight * byZero * byNatural;
  information[14]! += weight * byZero * byDamping;
  information[15]! += weight * byZero * byZero;
}

/** Information of the dwells measured so far about an oscillator, with their own uncertainties where known. */
export function informationOf(
  setting: PlanSetting,
  oscillator: Oscillator,
  points: readonly PlanPoint[],
): Float64Array {
  const information = noInformation(setting.observed);
  for (const point of points) {
    const withLag = setting.observed === 'amplitude' ? 'amplitude-and-lag' : setting.observed;
    const own: PlanSetting = { ...setting, observed: point.lagDeg == null ? 'amplitude' : withLag };
    const uLagRad = point.uLagDeg == null ? null : (point.uLagDeg * Math.PI) / 180;
    addDwell(information, own, oscillator, point.driveHz, point.uAmplitudeMm, uLagRad);
  }
  return information;
}
