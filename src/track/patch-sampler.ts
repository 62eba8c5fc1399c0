import { cubicDerivativeWeights, cubicWeights } from './bspline.ts';
import type { SplineWindow } from './patch-window.ts';

/** A patch read from a window between pixels, with its gradients: row by row, DN and DN per pixel. */
export interface SampledPatch {
  readonly values: Float64Array;
  readonly gradientX: Float64Array;
  readonly gradientY: Float64Array;
}

/** Room for a patch of `count` pixels, filled with zeros. */
export function emptyPatch(count: number): SampledPatch {
  return {
    values: new Float64Array(count),
    gradientX: new Float64Array(count),
    gradientY: new Float64Array(count),
  };
}

/** How a patch is turned, stretched and sheared: x' = x + xx x + xy y, y' = y + yx x + yy y about its centre. */
export interface Deformation {
  readonly xx: number;
  readonly xy: number;
  readonly yx: number;
  readonly yy: number;
}

/** The deformation that changes nothing. */
export const UNDEFORMED: Deformation = { xx: 0, xy: 0, yx: 0, yy: 0 };

const weightsX = new Float64Array(4);
const weightsY = new Float64Array(4);
const slopesX = new Float64Array(4);
const slopesY = new Float64Array(4);
// Value and slopes along x and y, left by `sample`.
const sampled = new Float64Array(3);

/**
 * Adds `weight` times the patch centred at (x, y), in pixels of the image the window was loaded from, to `sums`.
 * Gradients are those of the spline along the patch's own, deformed axes. The window must hold the patch and the
 * two pixels round it that the spline needs.
 *
 * @throws Error where the window does not hold the patch
 */
export function addPatch(
  window: SplineWindow,
  x: number,
  y: number,
  widthPx: number,
  heightPx: number,
  deformation: Deformation,
  weight: number,
  sums: SampledPatch,
): void {
  const halfX = (widthPx - 1) / 2;
  const halfY = (heightPx - 1) / 2;
  const { xx, xy, yx, yy } = deformation;
  const straight = xx === 0 && xy === 0 && yx === 0 && yy === 0;
  const centreX = x - window.originX;
  const centreY = y - window.originY;
  // All samples of a patch that is only moved lie at one place between pixels.
  if (straight) setWeights(centreX - halfX, centreY - halfY);
  for (let row = -halfY, i = 0; row <= halfY; row++) {
    for (let column = -halfX; column <= halfX; column++, i++) {
      const sampleX = centreX + column + xx * column + xy * row;
      const sampleY = centreY + row + yx * column + yy * row;
      if (!straight) setWeights(sampleX, sampleY);
      sample(window, Math.floor(sampleX), Math.floor(sampleY));
      sums.values[i]! += weight * sampled[0]!;
      sums.gradientX[i]! += weight * (sampled[1]! * (1 + xx) + sampled[2]! * yx);
      sums.gradientY[i]! += weight * (sampled[1]! * xy + sampled[2]! * (1 + yy));
    }
  }
}

function setWeights(x: number, y: number): void {
  cubicWeights(x - Math.floor(x), weightsX);
  cubicWeights(y - Math.floor(y), weightsY);
  cubicDerivativeWeights(x - Math.floor(x), slopesX);
  cubicDerivativeWeights(y - Math.floor(y), slopesY);
}

/** Samples between the pixel (column, row) and the next, with the weights set. */
function sample(window: SplineWindow, column: number, row: number): void {
  const { coefficients, width, height } = window;
  if (column < 1 || row < 1 || column + 2 >= width || row + 2 >= height) {
    throw new Error(
      `a sample at pixel ${column}, ${row} needs pixels outside a window of ${width} x ${height}`,
    );
  }
  let value = 0;
  let slopeX = 0;
  let slopeY = 0;
  for (let j = 0; j < 4; j++) {
    const start = (row - 1 + j) * width + column - 1;
    let alongRow = 0;
    let slopeAlongRow = 0;
    for (let k = 0; k < 4; k++) {
      const coefficient = coefficients[start + k]!;
      alongRow += weightsX[k]! * coefficient;
      slopeAlongRow += slopesX[k]! * coefficient;
    }
    value += weightsY[j]! * alongRow;
    slopeX += weightsY[j]! * slopeAlongRow;
    slopeY += slopesY[j]! * alongRow;
  }
  sampled[0] = value;
  sampled[1] = slopeX;
  sampled[2] = slopeY;
}
