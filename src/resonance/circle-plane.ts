import type { ResonanceModel } from './models.ts';
import type { ResonancePoint } from './resonance-points.ts';
import { usable } from './resonance-points.ts';

/** Complex responses carried into a plane in which the resonance is a circle. */
export interface CirclePlane {
  /** What is plotted, such as `i f X`. */
  readonly quantity: string;
  readonly driveHz: Float64Array;
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Standard uncertainty of each point along and across its radius vector from the origin; null where unknown. */
  readonly u: Float64Array | null;
}

/** A complex factor and an offset: plotted = factor (response - offset). */
interface Carry {
  readonly quantity: string;
  readonly factorRe: (f: number) => number;
  readonly factorIm: (f: number) => number;
  readonly offset: number;
}

/**
 * How the response becomes a circle. Displacement with viscous damping is none; velocity is (multiply by i f),
 * relative motion over frequency is, absolute motion less the base's is like relative motion; with structural
 * damping displacement itself is one, and relative motion over f^2.
 *
 * @param base the base's amplitude in the unit of the response (1 for gains), used by excitation `base`
 * Source: Kennedy and Pancu 1947, Ewins, Modal Testing (from memory).
 */
export function carryToCircle(model: ResonanceModel, base: number): Carry {
  const none = () => 0;
  const viscous = model.damping === 'viscous';
  switch (model.excitation) {
    case 'force':
    case 'spring-end':
      return viscous
        ? { quantity: 'i f X', factorRe: none, factorIm: (f) => f, offset: 0 }
        : { quantity: 'X', factorRe: () => 1, factorIm: none, offset: 0 };
    case 'base':
      return viscous
        ? { quantity: '−i (X − base) / f', factorRe: none, factorIm: (f) => -1 / f, offset: base }
        : { quantity: 'X', factorRe: () => 1, factorIm: none, offset: 0 };
    case 'base-relative':
    case 'unbalance':
      return viscous
        ? { quantity: '−i X / f', factorRe: none, factorIm: (f) => -1 / f, offset: 0 }
        : { quantity: 'X / f²', factorRe: (f) => 1 / (f * f), factorIm: none, offset: 0 };
  }
}

/** Carries the dwells that have amplitude and lag into the plane of the circle, in rising drive frequency. */
export function circlePlane(points: readonly ResonancePoint[], model: ResonanceModel, base = 1): CirclePlane {
  const carry = carryToCircle(model, base);
  const used = points
    .filter((point) => usable(point, 'amplitude') && usable(point, 'lag'))
    .sort((a, b) => a.driveHz - b.driveHz);
  const x = new Float64Array(used.length);
  const y = new Float64Array(used.length);
  const u = new Float64Array(used.length);
  used.forEach((point, i) => {
    const f = point.driveHz;
    const amplitude = point.amplitude.value!;
    const angle = (-point.lagDeg!.value! * Math.PI) / 180;
    const re = amplitude * Math.cos(angle) - carry.offset;
    const im = amplitude * Math.sin(angle);
    const [fRe, fIm] = [carry.factorRe(f), carry.factorIm(f)];
    x[i] = fRe * re - fIm * im;
    y[i] = fRe * im + fIm * re;
    const along = point.amplitude.u;
    const across = point.lagDeg!.u === null ? along : ((point.lagDeg!.u * Math.PI) / 180) * amplitude;
    u[i] =
      along === null || across === null
        ? Number.NaN
        : Math.hypot(fRe, fIm) * Math.sqrt((along * along + across * across) / 2);
  });
  return {
    quantity: carry.quantity,
    driveHz: Float64Array.from(used, (point) => point.driveHz),
    x,
    y,
    u: u.every((value) => value > 0) ? u : null,
  };
}
