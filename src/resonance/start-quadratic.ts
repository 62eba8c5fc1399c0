import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import type { ResonanceModel } from './models.ts';
import type { Observations } from './observations.ts';

/** Start values of natural frequency (Hz) and damping (ratio or loss factor). */
export interface StartPoint {
  readonly naturalHz: number;
  readonly damping: number;
}

/**
 * Start values from amplitudes by one linear fit. For a force, 1/amplitude^2 is exactly a quadratic in
 * f^2; for relative motion and unbalance f^4/amplitude^2 is. Null where the model is no such quadratic (absolute
 * motion of a moved base with viscous damping), where there are fewer than three frequencies, or where the
 * quadratic found is no resonance.
 */
export function startFromAmplitudes(model: ResonanceModel, observations: Observations): StartPoint | null {
  const viscous = model.damping === 'viscous';
  if (model.excitation === 'base' && viscous) return null;
  const relative = model.excitation === 'base-relative' || model.excitation === 'unbalance';
  const { driveHz, amplitudeRow, value, u } = observations;
  const rows = [...driveHz.keys()].filter((i) => amplitudeRow[i]! >= 0);
  if (rows.length < 3) return null;

  // frequencies in units of the largest, so that the powers stay near 1
  const unitHz = Math.max(...rows.map((i) => driveHz[i]!));
  const design = new Float64Array(rows.length * 3);
  const target = new Float64Array(rows.length);
  rows.forEach((i, row) => {
    const w = (driveHz[i]! / unitHz) ** 2;
    const amplitude = value[amplitudeRow[i]!]!;
    const lifted = relative ? w * w : 1;
    const y = lifted / amplitude ** 2;
    // u(y) = 2 y u(A) / A
    const weight = amplitude / (2 * y * u[amplitudeRow[i]!]!);
    design.set([weight, weight * w, weight * w * w], row * 3);
    target[row] = weight * y;
  });
  const fit = linearLeastSquares(design, rows.length, 3, target);
  if (fit === null) return null;
  const [c0, c1, c2] = fit.coefficients as unknown as [number, number, number];
  if (!(c2 > 0) || !(c0 > 0)) return null;
  if (viscous) {
    const wn = Math.sqrt(c0 / c2);
    return accepted(unitHz * Math.sqrt(wn), Math.sqrt(Math.max(0, (2 + (c1 / c0) * wn) / 4)));
  }
  const wn = -c1 / (2 * c2);
  if (!(wn > 0)) return null;
  return accepted(unitHz * Math.sqrt(wn), Math.sqrt(Math.max(0, c0 / (c2 * wn * wn) - 1)));
}

/**
 * Start values from lags by one linear fit: sin(lag) = f^2 sin(lag)/fn^2 + g cos(lag) with g = 2 zeta f/fn or
 * eta. Null for absolute motion of a moved base, with fewer than two frequencies, or where no resonance results.
 */
export function startFromLags(model: ResonanceModel, observations: Observations): StartPoint | null {
  if (model.excitation === 'base') return null;
  const viscous = model.damping === 'viscous';
  const { driveHz, lagRow, value, u } = observations;
  const rows = [...driveHz.keys()].filter((i) => lagRow[i]! >= 0);
  if (rows.length < 2) return null;
  const unitHz = Math.max(...rows.map((i) => driveHz[i]!));
  const design = new Float64Array(rows.length * 2);
  const target = new Float64Array(rows.length);
  rows.forEach((i, row) => {
    const x = driveHz[i]! / unitHz;
    const lag = value[lagRow[i]!]!;
    const weight = 1 / u[lagRow[i]!]!;
    design.set([weight * x * x * Math.sin(lag), weight * (viscous ? x : 1) * Math.cos(lag)], row * 2);
    target[row] = weight * Math.sin(lag);
  });
  const fit = linearLeastSquares(design, rows.length, 2, target);
  if (fit === null || !(fit.coefficients[0]! > 0)) return null;
  const naturalHz = unitHz / Math.sqrt(fit.coefficients[0]!);
  const g = fit.coefficients[1]!;
  return accepted(naturalHz, viscous ? (g * naturalHz) / (2 * unitHz) : g);
}

// A start of no damping would put the peak at infinity.
const LEAST_DAMPING = 1e-5;

function accepted(naturalHz: number, damping: number): StartPoint | null {
  if (!Number.isFinite(naturalHz) || !Number.isFinite(damping) || damping > 5) return null;
  return { naturalHz, damping: Math.max(LEAST_DAMPING, damping) };
}
