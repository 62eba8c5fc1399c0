import type { LumaImage } from './luma-image.ts';
import { addPatch, type Deformation, emptyPatch, UNDEFORMED } from './patch-sampler.ts';
import { PatchWindow } from './patch-window.ts';
import type { Template } from './template.ts';

// Window beyond the patch: the spline's support, and room for the corners of a patch turned by some degrees.
const MARGIN_PX = 4;
const DEFORMED_SHARE = 0.1;
// With less noise than this, DN, what interpolation gets wrong matters more than noise, and smoothing reduces it.
const SMOOTH_BELOW_NOISE_DN = 1.5;

/**
 * Averages the marker's picture over frames in which it has been tracked, for a second pass. A cut template carries the
 * noise of one frame into every position; an average of 100 carries a tenth of it, and of noisy frames needs no
 * smoothing, so that the second pass comes nearer to the bound. Feed it the frames again with their positions: trusted ones only.
 */
export class TemplateAverager {
  private readonly window: PatchWindow;
  private readonly sums;
  private frames = 0;

  /**
   * @param template the one that the positions were found with
   * @param smoothed whether the second pass is to smooth by [1 2 1] too; by the noise of the frames unless said
   */
  constructor(
    private readonly template: Template,
    private readonly smoothed = template.noiseDn < SMOOTH_BELOW_NOISE_DN,
  ) {
    const { widthPx, heightPx } = template;
    const margin = MARGIN_PX + Math.ceil(DEFORMED_SHARE * Math.max(widthPx, heightPx));
    this.window = new PatchWindow(widthPx + 2 * margin, heightPx + 2 * margin, smoothed);
    this.sums = emptyPatch(widthPx * heightPx);
  }

  /** Number of frames taken in. */
  get count(): number {
    return this.frames;
  }

  /**
   * Takes a frame in.
   *
   * @param offsetX, offsetY the coded frame's pixel at the image's upper left corner
   * @param x, y the marked point as it was found in this frame, coded frame
   * @param deformation as it was found; none where a translation was registered
   * @throws Error where the deformation is larger than registration allows
   */
  add(
    image: LumaImage,
    offsetX: number,
    offsetY: number,
    x: number,
    y: number,
    deformation: Deformation = UNDEFORMED,
  ): void {
    const { pointXPx, pointYPx, widthPx, heightPx } = this.template;
    const { xx, xy, yx, yy } = deformation;
    const centreX = x - offsetX - (pointXPx + xx * pointXPx + xy * pointYPx);
    const centreY = y - offsetY - (pointYPx + yx * pointXPx + yy * pointYPx);
    this.window.load(image, Math.round(centreX), Math.round(centreY));
    addPatch(this.window, centreX, centreY, widthPx, heightPx, deformation, 1, this.sums);
    this.frames++;
  }

  /** The averaged template; null while no frame has been taken in. */
  finish(): Template | null {
    const { frames, sums, template, smoothed } = this;
    if (frames === 0) return null;
    const mean = (values: Float64Array): Float64Array => values.map((value) => value / frames);
    return {
      ...template,
      values: mean(sums.values),
      gradientX: mean(sums.gradientX),
      gradientY: mean(sums.gradientY),
      smoothed,
      framesAveraged: frames,
    };
  }
}
