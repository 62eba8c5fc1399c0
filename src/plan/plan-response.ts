import { type ResonanceModel, unitResponse } from '../resonance/models.ts';

/** What one oscillator does at one drive frequency, with its sensitivities to its own logarithms. */
export interface PlanResponse {
  /** Amplitude per unit of static gain. */
  readonly amplitude: number;
  /** Lag in radians, -pi to pi. */
  readonly lagRad: number;
  /** d ln(amplitude) / d ln(natural frequency) and / d ln(damping ratio). */
  readonly logByLogNatural: number;
  readonly logByLogDamping: number;
  /** d lag / d ln(natural frequency) and / d ln(damping ratio), in radians. */
  readonly lagByLogNatural: number;
  readonly lagByLogDamping: number;
}

/** The damping parameter of a model for a damping ratio: itself, or the loss factor 2 zeta of structural damping. */
export function dampingParameter(model: ResonanceModel, dampingRatio: number): number {
  return model.damping === 'structural' ? 2 * dampingRatio : dampingRatio;
}

/**
 * Response of an oscillator at a drive frequency with sensitivities, which planning needs in relative terms.
 * @param driveHz above 0
 * @param naturalHz above 0
 * @param dampingRatio above 0; half the loss factor where the model's damping is structural
 */
export function planResponse(
  model: ResonanceModel,
  driveHz: number,
  naturalHz: number,
  dampingRatio: number,
): PlanResponse {
  const parameter = dampingParameter(model, dampingRatio);
  const h = unitResponse(model, driveHz, naturalHz, parameter);
  const size = h.re * h.re + h.im * h.im;
  // d ln h = h' / h, complex: its real part is that of the amplitude, minus its imaginary part that of the lag
  const natural = naturalHz / size;
  const damping = parameter / size;
  return {
    amplitude: Math.sqrt(size),
    lagRad: Math.atan2(-h.im, h.re),
    logByLogNatural: natural * (h.re * h.reByNaturalHz + h.im * h.imByNaturalHz),
    logByLogDamping: damping * (h.re * h.reByDamping + h.im * h.imByDamping),
    lagByLogNatural: -natural * (h.re * h.imByNaturalHz - h.im * h.reByNaturalHz),
    lagByLogDamping: -damping * (h.re * h.imByDamping - h.im * h.reByDamping),
  };
}
