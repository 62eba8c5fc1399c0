import { fitSine } from '../sine/four-parameter.ts';
import { presentSamples, type Samples, spanS } from '../sine/samples.ts';
import { steadiness } from './steadiness.ts';

/** A stretch of a record over which one sine of unchanging amplitude and phase describes the motion. */
export interface SteadyCore {
  readonly fromS: number;
  readonly toS: number;
  readonly frequencyHz: number;
  readonly frequencyU: number;
  readonly amplitude: number;
}

// Growth steps are halved until they are shorter than this share of a period.
const FINEST_STEP = 0.25;
const BASELINE_TERMS = 2;
// How often a stretch may give up its start to reach farther, and the periods it must keep.
const MOST_RENEWALS = 6;
const FEWEST_PERIODS_KEPT = 4;

/** A stretch as one sine, if it is one to within `tolerance` of its amplitude; else null. */
export function asCore(
  samples: Samples,
  fromS: number,
  toS: number,
  startHz: number | null,
  tolerance: number,
): SteadyCore | null {
  const part = presentSamples(samples.timesS, samples.values, [fromS, toS]);
  if (part.timesS.length < 10) return null;
  const fit = fitSine(part.timesS, part.values, {
    baselineTerms: BASELINE_TERMS,
    noise: 'white',
    ...(startHz === null ? {} : { startHz }),
  });
  if (fit === null || fit.amplitude < 5 * fit.amplitudeU || fit.frequencyU === null) return null;
  if (spanS(part) * fit.frequencyHz < 1.5) return null;
  const blocks = steadiness(part, fit.frequencyHz, fit.amplitude);
  const strayed = blocks === null ? fit.residualSd / fit.amplitude : blocks.excursion - blocks.excursionNoise;
  if (strayed > tolerance || endsStray(part.timesS, fit, tolerance)) return null;
  return { fromS, toS, frequencyHz: fit.frequencyHz, frequencyU: fit.frequencyU, amplitude: fit.amplitude };
}

/** Whether the residuals of the first or last period stand out of the rest: the motion changed there. */
function endsStray(
  timesS: Float64Array,
  fit: { readonly residuals: Float64Array; readonly frequencyHz: number; readonly amplitude: number },
  tolerance: number,
): boolean {
  const periodS = 1 / fit.frequencyHz;
  const [first, last] = [timesS[0]!, timesS[timesS.length - 1]!];
  let [headSum, headCount, tailSum, tailCount, midSum, midCount] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < timesS.length; i++) {
    const square = fit.residuals[i]! ** 2;
    if (timesS[i]! < first + periodS) {
      headSum += square;
      headCount++;
    } else if (timesS[i]! > last - periodS) {
      tailSum += square;
      tailCount++;
    } else {
      midSum += square;
      midCount++;
    }
  }
  const middle = midCount > 0 ? midSum / midCount : 0;
  // residual power that goes with a departure of the tolerated size, and what noise of the middle may reach
  const limit = (tolerance * fit.amplitude) ** 2 / 2 + 3 * middle;
  return headSum / Math.max(1, headCount) > limit || tailSum / Math.max(1, tailCount) > limit;
}

/**
 * Grows a stretch to both sides as far as one sine describes it, forward first. Where a dying transient at its start
 * stands in the way of going on, the start is given up: a dwell is known by its end.
 *
 * @param limits first and last time it may reach, seconds
 */
export function growCore(
  samples: Samples,
  seed: SteadyCore,
  limits: readonly [number, number],
  tolerance: number,
): SteadyCore {
  let core = seed;
  const finest = FINEST_STEP / seed.frequencyHz;
  const extend = (reach: (step: number) => readonly [number, number] | null) => {
    let step = (core.toS - core.fromS) / 2;
    while (step >= finest) {
      const wanted = reach(step);
      const grown =
        wanted === null ? null : asCore(samples, wanted[0], wanted[1], core.frequencyHz, tolerance);
      if (grown === null) step /= 2;
      else {
        core = grown;
        step *= 1.5;
      }
    }
  };
  const forward = (step: number) => {
    const toS = Math.min(limits[1], core.toS + step);
    return toS > core.toS ? ([core.fromS, toS] as const) : null;
  };
  extend(forward);
  for (let pass = 0; pass < MOST_RENEWALS; pass++) {
    const before = core;
    const [fromS, toS] = [core.toS - 0.6 * (core.toS - core.fromS), core.toS];
    if ((toS - fromS) * core.frequencyHz < FEWEST_PERIODS_KEPT) break;
    const settled = asCore(samples, fromS, toS, core.frequencyHz, tolerance);
    if (settled === null) break;
    core = settled;
    extend(forward);
    // nothing gained: keep the longer stretch
    if (core.toS < before.toS + finest) {
      core = { ...before, toS: Math.max(before.toS, core.toS) };
      break;
    }
  }
  extend((step) => {
    const fromS = Math.max(limits[0], core.fromS - step);
    return fromS < core.fromS ? [fromS, core.toS] : null;
  });
  return core;
}

// The settled part an end is measured against: from here on to this long before the end.
const SETTLED_SHARE = 0.4;
const SETTLED_MARGIN_PERIODS = 2;
// Departure from the settled sine, as a share of the amplitude, that ends a dwell.
const DEPARTURE = 0.01;

/**
 * The core with its end moved to where the motion first departs from the sine of its settled part: growth alone
 * overshoots, because the motion changes slowly where the drive changed at once.
 */
export function sharpened(samples: Samples, core: SteadyCore): SteadyCore {
  const periodS = 1 / core.frequencyHz;
  const settledFromS = core.fromS + SETTLED_SHARE * (core.toS - core.fromS);
  const settledToS = core.toS - SETTLED_MARGIN_PERIODS * periodS;
  const settled = presentSamples(samples.timesS, samples.values, [settledFromS, settledToS]);
  if ((settledToS - settledFromS) * core.frequencyHz < 2) return core;
  const fit = fitSine(settled.timesS, settled.values, {
    baselineTerms: 1,
    noise: 'white',
    startHz: core.frequencyHz,
  });
  if (fit === null) return core;

  // residual power in half-period slices from the settled part on
  const sliceS = periodS / 2;
  const limit = (DEPARTURE * fit.amplitude) ** 2 / 2 + 9 * fit.residualSd ** 2;
  const last = samples.timesS[samples.timesS.length - 1]!;
  let i = samples.timesS.findIndex((time) => time > settledToS - 2 * periodS);
  for (let fromS = settledToS - 2 * periodS; fromS < core.toS; fromS += sliceS) {
    let sum = 0;
    let count = 0;
    for (; i < samples.timesS.length && samples.timesS[i]! <= fromS + sliceS; i++) {
      const angle = 2 * Math.PI * fit.frequencyHz * (samples.timesS[i]! - fit.referenceTimeS) + fit.phaseRad;
      sum += (samples.values[i]! - fit.offset - fit.amplitude * Math.cos(angle)) ** 2;
      count++;
    }
    if (count > 0 && sum / count > limit && fromS + sliceS < last) return { ...core, toS: fromS };
  }
  return core;
}
