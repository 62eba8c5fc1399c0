import { linearLeastSquares } from '../../src/numeric/linear-algebra.ts';

/** Sine plus offset fitted at a known frequency: x = amplitude cos(2 pi f t - lag) + offset. */
export interface SineFit {
  readonly amplitude: number;
  readonly lagRad: number;
  /** Second harmonic over fundamental, fitted together. */
  readonly secondHarmonic: number;
  readonly residualRms: number;
}

/** Plain least squares for fundamental, second harmonic and offset: the tests' own, so that nothing checks itself. */
export function fitSine(timesS: Float64Array, x: Float64Array, frequencyHz: number): SineFit {
  const n = timesS.length;
  const design = new Float64Array(n * 5);
  timesS.forEach((t, i) => {
    const p = 2 * Math.PI * frequencyHz * t;
    design.set([Math.cos(p), Math.sin(p), Math.cos(2 * p), Math.sin(2 * p), 1], 5 * i);
  });
  const fit = linearLeastSquares(design, n, 5, x);
  if (fit === null) throw new Error('the fit is not determined');
  const [c, s, c2, s2] = fit.coefficients as unknown as [number, number, number, number];
  return {
    amplitude: Math.hypot(c, s),
    lagRad: Math.atan2(s, c),
    secondHarmonic: Math.hypot(c2, s2) / Math.hypot(c, s),
    residualRms: Math.sqrt(fit.residualSumOfSquares / n),
  };
}
