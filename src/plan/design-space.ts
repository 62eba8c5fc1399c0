import {
  INFORMATION_SIZE,
  informationOf,
  LOG_DAMPING,
  LOG_GAIN,
  LOG_NATURAL,
  type Oscillator,
} from './dwell-information.ts';
import { CLOUD_SIZE, type KnowledgeCloud, quantileOf } from './knowledge-cloud.ts';
import type { PlanPoint, PlanSetting } from './plan-points.ts';
import { planResponse } from './plan-response.ts';

const OSCILLATORS = 30;
const STRIDE = 17; // steps through the cloud, which is evenly ordered, without falling in step with its order

/** A few oscillators that stand for the cloud; the gain is 1 where it is not known. */
export function representatives(cloud: KnowledgeCloud): Oscillator[] {
  return Array.from({ length: OSCILLATORS }, (_, k) => {
    const index = (STRIDE * k + 8) % CLOUD_SIZE;
    return {
      gain: cloud.gainMm?.[index] ?? 1,
      naturalHz: cloud.naturalHz[index]!,
      dampingRatio: cloud.dampingRatio[index]!,
    };
  });
}

/** The oscillator in the middle of the cloud. */
export function typicalOscillator(cloud: KnowledgeCloud): Oscillator {
  return {
    gain: cloud.gainMm === null ? 1 : quantileOf(cloud.gainMm, 0.5),
    naturalHz: quantileOf(cloud.naturalHz, 0.5),
    dampingRatio: quantileOf(cloud.dampingRatio, 0.5),
  };
}

/** Amplitude at the typical oscillator's natural frequency, mm or in units of its gain. */
export function typicalPeak(setting: Pick<PlanSetting, 'model'>, oscillator: Oscillator): number {
  const { gain, naturalHz, dampingRatio } = oscillator;
  return gain * planResponse(setting.model, naturalHz, naturalHz, dampingRatio).amplitude;
}

/** Place and inverse variance of each logarithm in the cloud, as if its spreads were independent and normal. */
function spreadInformation(cloud: KnowledgeCloud): [place: number, inverseVariance: number][] {
  const inverse = (spread: number) => 1 / Math.max(spread, 1e-9) ** 2;
  return [
    [LOG_GAIN, inverse(cloud.gainMm === null ? UNKNOWN_GAIN_SPREAD : logSpread(cloud.gainMm))],
    [LOG_NATURAL, inverse(logSpread(cloud.naturalHz))],
    [LOG_DAMPING, inverse(logSpread(cloud.dampingRatio))],
  ];
}

const UNKNOWN_GAIN_SPREAD = 3; // a factor of twenty either way

/** Half the range of the middle two thirds of the logarithms: a standard deviation where they are normal. */
export function logSpread(values: Float64Array): number {
  const logs = values.map(Math.log);
  return (quantileOf(logs, 0.8413) - quantileOf(logs, 0.1587)) / 2;
}

/**
 * What the dwells so far tell of an oscillator, with a share (0 to 1) of what the cloud knows beside them, so that
 * one or two dwells can be judged as well.
 */
export function heldInformation(
  setting: PlanSetting,
  cloud: KnowledgeCloud,
  points: readonly PlanPoint[],
  oscillator: Oscillator,
  share: number,
): Float64Array {
  const information = informationOf(setting, oscillator, points);
  const spread = spreadInformation(cloud);
  for (const [place, value] of spread) information[place * (INFORMATION_SIZE + 1)]! += share * value;
  return information;
}

/** Where the response is looked at. Frequencies in Hz. */
export interface FrequencyRange {
  /** Two wide frequencies on the flanks, where the model shows whether it holds. */
  readonly wide: readonly [number, number];
  /** Candidates from the lower to the upper wide one, on the generator's steps, ascending. */
  readonly candidates: readonly number[];
  readonly resolutionHz: number;
}

const WIDE_HALF_BANDWIDTHS = 5;
const WIDE_AT_LEAST = 0.15; // of the natural frequency
const WIDE_AT_MOST = 0.5;
const STEPS_PER_HALF_BANDWIDTH = 5;

/**
 * Finds the range to plan in: around what the natural frequency may be (nine chances in ten) and well down both
 * flanks.
 *
 * @param resolutionHz smallest step of the generator, above 0, or null where unknown: then a thousandth of the
 *   decade of the natural frequency (steps of a thousandth of a hertz at 1 Hz are common practice, no source)
 */
export function frequencyRange(cloud: KnowledgeCloud, resolutionHz: number | null): FrequencyRange {
  const { naturalHz, dampingRatio } = typicalOscillator(cloud);
  const step = resolutionHz ?? 10 ** (Math.floor(Math.log10(naturalHz)) - 3);
  const reach = Math.min(WIDE_HALF_BANDWIDTHS * dampingRatio, WIDE_AT_MOST);
  const low = Math.min(quantileOf(cloud.naturalHz, 0.05) * (1 - reach), naturalHz * (1 - WIDE_AT_LEAST));
  const high = Math.max(quantileOf(cloud.naturalHz, 0.95) * (1 + reach), naturalHz * (1 + WIDE_AT_LEAST));
  const wide = [Math.max(onSteps(low, step), step), onSteps(high, step)] as const;
  const count = Math.min(
    Math.max(Math.round(((high - low) * STEPS_PER_HALF_BANDWIDTH) / (dampingRatio * naturalHz)), 60),
    160,
  );
  const candidates = new Set<number>();
  for (let i = 0; i <= count; i++) candidates.add(onSteps(wide[0] + ((wide[1] - wide[0]) * i) / count, step));
  return { wide, candidates: [...candidates].sort((a, b) => a - b), resolutionHz: step };
}

/** The nearest frequency that the generator can be set to, without the dust of binary fractions. */
export function onSteps(frequencyHz: number, resolutionHz: number): number {
  return Number((Math.round(frequencyHz / resolutionHz) * resolutionHz).toPrecision(12));
}
