import { realSpectrum } from '../numeric/fft.ts';
import { type DecayingModel, projectedSum, projectModel } from '../sine/decaying-model.ts';
import { aliasHz } from '../sine/harmonics.ts';
import { evenGrid, hannPeakBin } from '../sine/interpolated-dft.ts';
import { durationS, medianIntervalS, type Samples } from '../sine/samples.ts';

/** A start for the decaying part: decay rate in 1/s and damped angular frequency in rad/s. */
export type TransientStart = readonly [number, number];

// Starts are compared on about this many frames.
const THINNED_FRAMES = 350;
// Decay rates tried, as multiples of 1/duration, from barely decaying to gone in a tenth of the record.
const SLOW_RATES = [0.4, 1, 2.2, 5, 11];
// Decay rates tried, as damping ratios, for transients short against the record.
const DAMPING_RATIOS = [0.005, 0.015, 0.04, 0.1, 0.25];

/** Every few frames, at uneven strides, so that no frequency in the record is folded onto another. */
function thinned({ timesS, values }: Samples): Samples {
  const stride = Math.ceil(timesS.length / THINNED_FRAMES);
  if (stride === 1) return { timesS, values };
  const keep: number[] = [];
  for (let group = 0; group * stride < timesS.length; group++) {
    const index = group * stride + (((group * 7919) % 104729) % stride);
    if (index < timesS.length) keep.push(index);
  }
  return {
    timesS: Float64Array.from(keep, (i) => timesS[i]!),
    values: Float64Array.from(keep, (i) => values[i]!),
  };
}

/** The frequency nearest to `nearHz` that sampling at `rateHz` shows at `seenHz`. */
export function unfoldedHz(seenHz: number, rateHz: number, nearHz: number): number {
  const whole = Math.round(nearHz / rateHz);
  let best = seenHz;
  for (let k = whole - 1; k <= whole + 1; k++) {
    for (const candidate of [k * rateHz + seenHz, k * rateHz - seenHz]) {
      if (candidate > 0 && Math.abs(candidate - nearHz) < Math.abs(best - nearHz)) best = candidate;
    }
  }
  return best;
}

/** Where the residuals of the steady fit have their strongest tone, in Hz about the drive frequency. */
function residualToneHz(samples: Samples, residuals: Float64Array, driveHz: number): number | null {
  const grid = evenGrid({ timesS: samples.timesS, values: residuals });
  if (grid === null) return null;
  const bin = hannPeakBin(realSpectrum(grid.values), 1, Math.max(1, (samples.timesS.length >> 1) - 1));
  if (bin === null || !(bin > 0)) return null;
  const seenHz = bin / (grid.values.length * grid.intervalS);
  const rateHz = 1 / medianIntervalS(samples);
  return unfoldedHz(aliasHz(seenHz, rateHz), rateHz, driveHz);
}

/**
 * Start values for the decaying part of a record, best first: a grid of decay rates at frequencies close to the drive
 * and at the strongest tone the steady fit leaves, each judged by the residual with the linear part solved for.
 *
 * @param residuals of a steady fit of the samples at the drive frequency
 * @returns at most `count` starts, apart from each other
 */
export function transientStarts(
  samples: Samples,
  residuals: Float64Array,
  model: DecayingModel,
  driveHz: number,
  count: number,
): TransientStart[] {
  const duration = durationS(samples);
  const toneHz = residualToneHz(samples, residuals, driveHz);
  const slow = SLOW_RATES.map((rate) => rate / duration);
  const candidates: TransientStart[] = [];
  const add = (frequencyHz: number, rates: readonly number[]) => {
    if (!(frequencyHz > 0)) return;
    for (const rate of rates) candidates.push([rate, 2 * Math.PI * frequencyHz]);
  };
  for (let k = -4; k <= 4; k++) add(driveHz + (0.4 * k) / duration, slow);
  for (const centreHz of toneHz === null ? [driveHz] : [driveHz, toneHz]) {
    add(centreHz, [...slow, ...DAMPING_RATIOS.map((ratio) => ratio * 2 * Math.PI * centreHz)]);
  }

  const few = thinned(samples);
  const steadyHz = model.steady?.frequencyHz ?? 0;
  const judged = candidates
    .map((start) => ({ start, sum: projectedSum(projectModel(model, few, [...start, steadyHz]), few) }))
    .filter(({ sum }) => Number.isFinite(sum))
    .sort((a, b) => a.sum - b.sum);
  const chosen: TransientStart[] = [];
  for (const { start } of judged) {
    const apart = chosen.every(
      (other) => Math.abs(other[1] - start[1]) > 1 / duration || Math.abs(Math.log(other[0] / start[0])) > 1,
    );
    if (apart) chosen.push(start);
    if (chosen.length === count) break;
  }
  return chosen;
}
