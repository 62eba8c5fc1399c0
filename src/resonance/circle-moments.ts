/** Means and centred second and third moments of points and of z = x^2 + y^2, about the points' centroid. */
export interface CircleMoments {
  readonly meanX: number;
  readonly meanY: number;
  readonly xx: number;
  readonly yy: number;
  readonly xy: number;
  readonly xz: number;
  readonly yz: number;
  readonly zz: number;
}

/** Moments of the points, per point. Both arrays of one length, at least 3. */
export function circleMoments(x: ArrayLike<number>, y: ArrayLike<number>): CircleMoments {
  const count = x.length;
  let meanX = 0;
  let meanY = 0;
  for (let i = 0; i < count; i++) {
    meanX += x[i]! / count;
    meanY += y[i]! / count;
  }
  const sums = { xx: 0, yy: 0, xy: 0, xz: 0, yz: 0, zz: 0 };
  for (let i = 0; i < count; i++) {
    const dx = x[i]! - meanX;
    const dy = y[i]! - meanY;
    const z = dx * dx + dy * dy;
    sums.xx += (dx * dx) / count;
    sums.yy += (dy * dy) / count;
    sums.xy += (dx * dy) / count;
    sums.xz += (dx * z) / count;
    sums.yz += (dy * z) / count;
    sums.zz += (z * z) / count;
  }
  return { meanX, meanY, ...sums };
}
