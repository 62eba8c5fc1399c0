/**
 * An affine warp as six numbers: x, y of the patch's centre in the image, then the deformation xx, xy, yx, yy about it, so
 * that a pixel (column, row) of the patch lands on x + column (1 + xx) + row xy, y + column yx + row (1 + yy).
 */
export type AffineWarp = Float64Array;

/** Composes the inverse of a small warp into a warp, in place: what inverse-compositional registration does each step. */
export function composeInverse(warp: AffineWarp, step: AffineWarp): void {
  const stepXx = 1 + step[2]!;
  const stepYy = 1 + step[5]!;
  const determinant = stepXx * stepYy - step[3]! * step[4]!;
  const inverseXx = stepYy / determinant;
  const inverseXy = -step[3]! / determinant;
  const inverseYx = -step[4]! / determinant;
  const inverseYy = stepXx / determinant;
  const backX = -(inverseXx * step[0]! + inverseXy * step[1]!);
  const backY = -(inverseYx * step[0]! + inverseYy * step[1]!);
  const xx = 1 + warp[2]!;
  const xy = warp[3]!;
  const yx = warp[4]!;
  const yy = 1 + warp[5]!;
  warp[0]! += xx * backX + xy * backY;
  warp[1]! += yx * backX + yy * backY;
  warp[2] = xx * inverseXx + xy * inverseYx - 1;
  warp[3] = xx * inverseXy + xy * inverseYy;
  warp[4] = yx * inverseXx + yy * inverseYx;
  warp[5] = yx * inverseXy + yy * inverseYy - 1;
}

/** How far a small warp's deformation moves the edges of a patch with these half sides, px. */
export function edgeMotion(step: AffineWarp, halfX: number, halfY: number): number {
  const alongColumns = step[2]! * step[2]! + step[4]! * step[4]!;
  const alongRows = step[3]! * step[3]! + step[5]! * step[5]!;
  return Math.sqrt(halfX * halfX * alongColumns + halfY * halfY * alongRows);
}

/** Whether no element of the deformation is larger than `largest` (nor not a number). */
export function isWithin(warp: AffineWarp, largest: number): boolean {
  for (let k = 2; k < 6; k++) if (!(Math.abs(warp[k]!) <= largest)) return false;
  return true;
}

/** How far a warped patch with these half sides reaches from its centre along x, px. */
export function reachAlongX(warp: AffineWarp, halfX: number, halfY: number): number {
  return halfX * (1 + Math.abs(warp[2]!)) + halfY * Math.abs(warp[3]!);
}

/** How far it reaches along y, px. */
export function reachAlongY(warp: AffineWarp, halfX: number, halfY: number): number {
  return halfY * (1 + Math.abs(warp[5]!)) + halfX * Math.abs(warp[4]!);
}
