import type { LumaImage } from '../../src/track/luma-image.ts';
import { seededRandom } from './seeded-random.ts';

/** A texture of Gaussian blobs about the origin: every picture of it is exact, with no resampling. */
export interface Texture {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly sigma: Float64Array;
  readonly amplitude: Float64Array;
}

/** Where and how a texture is drawn. */
export interface Pose {
  /** Where its origin stands in the picture, px. */
  readonly x: number;
  readonly y: number;
  readonly angleRad?: number;
  /** Contrast factor. */
  readonly gain?: number;
  /** Mean grey value, DN of 255. */
  readonly mean?: number;
  /** Standard deviation of noise, DN of 255. */
  readonly noiseDn?: number;
}

export const FINE = { sigma: [0.9, 2], contrastDn: 28 } as const;
export const SOFT = { sigma: [2.5, 5], contrastDn: 28 } as const;
export const WEAK = { sigma: [0.9, 2.5], contrastDn: 6 } as const;

/** Blobs with sigma spread evenly over a range, dense enough to overlap, over +-`reach` px; scaled to a contrast. */
export function makeTexture(
  kind: { readonly sigma: readonly [number, number]; readonly contrastDn: number },
  seed: number,
  reach = 48,
): Texture {
  const random = seededRandom(seed);
  const area = (2 * reach) ** 2;
  const meanSigma = (kind.sigma[0] + kind.sigma[1]) / 2;
  const count = Math.round((0.5 * area) / meanSigma ** 2);
  const texture = {
    x: Float64Array.from({ length: count }, () => (2 * random.uniform() - 1) * reach),
    y: Float64Array.from({ length: count }, () => (2 * random.uniform() - 1) * reach),
    sigma: Float64Array.from(
      { length: count },
      () => kind.sigma[0] + random.uniform() * (kind.sigma[1] - kind.sigma[0]),
    ),
    amplitude: Float64Array.from(
      { length: count },
      () => (random.uniform() < 0.5 ? -1 : 1) * (0.5 + random.uniform()),
    ),
  };
  const size = Math.round(reach);
  const field = drawField(texture, size, size, { x: (size - 1) / 2, y: (size - 1) / 2, mean: 0 });
  const mean = field.reduce((sum, value) => sum + value, 0) / field.length;
  const deviation = Math.sqrt(field.reduce((sum, value) => sum + (value - mean) ** 2, 0) / field.length);
  return { ...texture, amplitude: texture.amplitude.map((value) => (value * kind.contrastDn) / deviation) };
}

/** The picture before noise and rounding, DN: each pixel is the integral of the blobs over its square. */
export function drawField(texture: Texture, width: number, height: number, pose: Pose): Float64Array {
  const field = new Float64Array(width * height).fill(pose.mean ?? 120);
  addTexture(field, texture, width, height, pose);
  return field;
}

/** Adds a texture to a picture. */
export function addTexture(
  field: Float64Array,
  texture: Texture,
  width: number,
  height: number,
  pose: Pose,
): void {
  const { angleRad = 0, gain = 1 } = pose;
  const cos = Math.cos(angleRad);
  const sin = Math.sin(angleRad);
  const alongX = new Float64Array(width);
  const alongY = new Float64Array(height);
  for (let k = 0; k < texture.x.length; k++) {
    const sigma = texture.sigma[k]!;
    const [left, right] = pixelShares(pose.x + cos * texture.x[k]! - sin * texture.y[k]!, sigma, alongX);
    const [top, bottom] = pixelShares(pose.y + sin * texture.x[k]! + cos * texture.y[k]!, sigma, alongY);
    // Integral of exp(-r^2 / 2 sigma^2) over a pixel, by error functions.
    const peak = (gain * texture.amplitude[k]! * Math.PI * sigma * sigma) / 2;
    for (let y = top; y <= bottom; y++) {
      const factor = peak * alongY[y]!;
      for (let x = left; x <= right; x++) field[y * width + x]! += factor * alongX[x]!;
    }
  }
}

/** Writes the share of each pixel in a Gaussian along one axis; returns the first and last pixel it reaches. */
function pixelShares(centre: number, sigma: number, shares: Float64Array): [number, number] {
  const first = Math.max(0, Math.round(centre - 5.5 * sigma));
  const last = Math.min(shares.length - 1, Math.round(centre + 5.5 * sigma));
  const scale = 1 / (Math.SQRT2 * sigma);
  let before = erf((first - 0.5 - centre) * scale);
  for (let x = first; x <= last; x++) {
    const after = erf((x + 0.5 - centre) * scale);
    shares[x] = after - before;
    before = after;
  }
  return [first, last];
}

/** Error function within 1.5e-7: Abramowitz and Stegun 7.1.26. */
function erf(x: number): number {
  const t = 1 / (1 + 0.3275911 * Math.abs(x));
  const series =
    t * (0.254829592 + t * (-0.284496736 + t * (1.421413741 + t * (-1.453152027 + t * 1.061405429))));
  const value = 1 - series * Math.exp(-x * x);
  return x < 0 ? -value : value;
}

/** Rounds a field to whole grey values, with noise where asked. */
export function toImage(
  field: Float64Array,
  width: number,
  noiseDn = 0,
  seed = 1,
  maxValue = 255,
): LumaImage {
  const random = seededRandom(seed);
  const scale = maxValue / 255;
  const data = maxValue > 255 ? new Uint16Array(field.length) : new Uint8Array(field.length);
  for (let i = 0; i < field.length; i++) {
    const noise = noiseDn > 0 ? noiseDn * random.normal() : 0;
    data[i] = Math.max(0, Math.min(maxValue, Math.round((field[i]! + noise) * scale)));
  }
  return { data, width, height: field.length / width, maxValue };
}

/** A square picture of a texture. */
export function drawImage(texture: Texture, size: number, pose: Pose, seed = 1, maxValue = 255): LumaImage {
  return toImage(drawField(texture, size, size, pose), size, pose.noiseDn ?? 0, seed, maxValue);
}
