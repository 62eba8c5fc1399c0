import type { LumaImage } from './luma-image.ts';
import { FULL_SCALE_DN } from './patch-window.ts';

const BLOCK_PX = 16;
// The quietest tenth of the blocks has the least texture in it.
const QUIET_FRACTION = 0.1;
// Of pure noise, a 16 px block's estimate scatters by 9.8 % (sum of the mask's squared autocorrelations 3.78, 196
// values), so that the tenth percentile of many lies this far below the truth.
const QUIET_SHARE = 1 - 1.2816 * 0.098;

/** The part of an image that something is measured in, in whole pixels, clipped to the image. */
export interface ImageArea {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

/** The standard deviation of rounding to whole grey values, DN on a scale of 0 to 255. */
export function roundingNoiseDn(maxValue: number): number {
  return FULL_SCALE_DN / maxValue / Math.sqrt(12);
}

/**
 * Standard deviation of an image's noise, DN on a scale of 0 to 255, from the second difference of second differences,
 * which shading and straight edges do not reach (J. Immerkaer, "Fast noise variance estimation", Computer Vision and
 * Image Understanding 64, 1996), in the quietest blocks of the area. Blocks that are clipped are left out. Compression
 * takes noise away that is not independent of the picture: of decoded video the value is a lower bound.
 *
 * @returns at least the noise of rounding; that also where the area has no block of 16 px left to judge by
 */
export function imageNoiseDn(image: LumaImage, area?: ImageArea): number {
  const left = Math.max(0, area?.left ?? 0);
  const top = Math.max(0, area?.top ?? 0);
  const right = Math.min(image.width, area ? area.left + area.width : image.width);
  const bottom = Math.min(image.height, area ? area.top + area.height : image.height);
  const estimates: number[] = [];
  for (let y = top; y + BLOCK_PX <= bottom; y += BLOCK_PX) {
    for (let x = left; x + BLOCK_PX <= right; x += BLOCK_PX) {
      const estimate = blockNoise(image, x, y);
      if (estimate !== null) estimates.push(estimate);
    }
  }
  const least = roundingNoiseDn(image.maxValue);
  if (estimates.length === 0) return least;
  estimates.sort((a, b) => a - b);
  const quiet = estimates[Math.floor(QUIET_FRACTION * (estimates.length - 1))]!;
  return Math.max(least, ((quiet / QUIET_SHARE) * FULL_SCALE_DN) / image.maxValue);
}

/** One block's estimate in the image's own grey values; null where it is clipped. */
function blockNoise(image: LumaImage, left: number, top: number): number | null {
  const { data, width, maxValue } = image;
  let sum = 0;
  for (let y = top + 1; y < top + BLOCK_PX - 1; y++) {
    for (let x = left + 1; x < left + BLOCK_PX - 1; x++) {
      const at = y * width + x;
      const centre = data[at]!;
      if (centre <= 0 || centre >= maxValue) return null;
      const sides = data[at - 1]! + data[at + 1]! + data[at - width]! + data[at + width]!;
      const corners =
        data[at - width - 1]! + data[at - width + 1]! + data[at + width - 1]! + data[at + width + 1]!;
      const response = 4 * centre - 2 * sides + corners;
      sum += response * response;
    }
  }
  // The mask's squared weights sum to 36.
  return Math.sqrt(sum / ((BLOCK_PX - 2) * (BLOCK_PX - 2) * 36));
}
