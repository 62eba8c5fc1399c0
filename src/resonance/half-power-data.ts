import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { fromHalfPowerPoints } from './half-power.ts';
import type { ResonanceModel } from './models.ts';
import { plainNumber } from './plain-number.ts';
import { type ResonancePoint, usable } from './resonance-points.ts';

/** Half-power reading of the dwells themselves, without a fitted curve: the check done by hand in every lab. */
export interface HalfPowerReading {
  readonly peakHz: Measured;
  readonly peakAmplitude: Measured;
  readonly lowerHz: Measured;
  readonly upperHz: Measured;
  readonly bandwidthHz: Measured;
  /** By the exact inversion for the model. */
  readonly naturalHz: Measured;
  /** Damping ratio (viscous) or loss factor (structural), exact inversion. */
  readonly damping: Measured;
  /** Classic reading bandwidth / (2 peak frequency) (viscous) or bandwidth / peak frequency (structural). */
  readonly classicDamping: Measured;
  /** What is missing, as a sentence; null where all was read. */
  readonly missing: string | null;
}

const NAMES = [
  'peakHz',
  'peakAmplitude',
  'lowerHz',
  'upperHz',
  'bandwidthHz',
  'naturalHz',
  'damping',
  'classicDamping',
] as const;

type Reading = Readonly<Record<(typeof NAMES)[number], number>>;

/**
 * Reads peak and half-power points by interpolation: near a resonance 1/amplitude^2 is a smooth bowl in f^2
 * (exactly a quadratic for a force), so three neighbouring dwells give the peak and each crossing.
 * Uncertainties by propagating each amplitude's own.
 *
 * @param points dwells in any order; at least five usable, with the peak and both half-power points inside
 */
export function readHalfPower(points: readonly ResonancePoint[], model: ResonanceModel): HalfPowerReading {
  const used = points
    .filter((point) => usable(point, 'amplitude'))
    .sort((a, b) => a.driveHz - b.driveHz)
    .filter((point, i, all) => i === 0 || point.driveHz > all[i - 1]!.driveHz);
  const frequencies = used.map((point) => point.driveHz);
  const amplitudes = used.map((point) => point.amplitude.value!);
  const reading = read(frequencies, amplitudes, model);
  if (typeof reading === 'string') return unread(reading);

  const variances = Object.fromEntries(NAMES.map((name) => [name, 0])) as Record<keyof Reading, number>;
  let known = true;
  for (let i = 0; i < used.length; i++) {
    const u = used[i]!.amplitude.u;
    if (u === null) {
      known = false;
      continue;
    }
    const step = Math.max(u * 1e-3, amplitudes[i]! * 1e-7);
    const up = read(frequencies, amplitudes.with(i, amplitudes[i]! + step), model);
    const down = read(frequencies, amplitudes.with(i, amplitudes[i]! - step), model);
    if (typeof up === 'string' || typeof down === 'string') {
      known = false;
      continue;
    }
    for (const name of NAMES) variances[name] += ((up[name] - down[name]) * (u / (2 * step))) ** 2;
  }
  const values = NAMES.map((name) => [
    name,
    measured(reading[name], known ? Math.sqrt(variances[name]) : null),
  ]);
  return { ...(Object.fromEntries(values) as Record<keyof Reading, Measured>), missing: null };
}

function unread(missing: string): HalfPowerReading {
  const nothing = NAMES.map((name) => [name, NOT_MEASURED]);
  return { ...(Object.fromEntries(nothing) as Record<keyof Reading, Measured>), missing };
}

const LEAST_POINTS = 5;

