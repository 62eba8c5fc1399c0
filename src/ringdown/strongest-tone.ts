import { realSpectrum } from '../numeric/fft.ts';
import { evenGrid } from '../sine/interpolated-dft.ts';
import type { Samples } from '../sine/samples.ts';

/** The strongest oscillation of a record, roughly, and the record on an even grid. */
export interface StrongestTone {
  readonly frequencyHz: number;
  /** Mean taken out. */
  readonly values: Float64Array;
  readonly intervalS: number;
}

const LOWEST_BIN = 2; // below two periods in the record it is drift

/** Frequency of the largest line of the spectrum, to half a line; null where the record is too short or stands still. */
export function strongestTone(samples: Samples): StrongestTone | null {
  const grid = evenGrid(samples);
  if (grid === null) return null;
  const spectrum = realSpectrum(grid.values);
  let best = 0;
  let bin = 0;
  for (let k = LOWEST_BIN; k < spectrum.real.length - 1; k++) {
    const power = (spectrum.real[k] ?? 0) ** 2 + (spectrum.imaginary[k] ?? 0) ** 2;
    if (power > best) {
      best = power;
      bin = k;
    }
  }
  if (bin === 0) return null;
  return { frequencyHz: bin / (grid.values.length * grid.intervalS), ...grid };
}
