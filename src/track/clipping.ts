import type { LumaImage } from './luma-image.ts';
import { FULL_SCALE_DN } from './patch-window.ts';

// Full-range luma is clipped at its ends. Limited-range luma is clipped at 235 and 16, which codecs blur a little, so
// that there a pixel counts only where its neighbours are as white or as black.
const WHITE_DN = 254;
const BLACK_DN = 1;
const LIMITED_WHITE_DN = 233.5;
const LIMITED_BLACK_DN = 16.5;
const FLAT_WITHIN_DN = 1.01;

/**
 * Fraction of the pixels of a patch that are clipped white or black, 0 to 1. The patch is given by its corner and size
 * in whole pixels of the image; what lies outside is left out. 0 where nothing lies inside.
 */
export function clippedFraction(
  image: LumaImage,
  left: number,
  top: number,
  widthPx: number,
  heightPx: number,
): number {
  let clipped = 0;
  let count = 0;
  for (let y = Math.max(0, top); y < Math.min(image.height, top + heightPx); y++) {
    for (let x = Math.max(0, left); x < Math.min(image.width, left + widthPx); x++) {
      count++;
      if (isClipped(image, x, y)) clipped++;
    }
  }
  return count > 0 ? clipped / count : 0;
}

function isClipped(image: LumaImage, x: number, y: number): boolean {
  const scale = FULL_SCALE_DN / image.maxValue;
  const value = image.data[y * image.width + x]! * scale;
  if (value >= WHITE_DN || value <= BLACK_DN) return true;
  if (value < LIMITED_WHITE_DN && value > LIMITED_BLACK_DN) return false;
  for (let j = Math.max(0, y - 1); j <= Math.min(image.height - 1, y + 1); j++) {
    for (let k = Math.max(0, x - 1); k <= Math.min(image.width - 1, x + 1); k++) {
      if (Math.abs(image.data[j * image.width + k]! * scale - value) > FLAT_WITHIN_DN) return false;
    }
  }
  return true;
}
