import { cubicDerivativeWeights, cubicWeights } from './bspline.ts';
import type { PatchWindow } from './patch-window.ts';

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

/**
 * Adds `weight` times the patch centred at (x, y), in pixels of the image the window was loaded from, to `sums`.
 * Gradients are those of the spline along the patch's own, deformed axes. The window must hold the patch and the
 * two pixels round it that the spline needs.
 *
 * @throws Error where the window does not hold the patch
 */
export function addPatch(
  window: PatchWindow,
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
  for (let row = -halfY, i = 0; row <= halfY; row++) {
    for (let column = -halfX; column <= halfX; column++, i++) {
      const sampleX = x - window.originX + column + xx * column + xy * row;
      const sampleY = y - window.originY + row + yx * column + yy * row;
      const [value, slopeX, slopeY] = sample(window, sampleX, sampleY);
      sums.values[i]! += weight * value;
      sums.gradientX[i]! += weight * (slopeX * (1 + xx) + slopeY * yx);
      sums.gradientY[i]! += weight * (slopeX * xy + slopeY * (1 + yy));
    }
  }
}

function sample(window: PatchWindow, x: number, y: number): readonly [number, number, number] {
  const { coefficients, width, height } = window;
  const columnX = Math.floor(x);
  const rowY = Math.floor(y);
  if (columnX < 1 || rowY < 1 || columnX + 2 >= width || rowY + 2 >= height) {
    throw new Error(`sample at ${x}, ${y} needs pixels outside a window of ${width} x ${height}`);
  }
  cubicWeights(x - columnX, weightsX);
  cubicWeights(y - rowY, weightsY);
  cubicDerivativeWeights(x - columnX, slopesX);
  cubicDerivativeWeights(y - rowY, slopesY);
  let value = 0;
  let slopeX = 0;
  let slopeY = 0;
  for (let j = 0; j < 4; j++) {
    const start = (rowY - 1 + j) * width + columnX - 1;
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
  return [value, slopeX, slopeY];
}
