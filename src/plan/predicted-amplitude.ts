import type { ResonanceModel } from '../resonance/models.ts';
import { type KnowledgeCloud, quantileOf, quantileOfSorted } from './knowledge-cloud.ts';
import { planResponse } from './plan-response.ts';

/** The amplitude to expect at a drive frequency, mm zero-to-peak: the even chance and a range of nine in ten. */
export interface PredictedAmplitude {
  readonly medianMm: number;
  readonly lowMm: number;
  /** Upper bound that holds with 95 %: what is held against the travel limit. */
  readonly upperMm: number;
}

/** Amplitude per unit gain of every oscillator of the cloud at a drive frequency (length of the cloud). */
function unitAmplitudes(model: ResonanceModel, cloud: KnowledgeCloud, driveHz: number): Float64Array {
  return cloud.naturalHz.map(
    (naturalHz, k) => planResponse(model, driveHz, naturalHz, cloud.dampingRatio[k]!).amplitude,
  );
}

/**
 * Predicts the amplitude of a dwell from all that is known so far.
 * @param driveHz above 0
 * @returns null where neither a static gain nor a measured dwell tells the size of the motion
 */
export function predictAmplitude(
  model: ResonanceModel,
  cloud: KnowledgeCloud,
  driveHz: number,
): PredictedAmplitude | null {
  const { gainMm } = cloud;
  if (gainMm === null) return null;
  const amplitudes = unitAmplitudes(model, cloud, driveHz)
    .map((amplitude, k) => amplitude * gainMm[k]!)
    .sort();
  return {
    medianMm: quantileOfSorted(amplitudes, 0.5),
    lowMm: quantileOfSorted(amplitudes, 0.05),
    upperMm: quantileOfSorted(amplitudes, 0.95),
  };
}

/**
 * Median amplitude in mm where the gain is known, else in units of the static gain: enough for the ratio of two
 * steps, which is what the waiting time depends on.
 */
export function relativeAmplitude(model: ResonanceModel, cloud: KnowledgeCloud, driveHz: number): number {
  return (
    predictAmplitude(model, cloud, driveHz)?.medianMm ??
    quantileOf(unitAmplitudes(model, cloud, driveHz), 0.5)
  );
}
