import { chiSquareCdf } from '../numeric/quantiles.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';
import { plainNumber } from './plain-number.ts';
import type { FitMode } from './resonance-points.ts';

// Frequencies closer than this (relative) are one and the same setting of a generator.
const SAME_FREQUENCY = 1e-6;
// Amplitudes that a constant explains with at least this probability show no resonance.
const CONSTANT_PROBABILITY = 0.05;
// Without uncertainties: a relative spread below this is no spread.
const NO_SPREAD = 1e-3;

/** Distinct drive frequencies in Hz, rising. */
export function distinctFrequencies(driveHz: ArrayLike<number>): number[] {
  const sorted = Array.from(driveHz).sort((a, b) => a - b);
  return sorted.filter((f, i) => i === 0 || f - sorted[i - 1]! > SAME_FREQUENCY * f);
}

/**
 * What is missing before a fit can be tried, as one sentence that says what to run; null where nothing is:
 * too few dwells, too few distinct frequencies, amplitudes or lags that do not change.
 */
export function missingBeforeFit(
  observations: Observations,
  layout: ParameterLayout,
  mode: FitMode,
): string | null {
  const frequencies = distinctFrequencies(observations.driveHz);
  const perFrequency = mode === 'complex' ? rowsPerFrequency(observations) : 1;
  const needed = Math.ceil(layout.names.length / perFrequency);
  if (frequencies.length < needed) {
    const have = frequencies.length === 0 ? 'none' : plainNumber(frequencies.length);
    const same =
      observations.driveHz.length > frequencies.length ? ' (repeats at one frequency count once)' : '';
    return `The fit needs usable dwells at ${needed} different drive frequencies or more; there ${frequencies.length === 1 ? 'is' : 'are'} ${have}${same}. Add dwells around the peak.`;
  }
  const amplitudes = rowsOf(observations, observations.amplitudeRow);
  const lags = rowsOf(observations, observations.lagRow);
  const flatAmplitude = amplitudes.length === 0 || isConstant(observations, amplitudes);
  const flatLag = lags.length === 0 || isConstant(observations, lags);
  if (!flatAmplitude || !flatLag) return null;
  const what = mode === 'lag' ? 'lags' : mode === 'complex' ? 'amplitudes and lags' : 'amplitudes';
  const from = plainNumber(frequencies[0]!, 4);
  const to = plainNumber(frequencies[frequencies.length - 1]!, 4);
  return `The ${what} do not differ by more than their uncertainty between ${from} and ${to} Hz, so no resonance shows there. Add dwells at other frequencies, or measure with less noise.`;
}

function rowsPerFrequency(observations: Observations): number {
  return observations.value.length / Math.max(1, observations.driveHz.length);
}

function rowsOf(observations: Observations, rows: Int32Array): number[] {
  return [...rows].filter((row) => row >= 0 && observations.value[row] !== undefined);
}

function isConstant({ value, u, origin }: Observations, rows: readonly number[]): boolean {
  const weight = (row: number) => 1 / u[row]! ** 2;
  const total = rows.reduce((sum, row) => sum + weight(row), 0);
  const mean = rows.reduce((sum, row) => sum + weight(row) * value[row]!, 0) / total;
  if (origin === 'equal') {
    return rows.every((row) => Math.abs(value[row]! - mean) <= NO_SPREAD * Math.max(Math.abs(mean), 1e-300));
  }
  const chi2 = rows.reduce((sum, row) => sum + weight(row) * (value[row]! - mean) ** 2, 0);
  return 1 - chiSquareCdf(chi2, rows.length - 1) > CONSTANT_PROBABILITY;
}
