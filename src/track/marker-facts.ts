import { clippedFraction } from './clipping.ts';
import type { LumaImage } from './luma-image.ts';
import { FULL_SCALE_DN } from './patch-window.ts';
import type { Region } from './region.ts';
import type { Template } from './template.ts';

/** What is seen of a marker in one frame besides its place. */
export interface MarkerFacts {
  /** Fraction of the patch that is clipped white or black, 0 to 1. */
  readonly saturatedFraction: number;
  /**
   * Steepness of the picture along x, relative to the template: 1 as sharp, below 1 blurred along x. A blob of standard
   * deviation s that motion spreads to S has s / S. Independent of light and contrast; null where noise hides it.
   */
  readonly sharpnessX: number | null;
  readonly sharpnessY: number | null;
}

/**
 * Clipping and motion blur of a marker found at (x, y) of the coded frame. Blur is told from the gradient energy of
 * the patch over its contrast energy, noise taken off both, compared with the template's.
 *
 * @param noiseDn standard deviation of this frame's noise, DN of 255; the template's where not given
 * @returns null where the patch does not lie inside the region
 */
export function markerFacts(
  region: Region,
  template: Template,
  x: number,
  y: number,
  noiseDn = template.noiseDn,
): MarkerFacts | null {
  const { widthPx, heightPx } = template;
  const left = Math.round(x - template.pointXPx - region.offsetX) - (widthPx - 1) / 2;
  const top = Math.round(y - template.pointYPx - region.offsetY) - (heightPx - 1) / 2;
  const { image } = region;
  if (left < 0 || top < 0 || left + widthPx > image.width || top + heightPx > image.height) return null;
  const reference = steepness(template.raw, widthPx, heightPx, template.noiseDn);
  const seen = steepness(patchOf(image, left, top, widthPx, heightPx), widthPx, heightPx, noiseDn);
  const ratio = (a: number | null, b: number | null): number | null =>
    a !== null && b !== null ? Math.sqrt(a / b) : null;
  return {
    saturatedFraction: clippedFraction(image, left, top, widthPx, heightPx),
    sharpnessX: ratio(seen.x, reference.x),
    sharpnessY: ratio(seen.y, reference.y),
  };
}

function patchOf(image: LumaImage, left: number, top: number, width: number, height: number): Float32Array {
  const scale = FULL_SCALE_DN / image.maxValue;
  const patch = new Float32Array(width * height);
  for (let row = 0, to = 0; row < height; row++) {
    const line = (top + row) * image.width + left;
    for (let column = 0; column < width; column++, to++) patch[to] = image.data[line + column]! * scale;
  }
  return patch;
}

// The central difference [-1 0 1] / 2 passes half of the variance of white noise.
const DIFFERENCE_NOISE_GAIN = 0.5;

/** Mean squared gradient along each axis over the variance, per px squared; null where noise leaves nothing. */
function steepness(
  patch: Float32Array,
  width: number,
  height: number,
  noiseDn: number,
): { readonly x: number | null; readonly y: number | null } {
  let sum = 0;
  let squares = 0;
  let alongX = 0;
  let alongY = 0;
  let count = 0;
  for (let row = 1; row < height - 1; row++) {
    for (let column = 1; column < width - 1; column++) {
      const i = row * width + column;
      const value = patch[i]!;
      sum += value;
      squares += value * value;
      alongX += (patch[i + 1]! - patch[i - 1]!) ** 2 / 4;
      alongY += (patch[i + width]! - patch[i - width]!) ** 2 / 4;
      count++;
    }
  }
  const noise = noiseDn * noiseDn;
  const contrast = squares / count - (sum / count) ** 2 - noise;
  const quiet = (energy: number): number | null => {
    const gradient = energy / count - DIFFERENCE_NOISE_GAIN * noise;
    return contrast > 0 && gradient > 0 ? gradient / contrast : null;
  };
  return { x: quiet(alongX), y: quiet(alongY) };
}
