import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { chiSquareCdf } from '../numeric/quantiles.ts';
import { plainNumber } from './plain-number.ts';

/** A natural frequency found at one amplitude: a fit at one drive level, or a stretch of a ring-down. */
export interface FrequencyAtAmplitude {
  /** Natural frequency with its standard uncertainty, Hz. */
  readonly naturalHz: Measured;
  /** Amplitude it belongs to (peak amplitude, or mean over the stretch), mm, taken as exact. */
  readonly amplitudeMm: number;
}

/** Whether and how the natural frequency changes with amplitude. */
export interface AmplitudeFrequency {
  /** Natural frequency at vanishing amplitude, Hz. */
  readonly smallAmplitudeHz: Measured;
  /** Hardening in 1/mm^2: fn^2 = f0^2 (1 + hardening A^2); negative softens. */
  readonly hardening: Measured;
  /** Probability of differences this large by chance; null where unknown. */
  readonly pValue: number | null;
  /** True where the change is significant; null where it cannot be told. */
  readonly changes: boolean | null;
  readonly sentence: string;
}

const SIGNIFICANCE = 0.01;

/**
 * Weighted straight line of fn^2 against amplitude^2 through two or more levels: the backbone of a cubic stiffness
 * to first order, good while hardening A^2 stays below some 0.3.
 * Source: Nayfeh and Mook, Nonlinear Oscillations (from memory).
 */
export function amplitudeFrequency(levels: readonly FrequencyAtAmplitude[]): AmplitudeFrequency {
  const known = levels.filter(
    ({ naturalHz, amplitudeMm }) =>
      naturalHz.value !== null && naturalHz.value > 0 && (naturalHz.u ?? 0) > 0 && amplitudeMm >= 0,
  );
  const amplitudes = new Set(known.map((level) => level.amplitudeMm));
  if (amplitudes.size < 2) {
    return {
      smallAmplitudeHz: NOT_MEASURED,
      hardening: NOT_MEASURED,
      pValue: null,
      changes: null,
      sentence:
        'Whether the natural frequency changes with amplitude needs it at two amplitudes or more, with uncertainties.',
    };
  }
  const design = new Float64Array(2 * known.length);
  const target = new Float64Array(known.length);
  known.forEach(({ naturalHz, amplitudeMm }, i) => {
    const f = naturalHz.value!;
    const weight = 1 / (2 * f * naturalHz.u!);
    design.set([weight, weight * amplitudeMm * amplitudeMm], 2 * i);
    target[i] = weight * f * f;
  });
  const line = linearLeastSquares(design, known.length, 2, target)!;
  const [f0Square, slope] = line.coefficients as unknown as [number, number];
  const hardening = slope / f0Square;
  // d(slope/f0^2) with the covariance of the line
  const [v00, v01, , v11] = Array.from(line.unscaledCovariance) as [number, number, number, number];
  const variance = (v11 - 2 * hardening * v01 + hardening * hardening * v00) / (f0Square * f0Square);
  const uHardening = Math.sqrt(Math.max(0, variance));
  const f0 = Math.sqrt(f0Square);
  const pValue = 1 - chiSquareCdf((slope * slope) / v11, 1);
  const changes = pValue < SIGNIFICANCE;
  const smallest = Math.min(...amplitudes);
  const largest = Math.max(...amplitudes);
  const at = (a: number) => Math.sqrt(Math.max(0, 1 + hardening * a * a));
  const percent = plainNumber(100 * Math.abs(at(largest) / at(smallest) - 1), 2);
  const direction = hardening > 0 ? 'rises (hardening)' : 'falls (softening)';
  return {
    smallAmplitudeHz: measured(f0, Math.sqrt(v00) / (2 * f0)),
    hardening: measured(hardening, uHardening),
    pValue,
    changes,
    sentence: changes
      ? `The natural frequency ${direction} by ${percent} % from ${plainNumber(smallest)} to ${plainNumber(largest)} mm: state the amplitude with it.`
      : `The natural frequency is the same from ${plainNumber(smallest)} to ${plainNumber(largest)} mm within its uncertainty.`,
  };
}
