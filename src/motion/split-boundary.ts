import { presentSamples, type Samples } from '../sine/samples.ts';
import { fitSineAtFrequency } from '../sine/three-parameter.ts';
import type { DwellSegment } from './change-points.ts';
import { fitJoint } from './joint-fit.ts';

// Boundaries tried in each round, and rounds, each looking closer around the best.
const TRIED = 9;
const ROUNDS = 3;
const BASELINE_TERMS = 1;

/** Sum of squares that steady motion at a frequency, with a transient where it helps, leaves of a stretch. */
function unexplained(samples: Samples, frequencyHz: number, fromS: number, toS: number): number {
  const part = presentSamples(samples.timesS, samples.values, [fromS, toS]);
  const options = { baselineTerms: BASELINE_TERMS };
  const steady = fitSineAtFrequency(part.timesS, part.values, frequencyHz, { ...options, noise: 'white' });
  if (steady === null) {
    // too short for a fit: nothing of it is explained
    const mean = part.values.reduce((sum, value) => sum + value, 0) / Math.max(1, part.values.length);
    return part.values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  }
  const joint = fitJoint(part, { ...options, driveHz: frequencyHz, steadyResiduals: steady.residuals });
  return Math.min(steady.residualSumOfSquares, joint?.residualSumOfSquares ?? Number.POSITIVE_INFINITY);
}

/** The time between two dwells of known frequency at which both together explain the motion best. */
function bestBoundary(samples: Samples, before: DwellSegment, after: DwellSegment): number {
  const [fromS, toS] = [before.fromS, after.toS];
  let [low, high] = [fromS + 0.1 * (toS - fromS), toS - 0.1 * (toS - fromS)];
  let best = before.toS;
  for (let round = 0; round < ROUNDS; round++) {
    let least = Number.POSITIVE_INFINITY;
    for (let k = 0; k < TRIED; k++) {
      const atS = low + ((high - low) * k) / (TRIED - 1);
      const sum =
        unexplained(samples, before.frequencyHz, fromS, atS) +
        unexplained(samples, after.frequencyHz, atS, toS);
      if (sum < least) {
        least = sum;
        best = atS;
      }
    }
    const step = (high - low) / (TRIED - 1);
    [low, high] = [Math.max(low, best - step), Math.min(high, best + step)];
  }
  return best;
}

/**
 * Moves the boundaries of dwells that never came to rest to where steady motion and transient on either side explain
 * the motion best; boundaries between dwells that were seen stay.
 */
export function placeUnseen(samples: Samples, segments: readonly DwellSegment[]): DwellSegment[] {
  const placed = segments.slice();
  for (let k = 0; k + 1 < placed.length; k++) {
    const [before, after] = [placed[k]!, placed[k + 1]!];
    // the end of a dwell that was seen is known
    if (before.seen) continue;
    const atS = bestBoundary(samples, before, after);
    placed[k] = { ...before, toS: atS };
    placed[k + 1] = { ...after, fromS: atS };
  }
  return placed;
}
