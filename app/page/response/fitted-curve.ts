import type { ResonanceResult } from '../../../src/engine/results.ts';
import { type ResonanceModel, unitResponse } from '../../../src/resonance/models.ts';
import { EXCITATIONS } from '../../../src/testfile/schema.ts';

/** The fitted curve on a grid of drive frequencies. */
export interface FittedCurve {
  readonly driveHz: readonly number[];
  /** Amplitude zero-to-peak, mm (or response over drive where the fit is of the gain). */
  readonly amplitude: readonly number[];
  /** One standard uncertainty of it, from those of the fitted parameters and their correlation. */
  readonly amplitudeU: readonly number[];
  /** Degrees, 0 to 180. */
  readonly lagDeg: readonly number[];
  readonly lagU: readonly number[];
  readonly inPhase: readonly number[];
  readonly quadrature: readonly number[];
}

const POINTS = 320;

/** The curve of a resonance fit between two frequencies; null where nothing was fitted. */
export function fittedCurve(fit: ResonanceResult, fromHz: number, toHz: number): FittedCurve | null {
  const [gain, natural, ratio] = [fit.staticGain.value, fit.naturalHz.value, fit.dampingRatio.value];
  const excitation = EXCITATIONS.find((each) => each === fit.model);
  if (gain === null || natural === null || ratio === null || !excitation || !(toHz > fromHz)) return null;
  const model: ResonanceModel = { excitation, damping: fit.damping };
  const perRatio = fit.damping === 'structural' ? 2 : 1; // loss factor is twice the damping ratio at resonance
  const us = [fit.staticGain.u ?? 0, fit.naturalHz.u ?? 0, fit.dampingRatio.u ?? 0];
  const correlation = fit.correlation ?? [];
  const spread = (slopes: readonly number[]): number => {
    let variance = 0;
    for (const [i, a] of slopes.entries())
      for (const [j, b] of slopes.entries())
        variance += a * b * (us[i] ?? 0) * (us[j] ?? 0) * (correlation[i]?.[j] ?? (i === j ? 1 : 0));
    return Math.sqrt(Math.max(0, variance));
  };
  const columns: Record<Exclude<keyof FittedCurve, never>, number[]> = {
    driveHz: [],
    amplitude: [],
    amplitudeU: [],
    lagDeg: [],
    lagU: [],
    inPhase: [],
    quadrature: [],
  };
  for (const driveHz of grid(fromHz, toHz, natural, ratio)) {
    const unit = unitResponse(model, driveHz, natural, ratio * perRatio);
    const size = Math.hypot(unit.re, unit.im);
    const byNatural = (unit.re * unit.reByNaturalHz + unit.im * unit.imByNaturalHz) / size;
    const byRatio = ((unit.re * unit.reByDamping + unit.im * unit.imByDamping) / size) * perRatio;
    const turn = (re: number, im: number): number =>
      ((unit.im * re - unit.re * im) / size ** 2) * (180 / Math.PI);
    columns.driveHz.push(driveHz);
    columns.amplitude.push(gain * size);
    columns.amplitudeU.push(spread([size, gain * byNatural, gain * byRatio]));
    columns.lagDeg.push(lagOf(unit.re, unit.im));
    columns.lagU.push(
      spread([
        0,
        turn(unit.reByNaturalHz, unit.imByNaturalHz),
        turn(unit.reByDamping, unit.imByDamping) * perRatio,
      ]),
    );
    columns.inPhase.push(gain * unit.re);
    columns.quadrature.push(gain * unit.im);
  }
  return columns;
}

function lagOf(re: number, im: number): number {
  const lag = (-Math.atan2(im, re) * 180) / Math.PI;
  return lag < -1e-9 ? lag + 360 : lag;
}

/** Denser round the peak, where the curve bends. */
function grid(fromHz: number, toHz: number, naturalHz: number, ratio: number): number[] {
  const width = Math.max(naturalHz * Math.max(ratio, 0.002) * 3, (toHz - fromHz) / 400);
  const place = (driveHz: number): number => Math.asinh((driveHz - naturalHz) / width);
  const [start, end] = [place(fromHz), place(toHz)];
  return Array.from(
    { length: POINTS },
    (_, k) => naturalHz + width * Math.sinh(start + ((end - start) * k) / (POINTS - 1)),
  );
}
