import {
  type AffineWarp,
  composeInverse,
  edgeMotion,
  isWithin,
  reachAlongX,
  reachAlongY,
} from './affine-warp.ts';
import type { LumaImage } from './luma-image.ts';
import { type Deformation, UNDEFORMED } from './patch-sampler.ts';
import { PatchWindow } from './patch-window.ts';
import {
  DEFAULT_MARGIN_PX,
  DEFAULT_MAX_ITERATIONS,
  DEFAULT_STOP_PX,
  emptyRegistration,
  LEAST_GAIN,
  LONGEST_STEP_PX,
  MAX_LOADS,
  type RegistrarOptions,
  type Registration,
} from './registration.ts';
import { requireInverse, steepestDescent } from './steepest-descent.ts';
import type { Template } from './template.ts';

// A part in a dwell turns by a few degrees; beyond this the iteration has run away.
const LARGEST_DEFORMATION = 0.35;

/**
 * Registers a template in a frame by an affine warp, as `TranslationRegistrar` does by translation: for parts that turn,
 * or move towards or away from the camera. Each call starts from the deformation of the last one that converged.
 */
export class AffineRegistrar {
  readonly window: PatchWindow;
  private readonly result: Registration = emptyRegistration();
  private readonly centred: Float64Array;
  private readonly energy: number;
  private readonly images: Float64Array;
  private readonly inverseHessian: Float64Array;
  private readonly maxIterations: number;
  private readonly stopPx: number;
  private readonly halfX: number;
  private readonly halfY: number;
  private readonly step = new Float64Array(6);
  private readonly warp: AffineWarp = new Float64Array(6);
  private readonly sums = new Float64Array(9);

  /** @throws Error where the template has no texture in two directions (`judgeSpot` says so beforehand) */
  constructor(
    private readonly template: Template,
    options: RegistrarOptions = {},
  ) {
    const { widthPx, heightPx, smoothed } = template;
    // A patch turned by 4 degrees needs a little more room in its corners than one that only moves.
    const margin = (options.marginPx ?? DEFAULT_MARGIN_PX) + Math.ceil(0.04 * Math.max(widthPx, heightPx));
    this.maxIterations = options.maxIterations ?? DEFAULT_MAX_ITERATIONS;
    this.stopPx = options.stopPx ?? DEFAULT_STOP_PX;
    this.halfX = (widthPx - 1) / 2;
    this.halfY = (heightPx - 1) / 2;
    this.window = new PatchWindow(widthPx + 2 * margin, heightPx + 2 * margin, smoothed);
    const descent = steepestDescent(template, 6);
    this.centred = descent.centred;
    this.energy = descent.energy;
    this.images = descent.images;
    this.inverseHessian = requireInverse(descent);
  }

  /** The deformation of the last registration that converged. */
  get deformation(): Deformation {
    return { xx: this.warp[2]!, xy: this.warp[3]!, yx: this.warp[4]!, yy: this.warp[5]! };
  }

  /** Sets the deformation from which the next call starts. */
  startFrom(deformation: Deformation): void {
    this.warp[2] = deformation.xx;
    this.warp[3] = deformation.xy;
    this.warp[4] = deformation.yx;
    this.warp[5] = deformation.yy;
  }

  /**
   * Looks for the marked point near (startX, startY), in pixels of `image`.
   *
   * @returns the registrar's one result, overwritten by the next call
   */
  register(image: LumaImage, startX: number, startY: number): Registration {
    const { window, result, warp } = this;
    result.score = -1;
    result.converged = false;
    result.iterations = 0;
    warp[0] = startX - this.pointX();
    warp[1] = startY - this.pointY();
    let loads = 0;
    let loaded = false;
    while (result.iterations < this.maxIterations) {
      if (!loaded || !this.holds()) {
        const inside = warp[0]! > 0 && warp[1]! > 0 && warp[0]! < image.width && warp[1]! < image.height;
        if (!inside || loads === MAX_LOADS) break;
        window.load(image, Math.round(warp[0]!), Math.round(warp[1]!));
        loads++;
        loaded = true;
        // The start may be deformed more than the window has room for.
        if (!this.holds()) break;
      }
      result.iterations++;
      this.correlate();
      this.judge();
      if (result.gain < LEAST_GAIN) break;
      const moved = this.takeStep(result.gain);
      if (!isWithin(warp, LARGEST_DEFORMATION)) break;
      if (moved < 2 * this.stopPx) {
        result.converged = true;
        break;
      }
    }
    result.x = warp[0]! + this.pointX();
    result.y = warp[1]! + this.pointY();
    if (!result.converged) this.startFrom(UNDEFORMED);
    return result;
  }

  /** Where the marked point stands relative to the patch's centre under the present deformation. */
  private pointX(): number {
    const { pointXPx, pointYPx } = this.template;
    return pointXPx + this.warp[2]! * pointXPx + this.warp[3]! * pointYPx;
  }

  private pointY(): number {
    const { pointXPx, pointYPx } = this.template;
    return pointYPx + this.warp[4]! * pointXPx + this.warp[5]! * pointYPx;
  }

