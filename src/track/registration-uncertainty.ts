import { invertSymmetric } from '../numeric/linear-algebra.ts';
import type { Registration } from './registration.ts';
import { derivativeNoiseGain, interpolatedNoiseGain } from './spline-noise-gain.ts';
import { steepestDescent } from './steepest-descent.ts';
import type { Template } from './template.ts';

/**
 * The least standard uncertainty with which a shift along one axis can be known from one frame with white noise of
 * standard deviation `sigmaDn`, px: sigma / sqrt(sum of squared gradients), the Cramer-Rao bound
 * (D. Robinson and P. Milanfar, "Fundamental performance limits in image registration", IEEE Trans. Image Processing
 * 13, 2004). The gradients must be those of the picture without noise; with noise in both of two frames the bound
 * on their shift is sqrt(2) times this.
 *
 * @returns null where there is no gradient
 */
export function shiftBoundPx(sigmaDn: number, gradient: Float64Array): number | null {
  let sum = 0;
  for (const slope of gradient) sum += slope * slope;
  return sum > 0 ? sigmaDn / Math.sqrt(sum) : null;
}

/** Covariance of a position, px squared. */
export interface PositionCovariance {
  readonly xx: number;
  readonly xy: number;
  readonly yy: number;
}

// Of a template that is mostly noise nothing can be said; judged spots have a share of 0.5 and more.
const LEAST_SIGNAL_SHARE = 0.1;
const PHASES = 32;

/**
 * What noise does to the positions that a registrar finds with one template. It propagates white noise through the
 * smoothing, the steepest-descent images and the Gauss-Newton matrix, less what the template's own noise adds to that
 * matrix. Template noise itself shifts all frames alike and is not counted, nor is anything but noise.
 */
export class RegistrationUncertainty {
  /** Covariance of a position for noise of 1 DN at gain 1; null where noise hides the texture along some direction. */
  readonly perUnitNoise: PositionCovariance | null;
  private readonly noiseGainByPhase: Float64Array;
  private readonly templateNoiseGain: number;
  private readonly signalShare: number;

  constructor(template: Template, parameters: 2 | 6) {
    const { smoothed, framesAveraged, noiseDn } = template;
    this.perUnitNoise = covariancePerUnitNoise(template, parameters);
    this.noiseGainByPhase = noiseGainsByPhase(smoothed);
    this.templateNoiseGain = this.noiseGainByPhase[0]! ** 2 / framesAveraged;
    const noise = noiseDn * noiseDn * this.templateNoiseGain;
    this.signalShare = Math.max(LEAST_SIGNAL_SHARE, 1 - noise / variance(template.values));
  }

  /**
   * The noise of a frame's pixels before smoothing, DN, from what a registration left over, a template of one frame being
   * as noisy as a frame. Whatever else the frame differs by is taken for noise, which makes uncertainties larger.
   */
  frameNoiseDn(registration: Registration): number {
    const { x, y, residualDn, gain } = registration;
    const fromTemplate = gain * this.trueGain(gain) * this.templateNoiseGain;
    return residualDn / Math.sqrt(this.noiseGainAt(x) * this.noiseGainAt(y) + fromTemplate);
  }

  /** Covariance of a registered position from its residual, px squared; null where `perUnitNoise` is. */
  ofRegistration(registration: Registration): PositionCovariance | null {
    const unit = this.perUnitNoise;
    if (!unit || registration.gain <= 0) return null;
    const factor = (this.frameNoiseDn(registration) / this.trueGain(registration.gain)) ** 2;
    return { xx: unit.xx * factor, xy: unit.xy * factor, yy: unit.yy * factor };
  }

  /** A regression on a noisy template finds too small a gain, by the template's share of signal. */
  private trueGain(gain: number): number {
    return gain / this.signalShare;
  }

  private noiseGainAt(position: number): number {
    return this.noiseGainByPhase[Math.round((position - Math.floor(position)) * PHASES)]!;
  }
}

const noiseGains = new Map<boolean, Float64Array>();

