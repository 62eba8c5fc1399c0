/** How far a registration was carried. Filled anew by each call of a registrar, so copy what is to be kept. */
export interface Registration {
  /** The marked point in pixels of the image. */
  x: number;
  y: number;
  /** ZNCC of template and frame at the last step but a negligible one; -1 where none was computed. */
  score: number;
  /** Contrast of the frame relative to the template, both on the same full scale. */
  gain: number;
  /** Root mean square of frame - gain * template - offset over the patch, DN. */
  residualDn: number;
  iterations: number;
  /** False where it ran out of iterations or of image, or the patch does not look like the template at all. */
  converged: boolean;
}

/** Settings of a registrar. */
export interface RegistrarOptions {
  /** Pixels of window beyond the patch on each side; the registrar loads it anew when the patch leaves it. */
  readonly marginPx?: number;
  /** Most steps per call. */
  readonly maxIterations?: number;
  /** A step smaller than this ends the iteration, px. */
  readonly stopPx?: number;
}

/** The margin with which the spline's borders are out of the way and the window is still small. */
export const DEFAULT_MARGIN_PX = 4;
/** Twice what a registration from 4 px away takes. */
export const DEFAULT_MAX_ITERATIONS = 25;
/** The error left after a step this small is a tenth of it: far below any noise. */
export const DEFAULT_STOP_PX = 5e-4;
/** Longer steps are outside what the linearization holds for, px. */
export const LONGEST_STEP_PX = 2;
/** Below this gain the frame shows no trace of the template. */
export const LEAST_GAIN = 0.05;
/** Windows loaded per call at most: from 4 px away two are enough. */
export const MAX_LOADS = 6;

/** A registration that has not been made. */
export function emptyRegistration(): Registration {
  return { x: 0, y: 0, score: -1, gain: 0, residualDn: 0, iterations: 0, converged: false };
}
