import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { propagate } from '../numeric/uncertainty-propagation.ts';
import { curveCrossings, curvePeak, curveShape } from './curve-shape.ts';
import { logDecrement } from './damping-measures.ts';
import type { ResonanceModel } from './models.ts';

/** What follows from static gain, natural frequency and damping, each with its propagated standard uncertainty. */
export interface DerivedQuantities {
  /** Undamped natural frequency, Hz. */
  readonly naturalHz: Measured;
  /** Viscous damping ratio; with structural damping the equivalent one at resonance, half the loss factor. */
  readonly dampingRatio: Measured;
  /** Loss factor: 2 zeta with viscous damping. */
  readonly lossFactor: Measured;
  /** Quality factor 1 / (2 zeta), or 1 / eta. */
  readonly q: Measured;
  /** Logarithmic decrement of the free decay. */
  readonly logDecrement: Measured;
  /** Static gain, in the amplitude's unit; its uncertainty includes what all dwells share. */
  readonly staticGain: Measured;
  /** Frequency of the largest amplitude, Hz; null where the damping is too heavy for a peak. */
  readonly peakHz: Measured;
  /** Amplitude at the peak, in the amplitude's unit; its uncertainty includes what all dwells share. */
  readonly peakAmplitude: Measured;
  /** Half-power points (peak amplitude / sqrt 2), Hz. */
  readonly lowerHalfPowerHz: Measured;
  readonly upperHalfPowerHz: Measured;
  /** Half-power bandwidth, exact: upper minus lower point, Hz. */
  readonly bandwidthHz: Measured;
  /** The usual approximation of it, 2 zeta fn (or eta fn), Hz. */
  readonly classicBandwidthHz: Measured;
  /** Stiffness m (2 pi fn)^2 in N/m; not measured without a moving mass. */
  readonly stiffnessNPerM: Measured;
  /** Damping constant 2 zeta m 2 pi fn in N s/m (structural: the equivalent one at resonance). */
  readonly dampingNsPerM: Measured;
}

/** Fitted values with their covariance, row-major 3 x 3, in the order static gain, natural frequency, damping. */
export interface FittedTriple {
  /** Null in lag-only fits; its rows of the covariance must then be 0. */
  readonly staticGain: number | null;
  readonly naturalHz: number;
  readonly damping: number;
  /** Null where the uncertainty is not known: then no derived quantity has one. */
  readonly covariance: Float64Array | null;
}

/** Inputs of the derived quantities that do not come from the fit. */
export interface DerivedInputs {
  /** Relative standard uncertainty common to all amplitudes, 0 or more. */
  readonly commonRelativeU?: number;
  readonly movingMassKg?: { readonly value: number; readonly u: number | null };
}

const KEYS = [
  'naturalHz',
  'dampingRatio',
  'lossFactor',
  'q',
  'logDecrement',
  'staticGain',
  'peakHz',
  'peakAmplitude',
  'lowerHalfPowerHz',
  'upperHalfPowerHz',
  'bandwidthHz',
  'classicBandwidthHz',
  'stiffnessNPerM',
  'dampingNsPerM',
] as const satisfies readonly (keyof DerivedQuantities)[];

/** Derived quantities of which none could be had. */
export const NOTHING_DERIVED: DerivedQuantities = Object.fromEntries(
  KEYS.map((key) => [key, NOT_MEASURED]),
) as unknown as DerivedQuantities;

/**
 * Computes all derived quantities and propagates the fit's covariance, the moving mass and the common relative
 * uncertainty through them (first order, JCGM 100 5.2.2). The common part enters static gain and peak amplitude
 * only: a wrong scale moves every amplitude alike and leaves natural frequency and damping alone.
 */
export function deriveQuantities(
  model: ResonanceModel,
  fitted: FittedTriple,
  inputs: DerivedInputs = {},
): DerivedQuantities {
  const mass = inputs.movingMassKg ?? null;
  const x = Float64Array.of(
    fitted.staticGain ?? Number.NaN,
    fitted.naturalHz,
    fitted.damping,
    mass?.value ?? Number.NaN,
    1,
  );
  const covariance = new Float64Array(25);
  for (let a = 0; a < 3; a++) {
    for (let b = 0; b < 3; b++) covariance[a * 5 + b] = fitted.covariance?.[a * 3 + b] ?? 0;
  }
  covariance[18] = (mass?.u ?? 0) ** 2;
  covariance[24] = (inputs.commonRelativeU ?? 0) ** 2;
  const { y, u } = propagate((values) => evaluate(model, values), x, covariance);
  const known = fitted.covariance !== null;
  return Object.fromEntries(
    KEYS.map((key, i) => [key, measured(y[i]!, known ? u[i]! : null)]),
  ) as unknown as DerivedQuantities;
}

/** All quantities in the order of KEYS from static gain, fn, damping, mass and scale; NaN where there is none. */
function evaluate(model: ResonanceModel, values: Float64Array): Float64Array {
  const [gain, naturalHz, damping, massKg, scale] = values as unknown as [
    number,
    number,
    number,
    number,
    number,
  ];
  const dampingRatio = model.damping === 'viscous' ? damping : damping / 2;
  const shape = curveShape(model, damping);
  const peak = curvePeak(shape);
  const { lower, upper } = curveCrossings(shape);
  const omega = 2 * Math.PI * naturalHz;
  const none = Number.NaN;
  return Float64Array.of(
    naturalHz,
    dampingRatio,
    2 * dampingRatio,
    1 / (2 * dampingRatio),
    logDecrement(dampingRatio) ?? none,
    gain * scale,
    (peak?.ratio ?? none) * naturalHz,
    Math.abs(gain) * scale * (peak?.amplitude ?? none),
    (lower ?? none) * naturalHz,
    (upper ?? none) * naturalHz,
    ((upper ?? none) - (lower ?? none)) * naturalHz,
    2 * dampingRatio * naturalHz,
    massKg * omega * omega,
    2 * dampingRatio * massKg * omega,
  );
}
