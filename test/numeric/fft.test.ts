import { describe, expect, test } from 'vitest';
import { nextPowerOfTwo, realSpectrum, spectrumPower } from '../../src/numeric/fft.ts';

describe('real spectrum', () => {
  test('equals the defining sum, written out, for every bin', () => {
    const signal = Float64Array.from({ length: 16 }, (_, n) => Math.sin(n * n) + 0.1 * n);
    const spectrum = realSpectrum(signal);
    expect(spectrum.real.length).toBe(9);
    for (let k = 0; k <= 8; k++) {
      let real = 0;
      let imaginary = 0;
      signal.forEach((x, n) => {
        real += x * Math.cos((2 * Math.PI * k * n) / 16);
        imaginary -= x * Math.sin((2 * Math.PI * k * n) / 16);
      });
      expect(spectrum.real[k]).toBeCloseTo(real, 11);
      expect(spectrum.imaginary[k]).toBeCloseTo(imaginary, 11);
    }
  });

  test('bin 20 of cos(2 pi 20.3 n/256 + 0.7) is -7.115964012 + 108.843538153 i (numpy.fft)', () => {
    const signal = Float64Array.from({ length: 256 }, (_, n) =>
      Math.cos((2 * Math.PI * 20.3 * n) / 256 + 0.7),
    );
    const spectrum = realSpectrum(signal);
    expect(spectrum.real[20]).toBeCloseTo(-7.115964012, 8);
    expect(spectrum.imaginary[20]).toBeCloseTo(108.843538153, 8);
  });

  test('Parseval: power over all bins is the size times the sum of squares, also when padded', () => {
    const signal = Float64Array.from({ length: 100 }, (_, n) => Math.cos(n) * (n % 7));
    const spectrum = realSpectrum(signal, 256);
    const power = spectrumPower(spectrum);
    const total = 2 * power.reduce((sum, value) => sum + value, 0) - power[0]! - power[128]!;
    const energy = signal.reduce((sum, value) => sum + value * value, 0);
    expect(total / (256 * energy)).toBeCloseTo(1, 12);
  });

  test('sizes: powers of two only, never shorter than the signal', () => {
    expect([1, 2, 3, 64, 65].map(nextPowerOfTwo)).toEqual([2, 2, 4, 64, 128]);
    expect(() => realSpectrum(new Float64Array(10), 8)).toThrow(/length of 8/);
    expect(() => realSpectrum(new Float64Array(10), 12)).toThrow(/length of 12/);
  });
});
