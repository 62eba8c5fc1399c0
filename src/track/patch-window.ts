import { DIRECT_FILTER_GAIN, filterColumnsBackwards, filterRows, POLE } from './bspline.ts';
import type { LumaImage } from './luma-image.ts';

/** Grey values inside the tracker are on this scale, whatever the bit depth of the frames. */
export const FULL_SCALE_DN = 255;

/** Cubic B-spline coefficients of a piece of a picture, row by row, and where its upper left pixel stands. */
export interface SplineWindow {
  readonly width: number;
  readonly height: number;
  readonly coefficients: Float64Array;
  readonly originX: number;
  readonly originY: number;
}

/**
 * A window of a frame as cubic B-spline coefficients, smoothed by [1 2 1] / 4 in x and y on the way in where asked.
 * It is made once per patch size and loaded for every frame, without allocation.
 */
export class PatchWindow implements SplineWindow {
  readonly width: number;
  readonly height: number;
  /** Coefficients, row by row, DN of full scale 255. */
  readonly coefficients: Float64Array;
  /** The pixel of the image at the window's upper left corner, set by `load`. */
  originX = 0;
  originY = 0;
  private readonly rows: Float64Array;

  /** @param width at least 3; `height` alike, both odd, so that the window has a centre pixel */
  constructor(
    width: number,
    height: number,
    readonly smoothed: boolean,
  ) {
    this.width = width;
    this.height = height;
    this.coefficients = new Float64Array(width * height);
    this.rows = new Float64Array(width * (height + 2));
  }

  /** Loads the window centred on a whole pixel. Pixels beyond the image count as equal to its border. */
  load(image: LumaImage, centreX: number, centreY: number): void {
    this.originX = centreX - ((this.width - 1) >> 1);
    this.originY = centreY - ((this.height - 1) >> 1);
    this.copyRows(image);
    this.filterDown((FULL_SCALE_DN / image.maxValue) * DIRECT_FILTER_GAIN * DIRECT_FILTER_GAIN);
    filterColumnsBackwards(this.coefficients, this.width, this.height);
    filterRows(this.coefficients, this.width, this.height);
  }

  /** Copies the window and a row above and below, adding neighbours in x as 1 2 1 where smoothed. */
  private copyRows(image: LumaImage): void {
    const { rows, width, height, originX, originY, smoothed } = this;
    const { data } = image;
    const inside = originX >= 1 && originX + width < image.width;
    for (let row = 0, to = 0; row < height + 2; row++) {
      const line = Math.min(image.height - 1, Math.max(0, originY - 1 + row)) * image.width;
      if (!inside) {
        const last = image.width - 1;
        for (let x = originX; x < originX + width; x++, to++) {
          const centre = data[line + Math.min(last, Math.max(0, x))]!;
          const before = data[line + Math.min(last, Math.max(0, x - 1))]!;
          const after = data[line + Math.min(last, Math.max(0, x + 1))]!;
          rows[to] = smoothed ? before + 2 * centre + after : centre;
        }
      } else if (smoothed) {
        let from = line + originX;
        let before = data[from - 1]!;
        let centre = data[from]!;
        for (const end = to + width; to < end; to++) {
          const after = data[++from]!;
          rows[to] = before + 2 * centre + after;
          before = centre;
          centre = after;
        }
      } else {
        let from = line + originX;
        for (const end = to + width; to < end; to++) rows[to] = data[from++]!;
      }
    }
  }

  /** Smooths in y and runs the spline filter's forward recursion, in one pass. */
  private filterDown(gain: number): void {
    const { rows, coefficients, width, height, smoothed } = this;
    const count = width * height;
    const twice = 2 * width;
    const scale = smoothed ? gain / 16 : gain;
    const atStart = 1 / (1 - POLE);
    if (smoothed) {
      for (let i = 0; i < width; i++) {
        coefficients[i] = (rows[i]! + 2 * rows[i + width]! + rows[i + twice]!) * scale * atStart;
      }
      for (let i = width; i < count; i++) {
        coefficients[i] =
          (rows[i]! + 2 * rows[i + width]! + rows[i + twice]!) * scale + POLE * coefficients[i - width]!;
      }
    } else {
      for (let i = 0; i < width; i++) coefficients[i] = rows[i + width]! * scale * atStart;
      for (let i = width; i < count; i++) {
        coefficients[i] = rows[i + width]! * scale + POLE * coefficients[i - width]!;
      }
    }
  }
}
