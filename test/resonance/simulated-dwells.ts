import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { lagDeg, type ResonanceModel, unitAmplitude, unitResponse } from '../../src/resonance/models.ts';
import type { ResonancePoint } from '../../src/resonance/resonance-points.ts';

/** Seeded normal numbers. */
export function seededNormal(seed: number): () => number {
  return seededRandom(seed).normal;
}

/** The truth of a simulated test. */
export interface SimulatedTruth {
  readonly model: ResonanceModel;
  readonly staticGain: number;
  readonly naturalHz: number;
  readonly damping: number;
}

/** Options of a simulated run sheet; uncertainties are stated on the points and, where `noise` is given, lived. */
export interface SimulationOptions {
  readonly uAmplitude?: (amplitude: number) => number | null;
  readonly uLagDeg?: number | null;
  readonly withLag?: boolean;
  readonly noise?: () => number;
}

/** Dwells of a simulated test at the given drive frequencies. */
export function simulatedDwells(
  { model, staticGain, naturalHz, damping }: SimulatedTruth,
  frequencies: readonly number[],
  options: SimulationOptions = {},
): ResonancePoint[] {
  const { uAmplitude = (a) => 0.002 + 0.005 * a, uLagDeg = 0.4, withLag = false, noise = () => 0 } = options;
  return frequencies.map((driveHz) => {
    const response = unitResponse(model, driveHz, naturalHz, damping);
    const amplitude = staticGain * unitAmplitude(response);
    const u = uAmplitude(amplitude);
    return {
      driveHz,
      amplitude: { value: amplitude + (u ?? 0) * noise(), u },
      lagDeg: withLag ? { value: lagDeg(response) + (uLagDeg ?? 0) * noise(), u: uLagDeg } : null,
    };
  });
}

/** `count` evenly spaced frequencies from `from` to `to`, both included. */
export function evenly(from: number, to: number, count: number): number[] {
  return Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
}
