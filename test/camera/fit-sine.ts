import { solveSymmetric } from '../../src/numeric/linear-algebra.ts';

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
  const rowAt = (t: number): readonly number[] => {
    const p = 2 * Math.PI * frequencyHz * t;
    return [Math.cos(p), Math.sin(p), Math.cos(2 * p), Math.sin(2 * p), 1];
  };
  const normal = new Float64Array(25);
  const right = new Float64Array(5);
  for (let i = 0; i < n; i++) {
    const row = rowAt(timesS[i]!);
    for (let a = 0; a < 5; a++) {
      right[a]! += (row[a]! * x[i]!) / n;
      for (let b = 0; b < 5; b++) normal[5 * a + b]! += (row[a]! * row[b]!) / n;
    }
  }
  // a column that is all but zero or a copy of another leaves nothing to solve
  for (let a = 0; a < 5; a++) if (normal[6 * a]! < 1e-12) throw new Error('the fit is not determined');
  const c = solveSymmetric(normal, 5, right);
  if (c === null) throw new Error('the fit is not determined');
  let square = 0;
  for (let i = 0; i < n; i++) {
    const row = rowAt(timesS[i]!);
    square += (x[i]! - row.reduce((sum, value, k) => sum + value * c[k]!, 0)) ** 2;
  }
  return {
    amplitude: Math.hypot(c[0]!, c[1]!),
    lagRad: Math.atan2(c[1]!, c[0]!),
    secondHarmonic: Math.hypot(c[2]!, c[3]!) / Math.hypot(c[0]!, c[1]!),
    residualRms: Math.sqrt(square / n),
  };
}
