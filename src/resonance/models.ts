/**
 * What shakes the part:
 * - `force`: a force on the moving mass;
 * - `spring-end`: the far end of the spring is moved, the damper stands on the ground (same curve as `force`);
 * - `base`: spring and damper stand on the moving base; the part's absolute motion is filmed;
 * - `base-relative`: the same, but the part's motion relative to the base is filmed;
 * - `unbalance`: a rotating unbalance on the moving mass.
 */
export type Excitation = 'force' | 'spring-end' | 'base' | 'base-relative' | 'unbalance';

/** Every excitation, in the order in which they are offered. */
export const EXCITATIONS: readonly Excitation[] = [
  'force',
  'spring-end',
  'base',
  'base-relative',
  'unbalance',
];

/** Viscous damping (force proportional to velocity) or structural damping (a constant loss factor). */
export type Damping = 'viscous' | 'structural';

/** Both dampings, in the order in which they are offered. */
export const DAMPINGS: readonly Damping[] = ['viscous', 'structural'];

/** A model of the response: what shakes the part and what damps it. */
export interface ResonanceModel {
  readonly excitation: Excitation;
  readonly damping: Damping;
}

/**
 * Complex response per unit input, with its derivatives.
 * x(t) = Re[(re + i im) exp(2 pi i f t)] for an input cos(2 pi f t), so the lag is -arg(re + i im).
 */
export interface UnitResponse {
  readonly re: number;
  readonly im: number;
  /** d re / d natural frequency, in 1/Hz. */
  readonly reByNaturalHz: number;
  readonly imByNaturalHz: number;
  /** d re / d damping ratio (viscous) or loss factor (structural). */
  readonly reByDamping: number;
  readonly imByDamping: number;
}

/**
 * Response of a single-degree-of-freedom oscillator per unit input; times the static gain it is the motion.
 * With r = driveHz / naturalHz and g = 2 zeta r (viscous) or eta (structural):
 * force and spring-end 1/(1 - r^2 + i g), base (1 + i g)/(1 - r^2 + i g), base-relative and unbalance
 * r^2/(1 - r^2 + i g).
 *
 * @param driveHz drive frequency, 0 or more
 * @param naturalHz undamped natural frequency, not 0
 * @param damping damping ratio zeta (viscous) or loss factor eta (structural); with 0 the value at
 *   driveHz = naturalHz is infinite
 * Source: Den Hartog, Mechanical Vibrations; Rao, Mechanical Vibrations (from memory).
 */
export function unitResponse(
  model: ResonanceModel,
  driveHz: number,
  naturalHz: number,
  damping: number,
): UnitResponse {
  const viscous = model.damping === 'viscous';
  const r = driveHz / naturalHz;
  const g = viscous ? 2 * damping * r : damping;
  const gByNaturalHz = viscous ? -g / naturalHz : 0;
  const gByDamping = viscous ? 2 * r : 1;

  const a = 1 - r * r;
  const aByNaturalHz = (2 * r * r) / naturalHz;
  const size = a * a + g * g;
  const inverseRe = a / size;
  const inverseIm = -g / size;

  // numerator and its derivatives
  let nRe = 1;
  let nIm = 0;
  let nReByNaturalHz = 0;
  let nImByNaturalHz = 0;
  let nImByDamping = 0;
  if (model.excitation === 'base') {
    nIm = g;
    nImByNaturalHz = gByNaturalHz;
    nImByDamping = gByDamping;
  } else if (model.excitation === 'base-relative' || model.excitation === 'unbalance') {
    nRe = r * r;
    nReByNaturalHz = -aByNaturalHz;
  }

  const re = nRe * inverseRe - nIm * inverseIm;
  const im = nRe * inverseIm + nIm * inverseRe;
  // (N/D)' = (N' - (N/D) D') / D with D = a + i g
  const topReN = nReByNaturalHz - (re * aByNaturalHz - im * gByNaturalHz);
  const topImN = nImByNaturalHz - (re * gByNaturalHz + im * aByNaturalHz);
  const topReD = im * gByDamping;
  const topImD = nImByDamping - re * gByDamping;
  return {
    re,
    im,
    reByNaturalHz: topReN * inverseRe - topImN * inverseIm,
    imByNaturalHz: topReN * inverseIm + topImN * inverseRe,
    reByDamping: topReD * inverseRe - topImD * inverseIm,
    imByDamping: topReD * inverseIm + topImD * inverseRe,
  };
}

/** The value of `unitResponse` without its derivatives, for scans that need no more. */
export function unitValue(
  model: ResonanceModel,
  driveHz: number,
  naturalHz: number,
  damping: number,
): { readonly re: number; readonly im: number } {
  const r = driveHz / naturalHz;
  const g = model.damping === 'viscous' ? 2 * damping * r : damping;
  const a = 1 - r * r;
  const size = a * a + g * g;
  if (model.excitation === 'base') return { re: (a + g * g) / size, im: (g * a - g) / size };
  const n = model.excitation === 'base-relative' || model.excitation === 'unbalance' ? r * r : 1;
  return { re: (n * a) / size, im: (-n * g) / size };
}

/** Amplitude of the response per unit input (magnification, transmissibility or their like), 0 or more. */
export function unitAmplitude(response: { readonly re: number; readonly im: number }): number {
  return Math.hypot(response.re, response.im);
}

/** Lag of the response behind its input in degrees, in (-180, 180]; 0 to 180 through resonance. */
export function lagDeg(response: { readonly re: number; readonly im: number }): number {
  return (Math.atan2(-response.im, response.re) * 180) / Math.PI;
}
