import { textureInformation } from './registration-uncertainty.ts';
import { interpolatedNoiseGain } from './spline-noise-gain.ts';
import type { Template } from './template.ts';

// Along a direction whose gradients are less than this share of what noise alone gives, there is no texture.
const LEAST_TEXTURE_TO_NOISE = 0.5;

/** What a template's texture is worth for tracking. */
export interface PatchTexture {
  /** Expected standard uncertainty of one frame's position along the worst direction, px; null when unbounded. */
  readonly worstUPx: number | null;
  /** The same along the best direction. */
  readonly bestUPx: number | null;
  /** The best direction, degrees from +x towards +y, -90 to 90. */
  readonly bestDirectionDeg: number;
  /** Standard deviation of the grey values, noise taken off, DN. */
  readonly contrastDn: number;
  /** Standard deviation of Gaussian blobs with the same fine detail, px; null where noise hides it. */
  readonly detailPx: number | null;
}

/**
 * Judges a template by its structure tensor: the eigenvectors of the Gauss-Newton matrix are the directions along
 * which motion is seen best and worst, and noise propagated along them gives the uncertainties.
 */
export function patchTexture(template: Template): PatchTexture {
  const { quietHessian, noiseInHessian, sumsCovariance } = textureInformation(template, 2);
  const [xx, xy, , yy] = quietHessian as unknown as readonly [number, number, number, number];
  const middle = (xx + yy) / 2;
  const half = Math.hypot((xx - yy) / 2, xy);
  const angle = 0.5 * Math.atan2(2 * xy, xx - yy);
  const least = LEAST_TEXTURE_TO_NOISE * noiseInHessian;
  const along = (eigenvalue: number, direction: number): number | null => {
    if (!(eigenvalue > least) || eigenvalue < 1e-9 * (middle + half)) return null;
    const cos = Math.cos(direction);
    const sin = Math.sin(direction);
    const noise =
      cos * cos * sumsCovariance[0]! + 2 * cos * sin * sumsCovariance[1]! + sin * sin * sumsCovariance[3]!;
    return (template.noiseDn * Math.sqrt(noise)) / eigenvalue;
  };
  return {
    bestUPx: along(middle + half, angle),
    worstUPx: along(middle - half, angle + Math.PI / 2),
    bestDirectionDeg: (angle * 180) / Math.PI,
    contrastDn: contrast(template),
    detailPx: detail(template),
  };
}

function contrast(template: Template): number {
  const { values, noiseDn, smoothed, framesAveraged } = template;
  let sum = 0;
  let squares = 0;
  for (const value of values) {
    sum += value;
    squares += value * value;
  }
  const variance = squares / values.length - (sum / values.length) ** 2;
  const noise = ((noiseDn * noiseDn) / framesAveraged) * interpolatedNoiseGain(0, smoothed) ** 2;
  return Math.sqrt(Math.max(0, variance - noise));
}

/**
 * A Gaussian blob of standard deviation s has twice its gradient energy over its Laplacian energy equal to s squared.
 * Noise is taken off both.
 */
function detail(template: Template): number | null {
  const { values, widthPx, heightPx, noiseDn, framesAveraged, smoothed } = template;
  let gradientEnergy = 0;
  let laplacianEnergy = 0;
  for (let y = 1; y < heightPx - 1; y++) {
    for (let x = 1; x < widthPx - 1; x++) {
      const i = y * widthPx + x;
      const left = values[i - 1]!;
      const right = values[i + 1]!;
      const above = values[i - widthPx]!;
      const below = values[i + widthPx]!;
      gradientEnergy += ((right - left) ** 2 + (below - above) ** 2) / 4;
      laplacianEnergy += (left + right + above + below - 4 * values[i]!) ** 2;
    }
  }
  const noise = ((widthPx - 2) * (heightPx - 2) * noiseDn * noiseDn) / framesAveraged;
  const gains = differenceNoiseGains(smoothed);
  const gradient = gradientEnergy - noise * gains.gradient;
  const laplacian = laplacianEnergy - noise * gains.laplacian;
  return gradient > 0 && laplacian > 0 ? Math.sqrt((2 * gradient) / laplacian) : null;
}

/**
 * Sums of squared weights of the central differences and of the five-point Laplacian, on pixels or after [1 2 1] / 4 in
 * x and y. Along one axis value, difference and second difference of [1 2 1] / 4 have sums of squares 3/8, 5/32 and 3/8,
 * and the product of value and second difference sums to -1/4.
 */
function differenceNoiseGains(smoothed: boolean): { readonly gradient: number; readonly laplacian: number } {
  if (!smoothed) return { gradient: 2 * (1 / 2), laplacian: 20 };
  return { gradient: 2 * (3 / 8) * (5 / 32), laplacian: 2 * (3 / 8) ** 2 + 2 * (1 / 4) ** 2 };
}

/** The score that two pictures of the template differing by its noise alone would have, at most 1. */
export function expectedScore(template: Template): number {
  const signal = contrast(template) ** 2;
  const noise = template.noiseDn ** 2 * interpolatedNoiseGain(0, template.smoothed) ** 2;
  const noiseInTemplate = noise / template.framesAveraged;
  return signal / Math.sqrt((signal + noise) * (signal + noiseInTemplate));
}
