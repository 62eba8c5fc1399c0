import type { Measured } from '../numeric/measured.ts';

/** One dwell as the resonance fit sees it. */
export interface ResonancePoint {
  /** Name used when a sentence must point at this dwell; its drive frequency stands in where absent. */
  readonly id?: string;
  /** Drive frequency in Hz, positive. */
  readonly driveHz: number;
  /**
   * Amplitude, zero to peak: mm, or the gain (response over drive) where the drive amplitude is known; all
   * points of a fit alike. `u` is the part of the uncertainty that is independent from dwell to dwell, null
   * where unknown; what all dwells share (scale) goes into `commonRelativeU` of the fit's options.
   */
  readonly amplitude: Measured;
  /** Lag behind the drive in degrees with its independent standard uncertainty; null where it was not measured. */
  readonly lagDeg: Measured | null;
  /** Measured and shown, not fitted; the reason where there is one. */
  readonly excluded?: boolean | string;
}

/** Which of the measured quantities a fit uses. */
export type FitMode = 'amplitude' | 'lag' | 'complex';

/** How a sentence names a point: `dwell d3`, or `the dwell at 4.88 Hz` where it has no id. */
export function pointName(point: ResonancePoint): string {
  return point.id === undefined ? `the dwell at ${point.driveHz} Hz` : `dwell ${point.id}`;
}

/** True where the point may enter a fit of the given mode: not excluded, and it has what the mode needs. */
export function usable(point: ResonancePoint, mode: FitMode): boolean {
  if (point.excluded !== undefined && point.excluded !== false) return false;
  if (!(point.driveHz > 0 && Number.isFinite(point.driveHz))) return false;
  const hasAmplitude = point.amplitude.value !== null && point.amplitude.value > 0;
  const hasLag = point.lagDeg !== null && point.lagDeg.value !== null;
  if (mode === 'amplitude') return hasAmplitude;
  return mode === 'lag' ? hasLag : hasAmplitude || hasLag;
}

/** Complex where at least two usable points have a lag beside the amplitude, else amplitude. */
export function defaultMode(points: readonly ResonancePoint[]): FitMode {
  const withLag = points.filter((point) => usable(point, 'lag') && usable(point, 'amplitude'));
  return withLag.length >= 2 ? 'complex' : 'amplitude';
}
