import { cubicWeights } from './bspline.ts';
import type { LumaImage } from './luma-image.ts';
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

/**
 * Registers a template in a frame by translation: inverse-compositional Gauss-Newton on cubic B-splines, gain and
 * offset of the frame projected out, so that the zero-mean normalized sum of squares is least (B. Pan, K. Li and
 * W. Tong, "Fast, robust and accurate digital image correlation calculation without redundant computations",
 * Experimental Mechanics 53, 2013). One instance serves one template; `register` allocates nothing.
 */
export class TranslationRegistrar {
  /** The window of the last frame, for facts about the patch found there. */
  readonly window: PatchWindow;
  private readonly result: Registration = emptyRegistration();
  private readonly centred: Float64Array;
  private readonly energy: number;
  private readonly images: Float64Array;
  private readonly inverseHessian: Float64Array;
  private readonly alongRows: Float64Array;
  private readonly weightsX = new Float64Array(4);
  private readonly weightsY = new Float64Array(4);
  private readonly maxIterations: number;
  private readonly stopPx: number;
  // Sums over the patch, left by `correlate`.
  private sum = 0;
  private sumSquares = 0;
  private withTemplate = 0;
  private withX = 0;
  private withY = 0;

  /** @throws Error where the template has no texture in two directions (`judgeSpot` says so beforehand) */
  constructor(
    private readonly template: Template,
    options: RegistrarOptions = {},
  ) {
    const { widthPx, heightPx, smoothed } = template;
    const margin = options.marginPx ?? DEFAULT_MARGIN_PX;
    this.maxIterations = options.maxIterations ?? DEFAULT_MAX_ITERATIONS;
    this.stopPx = options.stopPx ?? DEFAULT_STOP_PX;
    this.window = new PatchWindow(widthPx + 2 * margin, heightPx + 2 * margin, smoothed);
    this.alongRows = new Float64Array(widthPx * (heightPx + 3));
    const descent = steepestDescent(template, 2);
    this.centred = descent.centred;
    this.energy = descent.energy;
    this.images = descent.images;
    this.inverseHessian = requireInverse(descent);
  }

  /**
   * Looks for the marked point near (startX, startY), in pixels of `image`; from up to 4 px away it arrives.
   *
   * @returns the registrar's one result, overwritten by the next call
   */
  register(image: LumaImage, startX: number, startY: number): Registration {
    const { window, result, inverseHessian: inverse, template } = this;
    const least = Math.min(template.widthPx, template.heightPx);
    result.score = -1;
    result.converged = false;
    result.iterations = 0;
    let x = startX - template.pointXPx;
    let y = startY - template.pointYPx;
    let loads = 0;
    let loaded = false;
    while (result.iterations < this.maxIterations) {
      if (!loaded || !this.holds(x, y)) {
        // A patch whose centre is outside the image, or so far that little of it is inside, is no longer there.
        const inside =
          x > -least / 4 && y > -least / 4 && x < image.width + least / 4 && y < image.height + least / 4;
        if (!inside || loads === MAX_LOADS) break;
        window.load(image, Math.round(x), Math.round(y));
        loads++;
        loaded = true;
      }
      result.iterations++;
      this.correlate(x - window.originX, y - window.originY);
      this.judge();
      if (result.gain < LEAST_GAIN) break;
      let stepX = (inverse[0]! * this.withX + inverse[1]! * this.withY) / result.gain;
      let stepY = (inverse[2]! * this.withX + inverse[3]! * this.withY) / result.gain;
      const length = Math.sqrt(stepX * stepX + stepY * stepY);
      if (length > LONGEST_STEP_PX) {
        stepX *= LONGEST_STEP_PX / length;
        stepY *= LONGEST_STEP_PX / length;
      }
      x -= stepX;
      y -= stepY;
      if (length < this.stopPx) {
        result.converged = true;
        break;
      }
    }
    result.x = x + template.pointXPx;
    result.y = y + template.pointYPx;
    return result;
  }

  /** Whether the window has the patch at (x, y) and the pixels the spline needs round it. */
  private holds(x: number, y: number): boolean {
    const { window, template } = this;
    const left = x - window.originX - (template.widthPx - 1) / 2;
    const top = y - window.originY - (template.heightPx - 1) / 2;
    return (
      left >= 1 &&
      top >= 1 &&
      left + template.widthPx + 1 < window.width &&
      top + template.heightPx + 1 < window.height
    );
  }

  /** Score, gain and residual from the sums of `correlate`. */
  private judge(): void {
    const { result, energy } = this;
    const spread = Math.max(1e-9, this.sumSquares - (this.sum * this.sum) / this.centred.length);
    result.gain = this.withTemplate / energy;
    result.score = this.withTemplate / Math.sqrt(energy * spread);
    const left = spread - this.withTemplate * result.gain;
    result.residualDn = Math.sqrt(Math.max(0, left) / this.centred.length);
  }

  /** Samples the patch centred at (x, y) of the window and sums it against template and steepest descent. */
  private correlate(x: number, y: number): void {
    const { centred, images, alongRows, weightsX, weightsY } = this;
    const { widthPx, heightPx } = this.template;
    const { coefficients, width } = this.window;
    const columnX = Math.floor(x);
    const rowY = Math.floor(y);
    cubicWeights(x - columnX, weightsX);
    cubicWeights(y - rowY, weightsY);

    // Along the rows, for as many rows as the columns need.
    let w0 = weightsX[0]!;
    let w1 = weightsX[1]!;
    let w2 = weightsX[2]!;
    let w3 = weightsX[3]!;
    const firstColumn = columnX - ((widthPx - 1) >> 1) - 1;
    const firstRow = rowY - ((heightPx - 1) >> 1) - 1;
    for (let row = 0, to = 0; row < heightPx + 3; row++) {
      let from = (firstRow + row) * width + firstColumn;
      let c0 = coefficients[from]!;
      let c1 = coefficients[from + 1]!;
      let c2 = coefficients[from + 2]!;
      from += 3;
      for (const end = to + widthPx; to < end; to++) {
        const c3 = coefficients[from++]!;
        alongRows[to] = w0 * c0 + w1 * c1 + w2 * c2 + w3 * c3;
        c0 = c1;
        c1 = c2;
        c2 = c3;
      }
    }

    // Down the columns, and all sums at once.
    w0 = weightsY[0]!;
    w1 = weightsY[1]!;
    w2 = weightsY[2]!;
    w3 = weightsY[3]!;
    const count = widthPx * heightPx;
    const twice = 2 * widthPx;
    const thrice = 3 * widthPx;
    let sum = 0;
    let sumSquares = 0;
    let withTemplate = 0;
    let withX = 0;
    let withY = 0;
    for (let i = 0; i < count; i++) {
      const value =
        w0 * alongRows[i]! +
        w1 * alongRows[i + widthPx]! +
        w2 * alongRows[i + twice]! +
        w3 * alongRows[i + thrice]!;
      sum += value;
      sumSquares += value * value;
      withTemplate += value * centred[i]!;
      withX += value * images[i]!;
      withY += value * images[count + i]!;
    }
    this.sum = sum;
    this.sumSquares = sumSquares;
    this.withTemplate = withTemplate;
    this.withX = withX;
    this.withY = withY;
  }
}
