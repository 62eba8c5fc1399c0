import { type Measured, measured } from '../numeric/measured.ts';
import { chiSquareCdf } from '../numeric/quantiles.ts';
import { plainNumber } from './plain-number.ts';
import { type ResonancePoint, usable } from './resonance-points.ts';

/** Amplitude stepping upward against downward at one drive frequency. */
export interface DirectionPair {
  readonly driveHz: number;
  /** Upward minus downward amplitude over their mean. */
  readonly relativeDifference: Measured;
}

/** Whether it matters from which side a drive frequency is reached. */
export interface StepDirection {
  readonly pairs: readonly DirectionPair[];
  /** Probability of differences this large by chance; null where unknown. */
  readonly pValue: number | null;
  /** True where the direction matters; null where it cannot be told. */
  readonly differs: boolean | null;
  readonly sentence: string;
}

const SAME_FREQUENCY = 1e-4;
const SIGNIFICANCE = 0.01;

/**
 * Compares dwells reached by upward steps with dwells reached by downward steps at the same drive frequency
 * (within 1e-4). Differences come from jumps of a bent resonance, dry friction, play, or warming.
 */
export function compareStepDirections(
  upward: readonly ResonancePoint[],
  downward: readonly ResonancePoint[],
): StepDirection {
  const down = downward.filter((point) => usable(point, 'amplitude'));
  const pairs: DirectionPair[] = [];
  let chi2 = 0;
  let judged = 0;
  for (const up of upward.filter((point) => usable(point, 'amplitude'))) {
    const other = down.find((point) => Math.abs(point.driveHz / up.driveHz - 1) < SAME_FREQUENCY);
    if (other === undefined) continue;
    const mean = (up.amplitude.value! + other.amplitude.value!) / 2;
    const difference = up.amplitude.value! - other.amplitude.value!;
    const u =
      up.amplitude.u === null || other.amplitude.u === null
        ? null
        : Math.hypot(up.amplitude.u, other.amplitude.u);
    pairs.push({
      driveHz: up.driveHz,
      relativeDifference: measured(difference / mean, u === null ? null : u / mean),
    });
    if (u !== null && u > 0) {
      chi2 += (difference / u) ** 2;
      judged++;
    }
  }
  if (pairs.length === 0) {
    return {
      pairs,
      pValue: null,
      differs: null,
      sentence: 'No drive frequency was reached both by an upward and by a downward step.',
    };
  }
  if (judged === 0) {
    return {
      pairs,
      pValue: null,
      differs: null,
      sentence: 'Upward and downward steps cannot be compared: the amplitudes have no uncertainty.',
    };
  }
  const pValue = 1 - chiSquareCdf(chi2, judged);
  const differs = pValue < SIGNIFICANCE;
  const worst = pairs.reduce((a, b) => (size(b) > size(a) ? b : a));
  const percent = plainNumber(100 * size(worst), 2);
  return {
    pairs,
    pValue,
    differs,
    sentence: differs
      ? `Upward and downward steps give different amplitudes, by ${percent} % at ${plainNumber(worst.driveHz, 4)} Hz: a bent resonance, dry friction, play or warming. Keep to one direction and say which.`
      : `Upward and downward steps agree at ${judged} drive ${judged === 1 ? 'frequency' : 'frequencies'} within their uncertainty.`,
  };
}

function size(pair: DirectionPair): number {
  return Math.abs(pair.relativeDifference.value ?? 0);
}