/** The reading, or a sentence that says what is missing. Frequencies rise strictly. */
function read(f: readonly number[], amplitude: readonly number[], model: ResonanceModel): Reading | string {
  if (f.length < LEAST_POINTS) {
    return `The half-power check needs ${LEAST_POINTS} dwells at different drive frequencies; there are ${f.length}.`;
  }
  const w = f.map((hz) => hz * hz);
  const bowl = amplitude.map((a) => 1 / (a * a));
  const top = bowl.indexOf(Math.min(...bowl));
  if (top === 0 || top === f.length - 1) {
    return 'The largest amplitude is at the end of the run: the half-power check needs dwells on both sides of the peak.';
  }
  const peak = vertex(w, bowl, top);
  if (peak === null) return 'The amplitudes show no single peak for the half-power check.';
  const level = 2 * peak.bowl;
  const lower = crossing(w, bowl, top, -1, level);
  const upper = crossing(w, bowl, top, 1, level);
  if (lower === null || upper === null) {
    const side = lower === null ? 'below' : 'above';
    const target = plainNumber(1 / Math.sqrt(level));
    return `The amplitude does not come down to half power (${target}) ${side} the peak: add dwells further ${side} it.`;
  }
  const [lowerHz, upperHz, peakHz] = [Math.sqrt(lower), Math.sqrt(upper), Math.sqrt(peak.w)];
  const exact = fromHalfPowerPoints(model, lowerHz, upperHz);
  if (exact === null) return 'The half-power points read are those of no damping of this model.';
  const bandwidthHz = upperHz - lowerHz;
  return {
    peakHz,
    peakAmplitude: 1 / Math.sqrt(peak.bowl),
    lowerHz,
    upperHz,
    bandwidthHz,
    naturalHz: exact.naturalHz,
    damping: exact.damping,
    classicDamping: bandwidthHz / peakHz / (model.damping === 'viscous' ? 2 : 1),
  };
}

/** Quadratic through three points, as c0 + c1 d + c2 d^2 with d = w - w[middle]. */
function quadratic(w: readonly number[], bowl: readonly number[], middle: number): [number, number, number] {
  const a = w[middle - 1]! - w[middle]!;
  const b = w[middle + 1]! - w[middle]!;
  const ya = (bowl[middle - 1]! - bowl[middle]!) / a;
  const yb = (bowl[middle + 1]! - bowl[middle]!) / b;
  const c2 = (yb - ya) / (b - a);
  return [bowl[middle]!, ya - c2 * a, c2];
}

function vertex(
  w: readonly number[],
  bowl: readonly number[],
  top: number,
): { readonly w: number; readonly bowl: number } | null {
  const [c0, c1, c2] = quadratic(w, bowl, top);
  if (!(c2 > 0)) return null;
  const at = -c1 / (2 * c2);
  const lowest = c0 - (c1 * c1) / (4 * c2);
  return lowest > 0 && w[top]! + at > 0 ? { w: w[top]! + at, bowl: lowest } : null;
}

/** Where the bowl first crosses `level` going outward from the peak, by the quadratic through its neighbours. */
function crossing(
  w: readonly number[],
  bowl: readonly number[],
  top: number,
  side: 1 | -1,
  level: number,
): number | null {
  let outside = top + side;
  while (outside >= 0 && outside < w.length && bowl[outside]! < level) outside += side;
  if (outside < 0 || outside >= w.length) return null;
  const inside = outside - side;
  // the neighbour nearer the peak keeps the three on one branch where it can
  const middle = Math.min(w.length - 2, Math.max(1, inside));
  const [c0, c1, c2] = quadratic(w, bowl, middle);
  const square = c1 * c1 - 4 * c2 * (c0 - level);
  const from = Math.min(w[inside]!, w[outside]!) - w[middle]!;
  const to = Math.max(w[inside]!, w[outside]!) - w[middle]!;
  if (c2 !== 0 && square >= 0) {
    const q = -0.5 * (c1 + (c1 < 0 ? -1 : 1) * Math.sqrt(square));
    const roots = [q / c2, (c0 - level) / q].filter((d) => d >= from && d <= to);
    if (roots.length > 0) return w[middle]! + roots[0]!;
  }
  // a straight line between the two dwells always has a crossing
  const share = (level - bowl[inside]!) / (bowl[outside]! - bowl[inside]!);
  return w[inside]! + share * (w[outside]! - w[inside]!);
}
