import { type Measured, NOT_MEASURED } from '../numeric/measured.ts';
import { type GeometricCircle, geometricCircle } from './circle-geometric.ts';
import { type CirclePlane, circlePlane } from './circle-plane.ts';
import { type CircleResonance, fitCircleResonance } from './circle-resonance-fit.ts';
import { plainNumber } from './plain-number.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import type { ResonancePoint } from './resonance-points.ts';

/** Natural frequency and damping from the circle plot: a second opinion beside the fit. */
export interface CircleOpinion extends CircleResonance {
  readonly plane: CirclePlane;
  readonly circle: GeometricCircle | null;
  /** True where natural frequency or damping differ from the fit's beyond their uncertainty; null: no telling. */
  readonly disagrees: boolean | null;
  /** What the circle says, or what is missing for it. */
  readonly sentence: string;
}

const LEAST_POINTS = 4;
// A difference beyond this many combined standard uncertainties is one; both opinions share their dwells, which
// only makes chance differences smaller.
const SIGMAS = 2;
// A difference that would change no decision is not called one, however small its uncertainty.
const NOTABLE_FREQUENCY = 2e-4;
const NOTABLE_DAMPING = 0.02;

/**
 * Second opinion from the circle plot: a geometric circle through the complex responses, then natural frequency
 * and damping from how the dwells run round it. Place and turn of the circle are free, so a constant crosstalk,
 * which the plain fit must take for resonance, does not reach natural frequency and damping here.
 *
 * @param fit the resonance fit to compare with; it also gives the start values
 * Source: Kennedy and Pancu 1947; Ewins, Modal Testing (from memory).
 */
export function circleOpinion(points: readonly ResonancePoint[], fit: ResonanceFit): CircleOpinion {
  const { model, quantities } = fit;
  const base = fit.amplitudeUnit === 'gain' ? 1 : (quantities.staticGain.value ?? 1);
  const plane = circlePlane(points, model, base);
  const fittedDamping = model.damping === 'viscous' ? quantities.dampingRatio : quantities.lossFactor;
  const none = { naturalHz: NOT_MEASURED, damping: NOT_MEASURED, turnDeg: NOT_MEASURED };
  const silent = (circle: GeometricCircle | null, sentence: string): CircleOpinion => ({
    plane,
    circle,
    ...none,
    disagrees: null,
    sentence,
  });

  const count = plane.driveHz.length;
  if (count < LEAST_POINTS) {
    return silent(
      null,
      `The circle plot needs ${LEAST_POINTS} dwells with amplitude and lag; there are ${count}.`,
    );
  }
  const circle = geometricCircle(plane.x, plane.y, plane.u?.map((u) => 1 / (u * u)) ?? null);
  if (circle === null) return silent(null, 'The responses lie on no circle.');
  if (quantities.naturalHz.value === null || fittedDamping.value === null) {
    return silent(
      circle,
      'Natural frequency and damping from the circle need a resonance fit to start from.',
    );
  }
  const found = fitCircleResonance(plane, circle, model, quantities.naturalHz.value, fittedDamping.value);
  if (found === null) return silent(circle, 'The responses do not run round the circle as the model says.');
  return { plane, circle, ...found, ...compare(quantities.naturalHz, fittedDamping, found) };
}

function compare(
  fitHz: Measured,
  fitDamping: Measured,
  circle: CircleResonance,
): { readonly disagrees: boolean | null; readonly sentence: string } {
  const hz = relativeDifference(fitHz, circle.naturalHz, NOTABLE_FREQUENCY);
  const damping = relativeDifference(fitDamping, circle.damping, NOTABLE_DAMPING);
  const parts = [
    hz === null ? null : `the natural frequency by ${plainNumber(100 * hz, 2)} %`,
    damping === null ? null : `the damping by ${plainNumber(100 * damping, 2)} %`,
  ].filter((part) => part !== null);
  if (parts.length === 0) {
    return {
      disagrees: false,
      sentence: 'The circle plot agrees with the fit in natural frequency and damping.',
    };
  }
  return {
    disagrees: true,
    sentence: `The circle plot differs from the fit beyond its uncertainty: ${parts.join(' and ')}. Look for crosstalk, a second mode, or a wrong choice of excitation.`,
  };
}

/** Relative difference circle - fit where it is beyond uncertainty and notable, else null. */
function relativeDifference(fit: Measured, circle: Measured, notable: number): number | null {
  if (fit.value === null || circle.value === null) return null;
  const apart = circle.value - fit.value;
  const beyond = Math.abs(apart) > SIGMAS * Math.hypot(circle.u ?? 0, fit.u ?? 0);
  return beyond && Math.abs(apart) > notable * fit.value ? apart / fit.value : null;
}
