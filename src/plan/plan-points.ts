import type { ResonanceModel } from '../resonance/models.ts';

/** A dwell that has been measured, as planning needs it. Amplitudes zero-to-peak. */
export interface PlanPoint {
  readonly driveHz: number;
  readonly amplitudeMm: number;
  /** Independent standard uncertainty of the amplitude, mm; null where unknown. */
  readonly uAmplitudeMm: number | null;
  /** Lag behind the drive in degrees, where the exciter was in view. */
  readonly lagDeg?: number | null;
  readonly uLagDeg?: number | null;
}

/**
 * A resonance fit, as planning needs it: static gain in mm, undamped natural frequency, damping ratio (half the
 * loss factor where damping is structural) and their covariance, row-major 3 x 3 in this order.
 */
export interface PlanFit {
  readonly gainMm: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
  readonly covariance: readonly number[];
}

/**
 * How uncertain the amplitude of a further dwell will be: u^2 = floorMm^2 + (relative * amplitude)^2.
 * Without a known gain amplitudes are in units of the static gain, and so is the floor.
 */
export interface DwellNoise {
  readonly relative: number;
  readonly floorMm: number;
}

/**
 * What is observed at each dwell: the amplitude alone, the lag behind the exciter as well, or a lag counted from an
 * unknown zero (behind a trigger light, say), which has to be found with the rest.
 */
export type Observed = 'amplitude' | 'amplitude-and-lag' | 'amplitude-and-lag-from-unknown-zero';

/** The frame in which frequencies are chosen. */
export interface PlanSetting {
  readonly model: ResonanceModel;
  readonly observed: Observed;
  readonly noise: DwellNoise;
}

// Where no dwell has been measured and no camera is known (common practice, no source).
const ASSUMED_RELATIVE = 0.01;
const ASSUMED_FLOOR_OF_PEAK = 0.005;

/**
 * Noise to expect of a further dwell, from those measured (the smallest uncertainty as floor, the rest as a
 * relative part), or assumed: one percent of the amplitude, or what is wanted, and half a percent of the peak.
 * @param peakMm the largest amplitude expected, in the unit that amplitudes will have
 */
export function expectedNoise(
  points: readonly PlanPoint[],
  peakMm: number,
  wantedRelative = ASSUMED_RELATIVE,
): DwellNoise {
  const known = points.filter((point) => point.uAmplitudeMm !== null && point.uAmplitudeMm > 0);
  if (known.length === 0) return { relative: wantedRelative, floorMm: ASSUMED_FLOOR_OF_PEAK * peakMm };
  const floorMm = Math.min(...known.map((point) => point.uAmplitudeMm ?? 0));
  const relatives = known
    .map((point) => Math.sqrt((point.uAmplitudeMm ?? 0) ** 2 - floorMm ** 2) / point.amplitudeMm)
    .sort((a, b) => a - b);
  return { relative: relatives[Math.floor(relatives.length / 2)] ?? 0, floorMm };
}
