import { nextPowerOfTwo, type RealSpectrum, realSpectrum } from '../numeric/fft.ts';
import { durationS, type Samples } from './samples.ts';

/** Squared magnitude of bin k under a Hann window, from the plain spectrum: H = X/2 - (X[k-1] + X[k+1])/4. */
function hannPower({ real, imaginary }: RealSpectrum, k: number): number {
  const last = real.length - 1;
  const before = Math.abs(k - 1);
  const after = k + 1 > last ? 2 * last - k - 1 : k + 1;
  // a real signal's spectrum mirrors at both ends with its imaginary part reversed
  const imaginaryBefore = k === 0 ? -imaginary[before]! : imaginary[before]!;
  const imaginaryAfter = k + 1 > last ? -imaginary[after]! : imaginary[after]!;
  const re = real[k]! / 2 - (real[before]! + real[after]!) / 4;
  const im = imaginary[k]! / 2 - (imaginaryBefore + imaginaryAfter) / 4;
  return re * re + im * im;
}

/**
 * Frequency of the strongest tone in a spectrum, in bins with a fraction: two-bin interpolation under a Hann window.
 *
 * @param spectrum of a real signal whose mean was taken out
 * @param fromBin first bin looked at (at least 1)
 * @param toBin last bin looked at (at most size/2 - 1)
 * @returns null where nothing stands out because all bins are zero
 * Source: Grandke, IEEE Trans. Instrum. Meas. 32 (1983) 350 (from memory): d = (2a - 1)/(a + 1), a = |H1|/|H0|.
 */
export function hannPeakBin(
  spectrum: RealSpectrum,
  fromBin = 1,
  toBin = spectrum.size / 2 - 1,
): number | null {
  let peak = -1;
  let peakPower = 0;
  for (let k = Math.max(1, fromBin); k <= Math.min(toBin, spectrum.size / 2 - 1); k++) {
    const power = hannPower(spectrum, k);
    if (power > peakPower) {
      peak = k;
      peakPower = power;
    }
  }
  if (peak < 0) return null;
  const before = hannPower(spectrum, peak - 1);
  const after = hannPower(spectrum, peak + 1);
  const side = after >= before ? 1 : -1;
  const ratio = Math.sqrt(Math.max(before, after) / peakPower);
  return peak + (side * (2 * ratio - 1)) / (ratio + 1);
}

/**
 * The samples on an even grid of a power-of-two length over the record, mean taken out, by straight lines between
 * neighbours: good enough to find where a tone is, not to measure it.
 *
 * @returns values and the grid's interval in seconds; null for fewer than four samples
 */
export function evenGrid(
  samples: Samples,
): { readonly values: Float64Array; readonly intervalS: number } | null {
  const { timesS, values } = samples;
  const n = timesS.length;
  if (n < 4) return null;
  const size = nextPowerOfTwo(n);
  const intervalS = durationS(samples) / size;
  let mean = 0;
  for (const value of values) mean += value / n;
  const even = new Float64Array(size);
  let at = 0;
  for (let k = 0; k < size; k++) {
    const time = timesS[0]! + k * intervalS;
    while (at < n - 2 && timesS[at + 1]! <= time) at++;
    const part = Math.min(1, (time - timesS[at]!) / (timesS[at + 1]! - timesS[at]!));
    even[k] = values[at]! + part * (values[at + 1]! - values[at]!) - mean;
  }
  return { values: even, intervalS };
}

/**
 * Frequency in Hz of the strongest tone in the samples, for a start value: error below half of 1/duration for two
 * periods or more. Tones above half the mean frame rate show at their alias.
 *
 * @returns null for fewer than four samples or a record that does not move
 */
export function strongestToneHz(samples: Samples): number | null {
  const grid = evenGrid(samples);
  if (grid === null) return null;
  const size = grid.values.length;
  const meanRateBins = Math.floor(samples.timesS.length / 2);
  const bin = hannPeakBin(realSpectrum(grid.values, size), 1, Math.max(1, meanRateBins - 1));
  return bin === null || !(bin > 0) ? null : bin / (size * grid.intervalS);
}
