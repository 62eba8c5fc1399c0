import { InputError } from '../errors.ts';
import { type ImageArea, imageNoiseDn } from './image-noise.ts';
import type { LumaImage } from './luma-image.ts';
import { addPatch, emptyPatch, UNDEFORMED } from './patch-sampler.ts';
import { FULL_SCALE_DN, PatchWindow } from './patch-window.ts';
import type { Template } from './template.ts';

// As much window round the patch as registration has, so that both see the spline's borders alike.
const MARGIN_PX = 4;
// The noise is judged in the neighbourhood of the marker: it depends on brightness.
const NOISE_REACH_PX = 96;

/** How a template is cut. */
export interface CutOptions {
  /** Odd, 15 or more; square unless `heightPx` says otherwise. */
  readonly widthPx: number;
  readonly heightPx?: number;
  /** Smoothing by [1 2 1]; on unless said. */
  readonly smoothed?: boolean;
  /** Image noise, DN of full scale 255, where it is known; estimated from the image otherwise. */
  readonly noiseDn?: number;
  /** The coded frame's pixel at the image's upper left corner; 0, 0 unless said. */
  readonly offsetX?: number;
  readonly offsetY?: number;
}

/** The area round a marker in which the image's noise is judged. */
export function noiseArea(x: number, y: number): ImageArea {
  return {
    left: Math.round(x) - NOISE_REACH_PX,
    top: Math.round(y) - NOISE_REACH_PX,
    width: 2 * NOISE_REACH_PX + 1,
    height: 2 * NOISE_REACH_PX + 1,
  };
}

/**
 * Cuts a template of given size round the point (x, y) of an image, without judging it. The patch is cut on whole
 * pixels and keeps the point's place between them, so that nothing is interpolated.
 *
 * @param x, y the marked point in pixels of the image, to a fraction of a pixel
 * @throws InputError where the patch does not lie inside the image; Error for an even size
 */
export function cutTemplate(image: LumaImage, x: number, y: number, options: CutOptions): Template {
  const { widthPx, heightPx = widthPx, smoothed = true, offsetX = 0, offsetY = 0 } = options;
  if (widthPx % 2 !== 1 || heightPx % 2 !== 1 || widthPx < 3 || heightPx < 3) {
    throw new Error(`a template needs odd sides, not ${widthPx} x ${heightPx}`);
  }
  const centreX = Math.round(x);
  const centreY = Math.round(y);
  const left = centreX - (widthPx - 1) / 2;
  const top = centreY - (heightPx - 1) / 2;
  if (!(left >= 0 && top >= 0 && left + widthPx <= image.width && top + heightPx <= image.height)) {
    throw new InputError(
      `The patch of ${widthPx} x ${heightPx} px round the point ${format(x + offsetX)}, ${format(y + offsetY)} does not ` +
        'lie inside the picture: choose a point further from its edge, or a smaller patch.',
    );
  }

  const window = new PatchWindow(widthPx + 2 * MARGIN_PX, heightPx + 2 * MARGIN_PX, smoothed);
  window.load(image, centreX, centreY);
  const patch = emptyPatch(widthPx * heightPx);
  addPatch(window, centreX, centreY, widthPx, heightPx, UNDEFORMED, 1, patch);

  const raw = new Float32Array(widthPx * heightPx);
  const scale = FULL_SCALE_DN / image.maxValue;
  for (let row = 0, i = 0; row < heightPx; row++) {
    const line = (top + row) * image.width + left;
    for (let column = 0; column < widthPx; column++, i++) raw[i] = image.data[line + column]! * scale;
  }
  return {
    widthPx,
    heightPx,
    markedXPx: x + offsetX,
    markedYPx: y + offsetY,
    pointXPx: x - centreX,
    pointYPx: y - centreY,
    ...patch,
    smoothed,
    raw,
    noiseDn: options.noiseDn ?? imageNoiseDn(image, noiseArea(x, y)),
    framesAveraged: 1,
    alias: null,
  };
}

function format(position: number): string {
  return position.toFixed(1);
}
