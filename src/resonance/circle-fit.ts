import { circleMoments } from './circle-moments.ts';

/** A circle in the plane of its points. */
export interface Circle {
  readonly centreX: number;
  readonly centreY: number;
  readonly radius: number;
}

/** Algebraic circle fits, in the order of their bias on short arcs: Kasa's is much too small, the others hardly. */
export type AlgebraicCircleFit = 'kasa' | 'pratt' | 'taubin';

/**
 * Algebraic circle fit: one small equation, no start value.
 *
 * @param x, y points, one length
 * @returns null for fewer than three points or points on a straight line
 * Source: N. Chernov, Circular and Linear Regression (2010), chapter 5: Newton's iteration on the characteristic
 * polynomial of the Pratt and Taubin fits (from memory).
 */
export function algebraicCircle(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  method: AlgebraicCircleFit = 'taubin',
): Circle | null {
  if (x.length !== y.length) throw new Error(`${x.length} abscissas and ${y.length} ordinates`);
  if (x.length < 3) return null;
  const { meanX, meanY, xx, yy, xy, xz, yz, zz } = circleMoments(x, y);
  const spread = xx + yy;
  const cov = xx * yy - xy * xy;
  const eta =
    method === 'kasa' ? 0 : smallestRoot(method === 'pratt' ? prattPolynomial() : taubinPolynomial());

  const determinant = eta * eta - eta * spread + cov;
  if (!(Math.abs(determinant) > 1e-14 * spread * spread)) return null;
  const dx = (xz * (yy - eta) - yz * xy) / determinant / 2;
  const dy = (yz * (xx - eta) - xz * xy) / determinant / 2;
  const extra = method === 'pratt' ? 2 * eta : 0;
  const radius = Math.sqrt(dx * dx + dy * dy + spread + extra);
  return Number.isFinite(radius) ? { centreX: dx + meanX, centreY: dy + meanY, radius } : null;

  // coefficients from the constant up; the root wanted is the smallest one that is not negative
  function prattPolynomial(): number[] {
    const a2 = 4 * cov - 3 * spread * spread - zz;
    const a1 = zz * spread + 4 * cov * spread - xz * xz - yz * yz - spread ** 3;
    const a0 = xz * xz * yy + yz * yz * xx - zz * cov - 2 * xz * yz * xy + spread * spread * cov;
    return [a0, a1, a2, 0, 4];
  }

  function taubinPolynomial(): number[] {
    const varZ = zz - spread * spread;
    const a3 = 4 * spread;
    const a2 = -3 * spread * spread - zz;
    const a1 = varZ * spread + 4 * cov * spread - xz * xz - yz * yz;
    const a0 = xz * (xz * yy - yz * xy) + yz * (yz * xx - xz * xy) - varZ * cov;
    return [a0, a1, a2, a3];
  }
}

/** Newton's iteration from 0; the polynomial falls monotonically to the wanted root. */
function smallestRoot(coefficients: readonly number[]): number {
  let root = 0;
  let last = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 100; pass++) {
    let value = 0;
    let slope = 0;
    for (let k = coefficients.length - 1; k >= 0; k--) {
      slope = slope * root + value;
      value = value * root + coefficients[k]!;
    }
    if (!(Math.abs(value) < last) || slope === 0) return root;
    last = Math.abs(value);
    root -= value / slope;
  }
  return root;
}
