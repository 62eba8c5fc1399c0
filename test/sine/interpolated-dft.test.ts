import { describe, expect, test } from 'vitest';
import { realSpectrum } from '../../src/numeric/fft.ts';
import { evenGrid, hannPeakBin, strongestToneHz } from '../../src/sine/interpolated-dft.ts';

describe('interpolated DFT', () => {
  test('cos(2 pi 20.3 n/256 + 0.7): Hann two-bin gives 20.299993291 (Grandke 1983, value by numpy)', () => {
    const signal = Float64Array.from({ length: 256 }, (_, n) =>
      Math.cos((2 * Math.PI * 20.3 * n) / 256 + 0.7),
    );
    expect(hannPeakBin(realSpectrum(signal))).toBeCloseTo(20.299993291, 8);
  });

  test('error stays below half of 1/duration for any phase from two periods to just below half the frame rate', () => {
    for (const periods of [2, 2.5, 3.49, 7.5, 31.2, 55.9]) {
      for (let k = 0; k < 8; k++) {
        const timesS = new Float64Array(120).map((_, i) => i / 60);
        const values = timesS.map((t) => 9 + Math.cos(2 * Math.PI * (periods / 2) * t + (k * Math.PI) / 4));
        const found = strongestToneHz({ timesS, values })!;
        expect(Math.abs(found - periods / 2) * 2).toBeLessThan(0.5);
      }
    }
  });

  test('the even grid runs through the samples, mean taken out', () => {
    const grid = evenGrid({ timesS: Float64Array.of(0, 1, 2, 4), values: Float64Array.of(1, 3, 5, 9) })!;
    expect(grid.values.length).toBe(4);
    expect(grid.intervalS).toBeCloseTo(4 / 3, 12);
    [1, 3 + 2 / 3, 6 + 1 / 3, 9].forEach((value, k) => {
      expect(grid.values[k]).toBeCloseTo(value - 4.5, 12);
    });
  });

  test('cannot know: a still record has no tone, three samples have no grid', () => {
    const timesS = new Float64Array(64).map((_, i) => i);
    expect(strongestToneHz({ timesS, values: new Float64Array(64).fill(2) })).toBeNull();
    expect(evenGrid({ timesS: timesS.slice(0, 3), values: timesS.slice(0, 3) })).toBeNull();
  });
});
