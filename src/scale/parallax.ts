import { InputError } from '../errors.ts';
import type { Warning } from '../numeric/warning.ts';

/** Standard uncertainty of each distance read on a tape, mm, where none is stated. */
export const DEFAULT_DISTANCE_U_MM = 1;

/** Standard uncertainty of where the lens sees from, mm: the tape's zero, common to both distances. */
const LENS_POSITION_U_MM = 5;

/** A correction above this is one to design away, not to calculate away. */
const LARGE_PARALLAX = 0.05;

/** Distances from the camera, mm, square to the picture. */
export interface ParallaxDistances {
  readonly cameraToScaleMm: number;
  readonly cameraToMotionMm: number;
  /** Standard uncertainty of each distance, mm; `DEFAULT_DISTANCE_U_MM` where absent. */
  readonly distanceUMm?: number | undefined;
}

/** What parallax does to every length seen in the plane of motion. */
export interface Parallax {
  /** True over measured length: multiply the rule's mm per px by it. */
  readonly factor: number;
  /** Standard uncertainty of the factor. */
  readonly u: number;
  readonly warning: Warning | null;
}

/**
 * Parallax of a pinhole camera: a marker in front of the rule looks larger, measured / true = Zs / Zm, so
 * factor = Zm / Zs (Zs camera to scale, Zm camera to motion). The position of the lens, common to both
 * distances, nearly cancels; the two readings do not: du = (dZm - F dZs) / Zs.
 * @throws InputError where a distance is not positive.
 */
export function parallaxFromDistances(distances: ParallaxDistances): Parallax {
  const { cameraToScaleMm, cameraToMotionMm } = distances;
  const distanceUMm = distances.distanceUMm ?? DEFAULT_DISTANCE_U_MM;
  for (const [name, value] of [
    ['cameraToScale', cameraToScaleMm],
    ['cameraToMotion', cameraToMotionMm],
  ] as const) {
    if (!(value > 0) || !Number.isFinite(value)) {
      throw new InputError(
        `${name} is ${value} mm; give the distance from the camera, above 0, or leave both out.`,
      );
    }
  }
  if (!(distanceUMm >= 0)) throw new InputError('The uncertainty of the camera distances must be 0 or more.');
  const factor = cameraToMotionMm / cameraToScaleMm;
  const readings = (distanceUMm * Math.hypot(1, factor)) / cameraToScaleMm;
  const lens = (LENS_POSITION_U_MM * Math.abs(1 - factor)) / cameraToScaleMm;
  return { factor, u: Math.hypot(readings, lens), warning: largeParallax(factor) };
}

function largeParallax(factor: number): Warning | null {
  if (Math.abs(factor - 1) <= LARGE_PARALLAX) return null;
  const percent = (100 * Math.abs(factor - 1)).toFixed(1);
  return {
    code: 'parallax-large',
    sentence:
      `The rule lies ${percent} % nearer to or further from the camera than the motion; the amplitude is corrected, ` +
      'but put the rule into the plane of motion where you can.',
  };
}

/** Relative error of every length when the part moves out of its plane by `shiftMm` at distance `distanceMm`: shift / distance (Sutton et al. 2008, from memory). */
export function outOfPlaneScaleError(shiftMm: number, distanceMm: number): number {
  return shiftMm / distanceMm;
}
