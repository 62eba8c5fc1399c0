import { legendre } from '../../../src/sine/sine-model.ts';
import { fitSineAtFrequency } from '../../../src/sine/three-parameter.ts';

/** The sine drawn over a motion record, and what it leaves. */
export interface StripFit {
  /** The fitted displacement at a time, mm. */
  readonly at: (timeS: number) => number;
  /** Displacement minus fit, mm, one entry a frame; NaN in gaps and outside the window. */
  readonly residualMm: Float64Array;
  /** Standard deviation of the residual, mm. */
  readonly residualSdMm: number;
}

/**
 * The steady sine through a window of a motion record, for the eye: the numbers shown are those of the results.
 * @returns null where the window holds too little
 */
export function stripFit(
  timeS: Float64Array,
  displacementMm: Float64Array,
  [fromS, toS]: readonly [number, number],
  frequencyHz: number,
): StripFit | null {
  const inside = displacementMm.map((value, k) =>
    timeS[k]! >= fromS && timeS[k]! <= toS ? value : Number.NaN,
  );
  const fit = fitSineAtFrequency(timeS, inside, frequencyHz, { baselineTerms: 2, noise: 'white' });
  if (!fit) return null;
  const { amplitude, phaseRad, referenceTimeS, halfSpanS, baseline } = fit;
  const at = (t: number): number => {
    const base = baseline.reduce((sum, c, k) => sum + c * legendre(k, (t - referenceTimeS) / halfSpanS), 0);
    return base + amplitude * Math.cos(2 * Math.PI * frequencyHz * (t - referenceTimeS) + phaseRad);
  };
  return {
    at,
    residualMm: inside.map((value, k) => value - at(timeS[k]!)),
    residualSdMm: fit.residualSd,
  };
}
