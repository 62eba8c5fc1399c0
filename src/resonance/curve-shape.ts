import type { ResonanceModel } from './models.ts';

/**
 * The squared amplitude per unit input as a ratio of two quadratics in w = (f/fn)^2:
 * (n0 + n1 w + n2 w^2) / (1 + d1 w + w^2 + d0), coefficients listed from the constant up.
 */
export interface CurveShape {
  readonly numerator: readonly [number, number, number];
  readonly denominator: readonly [number, number, number];
}

/** A point of the curve: frequency ratio r = f/fn and amplitude per unit input. */
export interface CurvePoint {
  readonly ratio: number;
  readonly amplitude: number;
}

/** Shape of a model's amplitude curve at a damping ratio (viscous) or loss factor (structural). */
export function curveShape(model: ResonanceModel, damping: number): CurveShape {
  const viscous = model.damping === 'viscous';
  const loss = viscous ? 4 * damping * damping : damping * damping;
  // (1 - w)^2 + loss w (viscous) or + loss (structural)
  const denominator: CurveShape['denominator'] = viscous ? [1, loss - 2, 1] : [1 + loss, -2, 1];
  if (model.excitation === 'base') {
    return { numerator: viscous ? [1, loss, 0] : [1 + loss, 0, 0], denominator };
  }
  const relative = model.excitation === 'base-relative' || model.excitation === 'unbalance';
  return { numerator: relative ? [0, 0, 1] : [1, 0, 0], denominator };
}

/**
 * Peak of the curve at a positive frequency; null where the damping is so heavy that there is none.
 * For a force with viscous damping r = sqrt(1 - 2 zeta^2), height 1/(2 zeta sqrt(1 - zeta^2)).
 */
export function curvePeak(shape: CurveShape): CurvePoint | null {
  const [n0, n1, n2] = shape.numerator;
  const [d0, d1, d2] = shape.denominator;
  // n'd - n d' = 0, whose cubic term always cancels
  const roots = quadraticRoots(n1 * d0 - n0 * d1, 2 * (n2 * d0 - n0 * d2), n2 * d1 - n1 * d2);
  let best: CurvePoint | null = null;
  for (const w of roots) {
    if (!(w > 0)) continue;
    const amplitude = amplitudeAt(shape, w);
    if (best === null || amplitude > best.amplitude) best = { ratio: Math.sqrt(w), amplitude };
  }
  if (best === null) return null;
  // a lone stationary point could be a minimum: a peak stands above both ends
  const ends = Math.max(Math.sqrt(n0 / d0), Math.sqrt(n2 / d2));
  return best.amplitude > ends ? best : null;
}

/**
 * Frequency ratios below and above the peak at which the amplitude is the peak's divided by `factor` (above 1;
 * sqrt 2 gives the half-power points); null on a side where the curve does not come down so far.
 */
export function curveCrossings(
  shape: CurveShape,
  factor = Math.SQRT2,
): { readonly lower: number | null; readonly upper: number | null } {
  const peak = curvePeak(shape);
  if (peak === null) return { lower: null, upper: null };
  const [n0, n1, n2] = shape.numerator;
  const [d0, d1, d2] = shape.denominator;
  const q = (factor / peak.amplitude) ** 2;
  const roots = quadraticRoots(d0 - q * n0, d1 - q * n1, d2 - q * n2).filter((w) => w > 0);
  const ratios = roots.map(Math.sqrt);
  return {
    lower: ratios.filter((ratio) => ratio < peak.ratio).sort((a, b) => b - a)[0] ?? null,
    upper: ratios.filter((ratio) => ratio > peak.ratio).sort((a, b) => a - b)[0] ?? null,
  };
}

function amplitudeAt({ numerator: n, denominator: d }: CurveShape, w: number): number {
  return Math.sqrt((n[0] + w * (n[1] + w * n[2])) / (d[0] + w * (d[1] + w * d[2])));
}

/** Real roots of c0 + c1 w + c2 w^2, without loss of digits where they differ much in size. */
function quadraticRoots(c0: number, c1: number, c2: number): number[] {
  if (c2 === 0) return c1 === 0 ? [] : [-c0 / c1];
  const square = c1 * c1 - 4 * c2 * c0;
  if (square < 0) return [];
  const q = -0.5 * (c1 + (c1 < 0 ? -1 : 1) * Math.sqrt(square));
  return q === 0 ? [0] : [q / c2, c0 / q];
}
