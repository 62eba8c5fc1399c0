import { linearLeastSquares, thinSvd } from '../numeric/linear-algebra.ts';
import type { PointPx } from './point-track.ts';

/**
 * A plane-to-plane projective map, row-major 3 x 3: (u, v, w) = H (x, y, 1), result (u / w, v / w).
 * Scaled so that its last entry is 1 in the coordinates it is used in.
 */
export type Homography = Float64Array;

/** Image of a point under a homography; not finite where the point maps to infinity. */
export function applyHomography(h: Homography, point: PointPx): PointPx {
  const [x, y] = point;
  const w = homogeneousW(h, point);
  return [(h[0]! * x + h[1]! * y + h[2]!) / w, (h[3]! * x + h[4]! * y + h[5]!) / w];
}

/** The third homogeneous coordinate of a point's image: changes sign across the plane's horizon. */
export function homogeneousW(h: Homography, point: PointPx): number {
  return h[6]! * point[0] + h[7]! * point[1] + h[8]!;
}

/**
 * Partial derivatives of the image with respect to the point, row-major 2 x 2:
 * [dX/dx, dX/dy, dY/dx, dY/dy].
 */
export function homographyJacobian(h: Homography, point: PointPx): readonly [number, number, number, number] {
  const w = homogeneousW(h, point);
  const [X, Y] = applyHomography(h, point);
  return [(h[0]! - X * h[6]!) / w, (h[1]! - X * h[7]!) / w, (h[3]! - Y * h[6]!) / w, (h[4]! - Y * h[7]!) / w];
}

/** Product a b of two homographies: first b, then a. */
export function composeHomographies(a: Homography, b: Homography): Homography {
  const product = new Float64Array(9);
  for (let row = 0; row < 3; row++) {
    for (let column = 0; column < 3; column++) {
      for (let k = 0; k < 3; k++) product[3 * row + column]! += a[3 * row + k]! * b[3 * k + column]!;
    }
  }
  return product;
}

/** Inverse of a homography (by cofactors, so up to scale; scaled to a last entry of 1); null where it has none. */
export function invertHomography(h: Homography): Homography | null {
  const [a, b, c, d, e, f, g, i, j] = h as unknown as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const cofactors = Float64Array.of(
    e * j - f * i,
    c * i - b * j,
    b * f - c * e,
    f * g - d * j,
    a * j - c * g,
    c * d - a * f,
    d * i - e * g,
    b * g - a * i,
    a * e - b * d,
  );
  const last = cofactors[8]!;
  const size = Math.max(...cofactors.map(Math.abs));
  if (!(Math.abs(last) > 1e-14 * size)) return null;
  return cofactors.map((value) => value / last);
}

/** Similarity that brings points to mean zero and mean distance sqrt(2), which keeps the equations well conditioned (Hartley 1997, from memory). */
export function normalisation(points: readonly PointPx[]): Homography {
  const n = points.length;
  const cx = points.reduce((sum, p) => sum + p[0], 0) / n;
  const cy = points.reduce((sum, p) => sum + p[1], 0) / n;
  const spread = points.reduce((sum, p) => sum + Math.hypot(p[0] - cx, p[1] - cy), 0) / n;
  const s = Math.SQRT2 / spread;
  return Float64Array.of(s, 0, -s * cx, 0, s, -s * cy, 0, 0, 1);
}

/**
 * Homography through four or more point pairs by the direct linear method on normalised points: the right
 * singular vector of the smallest singular value (Hartley and Zisserman, section 4.1, from memory).
 *
 * @returns null where the pairs do not determine it (a second singular value near zero)
 */
export function directHomography(from: readonly PointPx[], to: readonly PointPx[]): Homography | null {
  const rows = Math.max(9, 2 * from.length);
  const system = new Float64Array(rows * 9);
  from.forEach(([x, y], k) => {
    const [X, Y] = to[k]!;
    system.set([x, y, 1, 0, 0, 0, -X * x, -X * y, -X], 18 * k);
    system.set([0, 0, 0, x, y, 1, -Y * x, -Y * y, -Y], 18 * k + 9);
  });
  const { singularValues, right } = thinSvd(system, rows, 9);
  if (!(singularValues[7]! > 1e-9 * singularValues[0]!)) return null;
  const h = Float64Array.from({ length: 9 }, (_, k) => right[9 * k + 8]!);
  const last = h[8]!;
  return Math.abs(last) > 1e-12 ? h.map((value) => value / last) : null;
}

/**
 * Refines a homography (last entry held at 1) so that the squared distances between images and `to` are
 * least: Gauss-Newton from the direct solution.
 *
 * @returns the map and the unscaled covariance (J'J)^-1 of its first eight entries, 8 x 8 row-major; null
 *   where the equations are singular
 */
export function refineHomography(
  start: Homography,
  from: readonly PointPx[],
  to: readonly PointPx[],
): { readonly h: Homography; readonly covariance: Float64Array } | null {
  let h = start;
  let covariance: Float64Array | null = null;
  for (let iteration = 0; iteration < 20; iteration++) {
    const rows = 2 * from.length;
    const jacobian = new Float64Array(rows * 8);
    const misfit = new Float64Array(rows);
    from.forEach((point, k) => {
      const [x, y] = point;
      const [X, Y] = applyHomography(h, point);
      const w = homogeneousW(h, point);
      jacobian.set([x / w, y / w, 1 / w, 0, 0, 0, (-X * x) / w, (-X * y) / w], 16 * k);
      jacobian.set([0, 0, 0, x / w, y / w, 1 / w, (-Y * x) / w, (-Y * y) / w], 16 * k + 8);
      misfit[2 * k] = to[k]![0] - X;
      misfit[2 * k + 1] = to[k]![1] - Y;
    });
    const step = linearLeastSquares(jacobian, rows, 8, misfit);
    if (step === null) return null;
    h = h.map((value, k) => (k < 8 ? value + step.coefficients[k]! : value));
    covariance = step.unscaledCovariance;
    if (step.coefficients.every((value, k) => Math.abs(value) <= 1e-13 * (1 + Math.abs(h[k]!)))) break;
  }
  return covariance === null || !h.every(Number.isFinite) ? null : { h, covariance };
}
