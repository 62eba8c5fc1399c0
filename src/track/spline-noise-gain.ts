import { cubicWeights } from './bspline.ts';

// The mean of a smooth periodic function over so many points is exact to rounding.
const STEPS = 64;

/**
 * By how much the direct filter, a sample between pixels and (where `smoothed`) one [1 2 1] / 4 change the variance of
 * white noise along one axis, for a sample at `fraction` (0 to 1) past a pixel: the mean over all frequencies of the
 * squared frequency response. 1 at a pixel unsmoothed, 3/8 smoothed.
 */
export function interpolatedNoiseGain(fraction: number, smoothed: boolean): number {
  const weights = new Float64Array(4);
  cubicWeights(fraction, weights);
  return meanOverFrequencies((omega) => {
    let real = 0;
    let imaginary = 0;
    for (let k = 0; k < 4; k++) {
      real += weights[k]! * Math.cos(omega * k);
      imaginary += weights[k]! * Math.sin(omega * k);
    }
    const spline = (real * real + imaginary * imaginary) / directFilterLoss(omega) ** 2;
    return spline * smoothing(omega, smoothed);
  });
}

/** The same for the spline's derivative at a pixel, per pixel: the other axis of a gradient has `interpolatedNoiseGain`. */
export function derivativeNoiseGain(smoothed: boolean): number {
  return meanOverFrequencies(
    (omega) => (Math.sin(omega) / directFilterLoss(omega)) ** 2 * smoothing(omega, smoothed),
  );
}

/** Frequency response of the sampled cubic B-spline, which the direct filter undoes. */
function directFilterLoss(omega: number): number {
  return (2 + Math.cos(omega)) / 3;
}

/** Squared frequency response of [1 2 1] / 4. */
function smoothing(omega: number, smoothed: boolean): number {
  return smoothed ? Math.cos(omega / 2) ** 4 : 1;
}

function meanOverFrequencies(power: (omega: number) => number): number {
  let sum = 0;
  for (let k = 0; k < STEPS; k++) sum += power((Math.PI * (k + 0.5)) / STEPS);
  return sum / STEPS;
}
