import { DIRECT_FILTER_GAIN, filterColumns, filterRows } from './bspline.ts';
import { addPatch, emptyPatch, UNDEFORMED } from './patch-sampler.ts';
import type { Template } from './template.ts';

// Midpoints a pixel apart along the smear: finer than the smoothed picture's detail.
const SAMPLES_PER_PX = 1;
// The spline needs a pixel before and two after each sample.
const SUPPORT_PX = 2;
const SMALLEST_PX = 11;

/**
 * The template as it looks when it moves by `lengthPx` during the exposure: the mean over a straight line centred on it.
 * What moves in from outside the patch is not known, so the patch becomes smaller by the smear.
 *
 * @param directionRad of the motion, from +x towards +y
 * @returns null where too little of the patch would be left
 */
export function blurTemplate(template: Template, lengthPx: number, directionRad: number): Template | null {
  const alongX = lengthPx * Math.cos(directionRad);
  const alongY = lengthPx * Math.sin(directionRad);
  const widthPx = template.widthPx - 2 * (wholePixels(alongX / 2) + SUPPORT_PX);
  const heightPx = template.heightPx - 2 * (wholePixels(alongY / 2) + SUPPORT_PX);
  if (widthPx < SMALLEST_PX || heightPx < SMALLEST_PX) return null;

  const window = splineOf(template);
  const sums = emptyPatch(widthPx * heightPx);
  const samples = 1 + Math.ceil(SAMPLES_PER_PX * lengthPx);
  for (let k = 0; k < samples; k++) {
    const share = (k + 0.5) / samples - 0.5;
    addPatch(window, share * alongX, share * alongY, widthPx, heightPx, UNDEFORMED, 1 / samples, sums);
  }
  return { ...template, widthPx, heightPx, ...sums, raw: inner(template, widthPx, heightPx) };
}

/** Pixels that a length reaches into; a smear along an axis has only rounding across it. */
function wholePixels(length: number): number {
  return Math.ceil(Math.abs(length) - 1e-9);
}

/** The template's values as spline coefficients about its centre. */
function splineOf({ values, widthPx, heightPx }: Template) {
  const coefficients = values.map((value) => value * DIRECT_FILTER_GAIN * DIRECT_FILTER_GAIN);
  filterColumns(coefficients, widthPx, heightPx);
  filterRows(coefficients, widthPx, heightPx);
  return {
    coefficients,
    width: widthPx,
    height: heightPx,
    originX: -(widthPx - 1) / 2,
    originY: -(heightPx - 1) / 2,
  };
}

/** The middle of the patch before smoothing. */
function inner(template: Template, widthPx: number, heightPx: number): Float32Array {
  const left = (template.widthPx - widthPx) / 2;
  const top = (template.heightPx - heightPx) / 2;
  return Float32Array.from({ length: widthPx * heightPx }, (_, i) => {
    const row = top + Math.floor(i / widthPx);
    return template.raw[row * template.widthPx + left + (i % widthPx)]!;
  });
}
