import type { Samples } from '../sine/samples.ts';
import { demodulate, type PhasorSeries } from './demodulate.ts';

/** How far the block-by-block complex amplitude strays from its mean, as fractions of a steady amplitude. */
export interface Steadiness {
  /** Largest departure of three neighbouring blocks' mean from the mean of all. */
  readonly excursion: number;
  /** Departure that noise alone would hardly ever reach. */
  readonly excursionNoise: number;
  /** Change of the amplitude over the record, from a straight line through the blocks. */
  readonly change: number;
  readonly changeU: number;
  /** How often the smoothed departure changes sign along its main direction. */
  readonly signChanges: number;
  readonly blocks: number;
}

// Five standard deviations, so that the largest of a hundred blocks does not reach it by chance.
const NOISE_FACTOR = 5;

/** Noise of one block's complex amplitude per quadrature: within blocks or between neighbours, whichever is larger. */
function blockNoise(series: PhasorSeries): number {
  const count = series.timesS.length;
  let frames = 0;
  for (const n of series.frames) frames += n / count;
  const within = (series.frameNoise ?? 0) * Math.sqrt(2 / frames);
  // second differences are blind to slow change; their median to a single jump
  const differences: number[] = [];
  for (let j = 2; j < count; j++) {
    for (const z of [series.real, series.imaginary]) {
      differences.push(Math.abs(z[j]! - 2 * z[j - 1]! + z[j - 2]!) / Math.sqrt(6));
    }
  }
  differences.sort((a, b) => a - b);
  const between = differences.length >= 8 ? differences[differences.length >> 1]! / 0.6745 : 0;
  return Math.max(within, between);
}

/**
 * Judges how steady a motion is at a frequency without any model of how it changes.
 *
 * @param amplitude the steady amplitude the departures are compared with, unit of the samples
 * @returns null where there are fewer than four blocks of whole periods
 */
export function steadiness(samples: Samples, frequencyHz: number, amplitude: number): Steadiness | null {
  const series = demodulate(samples, frequencyHz);
  if (series === null || series.timesS.length < 4 || !(amplitude > 0)) return null;
  const count = series.timesS.length;
  const mean = (z: Float64Array) => z.reduce((sum, value) => sum + value, 0) / count;
  const [meanReal, meanImaginary] = [mean(series.real), mean(series.imaginary)];
  const size = Math.hypot(meanReal, meanImaginary) || 1;

  // departures along the mean (amplitude) and across it (phase)
  const along = new Float64Array(count);
  const across = new Float64Array(count);
  for (let j = 0; j < count; j++) {
    const [x, y] = [series.real[j]! - meanReal, series.imaginary[j]! - meanImaginary];
    along[j] = (x * meanReal + y * meanImaginary) / size / amplitude;
    across[j] = (y * meanReal - x * meanImaginary) / size / amplitude;
  }
  let excursion = 0;
  const smoothAlong: number[] = [];
  const smoothAcross: number[] = [];
  for (let j = 1; j < count - 1; j++) {
    smoothAlong.push((along[j - 1]! + along[j]! + along[j + 1]!) / 3);
    smoothAcross.push((across[j - 1]! + across[j]! + across[j + 1]!) / 3);
    excursion = Math.max(excursion, Math.hypot(smoothAlong.at(-1)!, smoothAcross.at(-1)!));
  }
  const noise = blockNoise(series) / amplitude;
  const line = slope(series.timesS, along);
  const wanders = energy(smoothAlong) >= energy(smoothAcross) ? smoothAlong : smoothAcross;
  return {
    excursion,
    excursionNoise: (NOISE_FACTOR * noise) / Math.sqrt(3),
    change: line.slope * line.span,
    changeU: noise * line.leverage * line.span,
    signChanges: wanders.filter((value, j) => j > 0 && value * wanders[j - 1]! < 0).length,
    blocks: count,
  };
}

/** True where the motion strays by more than `limit` and by more than noise explains. */
export function strays(steady: Steadiness | null, limit: number): boolean {
  return steady !== null && steady.excursion > limit + steady.excursionNoise;
}

function energy(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value * value, 0);
}

/** Least-squares slope, the standard deviation it has for unit noise, and the time it runs over. */
function slope(
  timesS: Float64Array,
  values: Float64Array,
): { slope: number; leverage: number; span: number } {
  const count = timesS.length;
  const meanTime = timesS.reduce((sum, time) => sum + time, 0) / count;
  let moment = 0;
  let square = 0;
  for (let j = 0; j < count; j++) {
    moment += (timesS[j]! - meanTime) * values[j]!;
    square += (timesS[j]! - meanTime) ** 2;
  }
  // first to last block's middle, and half a block at either end
  const span = ((timesS[count - 1]! - timesS[0]!) * count) / (count - 1);
  return { slope: moment / square, leverage: 1 / Math.sqrt(square), span };
}