/** `interpolatedNoiseGain` at fractions k / PHASES, worked out once. */
function noiseGainsByPhase(smoothed: boolean): Float64Array {
  let gains = noiseGains.get(smoothed);
  if (!gains) {
    gains = Float64Array.from({ length: PHASES + 1 }, (_, k) => interpolatedNoiseGain(k / PHASES, smoothed));
    noiseGains.set(smoothed, gains);
  }
  return gains;
}

function variance(values: Float64Array): number {
  let sum = 0;
  let squares = 0;
  for (const value of values) {
    sum += value;
    squares += value * value;
  }
  return squares / values.length - (sum / values.length) ** 2;
}

/** What a template's texture can tell, and what noise does to it; both `parameters` * `parameters`. */
export interface TextureInformation {
  /** Gauss-Newton matrix of the texture alone: less what the template's own noise adds to it. */
  readonly quietHessian: Float64Array;
  /** What noise adds to each of the first two diagonal elements of the Gauss-Newton matrix. */
  readonly noiseInHessian: number;
  /** Covariance of the steepest-descent sums for frame noise of 1 DN per pixel. */
  readonly sumsCovariance: Float64Array;
}

/** Takes a template's texture and its noise apart. */
export function textureInformation(template: Template, parameters: 2 | 6): TextureInformation {
  const { widthPx, heightPx, smoothed, noiseDn, framesAveraged } = template;
  const { images, hessian } = steepestDescent(template, parameters);
  const count = widthPx * heightPx;

  const noiseInHessian =
    ((count * noiseDn * noiseDn) / framesAveraged) *
    derivativeNoiseGain(smoothed) *
    interpolatedNoiseGain(0, smoothed);
  const meanSquareX = (widthPx * widthPx - 1) / 12;
  const meanSquareY = (heightPx * heightPx - 1) / 12;
  const lever = [1, 1, meanSquareX, meanSquareY, meanSquareX, meanSquareY];
  const quietHessian = Float64Array.from(hessian);
  for (let k = 0; k < parameters; k++) quietHessian[k * parameters + k]! -= noiseInHessian * lever[k]!;

  const seen = Array.from({ length: parameters }, (_, k) => {
    const image = images.subarray(k * count, (k + 1) * count);
    return smoothed ? spreadByBinomial(image, widthPx, heightPx) : image;
  });
  const sumsCovariance = new Float64Array(parameters * parameters);
  for (let a = 0; a < parameters; a++) {
    for (let b = 0; b < parameters; b++) sumsCovariance[a * parameters + b] = dot(seen[a]!, seen[b]!);
  }
  return { quietHessian, noiseInHessian, sumsCovariance };
}

function covariancePerUnitNoise(template: Template, parameters: 2 | 6): PositionCovariance | null {
  const { quietHessian, sumsCovariance } = textureInformation(template, parameters);
  const inverse = invertSymmetric(quietHessian, parameters);
  if (!inverse) return null;
  const covariance = (a: number, b: number): number => {
    let sum = 0;
    for (let i = 0; i < parameters; i++) {
      for (let j = 0; j < parameters; j++) {
        sum +=
          inverse[a * parameters + i]! * sumsCovariance[i * parameters + j]! * inverse[j * parameters + b]!;
      }
    }
    return sum;
  };
  return { xx: covariance(0, 0), xy: covariance(0, 1), yy: covariance(1, 1) };
}

/** The patch smoothed by [1 2 1] / 4 in x and y with a frame of zeros round it: (width + 2) * (height + 2). */
function spreadByBinomial(image: Float64Array, width: number, height: number): Float64Array {
  const spread = new Float64Array((width + 2) * (height + 2));
  const taps = [0.25, 0.5, 0.25];
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const value = image[y * width + x]!;
      for (let j = 0; j < 3; j++) {
        for (let k = 0; k < 3; k++) spread[(y + j) * (width + 2) + x + k]! += taps[j]! * taps[k]! * value;
      }
    }
  }
  return spread;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
