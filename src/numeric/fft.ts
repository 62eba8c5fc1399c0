import FFT from 'fft.js';

/**
 * Discrete Fourier transform of a real signal, bins 0 to size/2 (size/2 + 1 values in each array):
 * X[k] = sum over n of x[n] exp(-2 pi i k n / size).
 */
export interface RealSpectrum {
  readonly size: number;
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
}

/** The smallest power of two that is not less than `count` (at least 2). */
export function nextPowerOfTwo(count: number): number {
  let size = 2;
  while (size < count) size *= 2;
  return size;
}

/**
 * Transforms a real signal, padded with zeros to `size`.
 *
 * @param size a power of two, at least 2 and at least the signal's length; the next power of two where not given
 * @throws Error where `size` is not such a number
 */
export function realSpectrum(signal: Float64Array, size = nextPowerOfTwo(signal.length)): RealSpectrum {
  if (size < signal.length || size < 2 || (size & (size - 1)) !== 0) {
    throw new Error(`cannot transform ${signal.length} values with a length of ${size}`);
  }
  const fft = new FFT(size);
  const input = new Array<number>(size).fill(0);
  for (let n = 0; n < signal.length; n++) input[n] = signal[n]!;
  const output = fft.createComplexArray() as number[];
  fft.realTransform(output, input);
  const bins = size / 2 + 1;
  const real = new Float64Array(bins);
  const imaginary = new Float64Array(bins);
  for (let k = 0; k < bins; k++) {
    real[k] = output[2 * k]!;
    imaginary[k] = output[2 * k + 1]!;
  }
  return { size, real, imaginary };
}

/** Squared magnitude of every bin, |X[k]|^2, size/2 + 1 values. */
export function spectrumPower(spectrum: RealSpectrum): Float64Array {
  return spectrum.real.map((value, k) => value ** 2 + spectrum.imaginary[k]! ** 2);
}
