import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import type { Samples } from '../sine/samples.ts';
import { type DecayFit, fitDecay } from './decay-fit.ts';

/** How the swing shrinks: in proportion to itself, by equal steps, or faster while it is large. */
export type EnvelopeKind = 'viscous' | 'friction' | 'growing-with-amplitude' | 'unknown';

/** Damping and frequency in one stretch of a decay. */
export interface DecayStretch {
  /** Geometric mean amplitude over the stretch, in the unit of the values. */
  readonly amplitude: number;
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
}

/** Whether damping depends on amplitude. */
export interface Envelope {
  readonly kind: EnvelopeKind;
  /**
   * p in dA/dt = -a A^p: 1 for viscous damping, 0 for dry friction (the swing falls linearly), 2 for a drag with the square
   * of the velocity. Not measured where the decay is too short to tell.
   */
  readonly exponent: Measured;
  readonly stretches: readonly DecayStretch[];
}

const STRETCHES = 6;
const FEWEST_PERIODS = 2;
const DIFFERENT = 3; // standard uncertainties from which an exponent is not 1
const LEAST_DIFFERENCE = 0.15; // and by how much: a smaller one changes no conclusion

function stretchesOf(samples: Samples, whole: DecayFit): DecayStretch[] {
  const { originS, endS } = whole;
  const frequencyHz = whole.dampedHz.value ?? 0;
  const count = Math.min(STRETCHES, Math.floor(((endS - originS) * frequencyHz) / FEWEST_PERIODS));
  const lengthS = (endS - originS) / Math.max(1, count);
  const stretches: DecayStretch[] = [];
  for (let k = 0; k < count; k++) {
    const [fromS, toS] = [originS + k * lengthS, originS + (k + 1) * lengthS];
    const keep = Array.from(samples.timesS.keys()).filter(
      (i) => (samples.timesS[i] ?? 0) >= fromS && (samples.timesS[i] ?? 0) <= toS,
    );
    const fit = fitDecay({
      timesS: Float64Array.from(keep, (i) => samples.timesS[i] ?? 0),
      values: Float64Array.from(keep, (i) => samples.values[i] ?? 0),
    });
    if (!fit?.converged || fit.amplitude.value === null || fit.decayRatePerS.value === null) continue;
    const amplitude =
      fit.amplitude.value * Math.exp((-fit.decayRatePerS.value * (fit.endS - fit.originS)) / 2);
    stretches.push({ amplitude, naturalHz: fit.naturalHz, dampingRatio: fit.dampingRatio });
  }
  return stretches;
}

/** Weighted straight line of ln(damping ratio) against ln(amplitude): its slope is p - 1. */
function exponentOf(stretches: readonly DecayStretch[]): Measured {
  const points = stretches.flatMap((each) => {
    const { value, u } = each.dampingRatio;
    return value !== null && u !== null && value > 0 && u > 0
      ? [{ x: Math.log(each.amplitude), y: Math.log(value), w: (value / u) ** 2 }]
      : [];
  });
  if (points.length < 3) return NOT_MEASURED;
  const sum = (of: (point: { x: number; y: number; w: number }) => number): number =>
    points.reduce((total, point) => total + of(point), 0);
  const w = sum((point) => point.w);
  const mx = sum((point) => point.w * point.x) / w;
  const my = sum((point) => point.w * point.y) / w;
  const sxx = sum((point) => point.w * (point.x - mx) ** 2);
  if (!(sxx > 0)) return NOT_MEASURED;
  const slope = sum((point) => point.w * (point.x - mx) * (point.y - my)) / sxx;
  const chi2 = sum((point) => point.w * (point.y - my - slope * (point.x - mx)) ** 2);
  const birge = Math.max(1, Math.sqrt(chi2 / (points.length - 2)));
  return measured(1 + slope, birge / Math.sqrt(sxx));
}

/** Looks for amplitude-dependent damping in a fitted decay, stretch by stretch. */
export function judgeEnvelope(samples: Samples, whole: DecayFit): Envelope {
  const stretches = stretchesOf(samples, whole);
  const exponent = exponentOf(stretches);
  const { value, u } = exponent;
  if (value === null || u === null) return { kind: 'unknown', exponent, stretches };
  const off = Math.abs(value - 1);
  if (off < LEAST_DIFFERENCE || off < DIFFERENT * u) return { kind: 'viscous', exponent, stretches };
  return { kind: value < 1 ? 'friction' : 'growing-with-amplitude', exponent, stretches };
}