  /** Whether the window has the warped patch and the pixels the spline needs round it. */
  private holds(): boolean {
    const { window, warp, halfX, halfY } = this;
    const [reachX, reachY] = [reachAlongX(warp, halfX, halfY), reachAlongY(warp, halfX, halfY)];
    const x = warp[0]! - window.originX;
    const y = warp[1]! - window.originY;
    return (
      x - reachX >= 1 && y - reachY >= 1 && x + reachX < window.width - 2 && y + reachY < window.height - 2
    );
  }

  /** Score, gain and residual from the sums of `correlate`. */
  private judge(): void {
    const { result, energy, sums } = this;
    const count = this.centred.length;
    const spread = Math.max(1e-9, sums[1]! - (sums[0]! * sums[0]!) / count);
    result.gain = sums[2]! / energy;
    result.score = sums[2]! / Math.sqrt(energy * spread);
    result.residualDn = Math.sqrt(Math.max(0, spread - sums[2]! * result.gain) / count);
  }

  /** Solves for the step and composes its inverse into the warp; returns how far it moves the patch, px. */
  private takeStep(gain: number): number {
    const { step, sums, inverseHessian, halfX, halfY } = this;
    for (let a = 0; a < 6; a++) {
      let sum = 0;
      for (let b = 0; b < 6; b++) sum += inverseHessian[a * 6 + b]! * sums[3 + b]!;
      step[a] = sum / gain;
    }
    const length = Math.sqrt(step[0]! * step[0]! + step[1]! * step[1]!);
    if (length > LONGEST_STEP_PX) for (let a = 0; a < 6; a++) step[a]! *= LONGEST_STEP_PX / length;
    composeInverse(this.warp, step);
    return Math.min(length, LONGEST_STEP_PX) + edgeMotion(step, halfX, halfY);
  }

  /** Samples the warped patch and sums it against template and steepest descent. */
  private correlate(): void {
    const { centred, images, warp, halfX, halfY, sums } = this;
    const { coefficients, width, originX, originY } = this.window;
    const count = centred.length;
    const columnX = 1 + warp[2]!;
    const columnY = warp[4]!;
    const rowX = warp[3]!;
    const rowY = 1 + warp[5]!;
    const centreX = warp[0]! - originX;
    const centreY = warp[1]! - originY;
    let sum = 0;
    let sumSquares = 0;
    let withTemplate = 0;
    let with0 = 0;
    let with1 = 0;
    let with2 = 0;
    let with3 = 0;
    let with4 = 0;
    let with5 = 0;
    for (let row = -halfY, i = 0; row <= halfY; row++) {
      let x = centreX + rowX * row - columnX * halfX;
      let y = centreY + rowY * row - columnY * halfX;
      for (const end = i + 2 * halfX + 1; i < end; i++) {
        // Positions are positive, so truncation is the floor.
        const pixelX = x | 0;
        const pixelY = y | 0;
        const fx = x - pixelX;
        const fy = y - pixelY;
        const gx = 1 - fx;
        const gy = 1 - fy;
        const x0 = (gx * gx * gx) / 6;
        const x3 = (fx * fx * fx) / 6;
        const x1 = 2 / 3 - fx * fx * (1 - 0.5 * fx);
        const x2 = 1 - x0 - x1 - x3;
        const y0 = (gy * gy * gy) / 6;
        const y3 = (fy * fy * fy) / 6;
        const y1 = 2 / 3 - fy * fy * (1 - 0.5 * fy);
        const y2 = 1 - y0 - y1 - y3;
        let at = (pixelY - 1) * width + pixelX - 1;
        let value =
          y0 *
          (x0 * coefficients[at]! +
            x1 * coefficients[at + 1]! +
            x2 * coefficients[at + 2]! +
            x3 * coefficients[at + 3]!);
        at += width;
        value +=
          y1 *
          (x0 * coefficients[at]! +
            x1 * coefficients[at + 1]! +
            x2 * coefficients[at + 2]! +
            x3 * coefficients[at + 3]!);
        at += width;
        value +=
          y2 *
          (x0 * coefficients[at]! +
            x1 * coefficients[at + 1]! +
            x2 * coefficients[at + 2]! +
            x3 * coefficients[at + 3]!);
        at += width;
        value +=
          y3 *
          (x0 * coefficients[at]! +
            x1 * coefficients[at + 1]! +
            x2 * coefficients[at + 2]! +
            x3 * coefficients[at + 3]!);
        sum += value;
        sumSquares += value * value;
        withTemplate += value * centred[i]!;
        with0 += value * images[i]!;
        with1 += value * images[count + i]!;
        with2 += value * images[2 * count + i]!;
        with3 += value * images[3 * count + i]!;
        with4 += value * images[4 * count + i]!;
        with5 += value * images[5 * count + i]!;
        x += columnX;
        y += columnY;
      }
    }
    sums[0] = sum;
    sums[1] = sumSquares;
    sums[2] = withTemplate;
    sums[3] = with0;
    sums[4] = with1;
    sums[5] = with2;
    sums[6] = with3;
    sums[7] = with4;
    sums[8] = with5;
  }
}
