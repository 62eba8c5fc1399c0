import type { ResonanceModel } from './models.ts';
import type { FitMode } from './resonance-points.ts';

/**
 * A free parameter of the fit. `damping` is the damping ratio (viscous) or loss factor (structural);
 * `offset` is the rigid offset and `slow` the slow residual per relative change of frequency, both in the
 * amplitude's unit and as real and imaginary part (imaginary part positive: leading).
 */
export type ParameterName =
  | 'staticGain'
  | 'naturalHz'
  | 'damping'
  | 'offsetRe'
  | 'offsetIm'
  | 'slowRe'
  | 'slowIm';

/** Which parameters are free and where each stands in the parameter array. */
export interface ParameterLayout {
  readonly model: ResonanceModel;
  readonly names: readonly ParameterName[];
  /** Index of each part, -1 where it is absent. `offset` and `slow` are the real part; the imaginary follows. */
  readonly gain: number;
  readonly naturalHz: number;
  readonly damping: number;
  readonly offset: number;
  readonly slow: number;
  /** Static gain where it is not free: 1 or -1, lag-only fits. */
  readonly fixedGain: number;
  /** Frequency at which the slow residual is zero. */
  readonly centreHz: number;
}

/** Lays the parameters out; the static gain is fixed at 1 in lag-only fits, which cannot see it. */
export function layoutParameters(
  model: ResonanceModel,
  mode: FitMode,
  terms: { readonly rigidOffset: boolean; readonly slowResidual: boolean },
  centreHz: number,
): ParameterLayout {
  const names: ParameterName[] = mode === 'lag' ? [] : ['staticGain'];
  names.push('naturalHz', 'damping');
  if (terms.rigidOffset) names.push('offsetRe', 'offsetIm');
  if (terms.slowResidual) names.push('slowRe', 'slowIm');
  return {
    model,
    names,
    gain: names.indexOf('staticGain'),
    naturalHz: names.indexOf('naturalHz'),
    damping: names.indexOf('damping'),
    offset: names.indexOf('offsetRe'),
    slow: names.indexOf('slowRe'),
    fixedGain: 1,
    centreHz,
  };
}
