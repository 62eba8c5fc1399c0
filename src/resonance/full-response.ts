import { unitResponse } from './models.ts';
import type { ParameterLayout } from './parameter-layout.ts';

/** Complex response of the whole model with its derivatives by every free parameter. */
export interface FullResponse {
  re: number;
  im: number;
  /** d re / d parameter, one entry per free parameter; likewise `imBy`. */
  readonly reBy: Float64Array;
  readonly imBy: Float64Array;
}

/** Room for one response of this layout, to be filled again and again. */
export function emptyResponse(layout: ParameterLayout): FullResponse {
  const count = layout.names.length;
  return { re: 0, im: 0, reBy: new Float64Array(count), imBy: new Float64Array(count) };
}

/**
 * Fills `out` with static gain times the unit response, plus the rigid offset and the slow residual where the
 * layout has them. A natural frequency that is not positive gives NaN.
 */
export function fillResponse(
  layout: ParameterLayout,
  parameters: Float64Array,
  driveHz: number,
  out: FullResponse,
): void {
  const gain = layout.gain < 0 ? layout.fixedGain : parameters[layout.gain]!;
  const naturalHz = parameters[layout.naturalHz]!;
  const unit = unitResponse(
    layout.model,
    driveHz,
    naturalHz > 0 ? naturalHz : Number.NaN,
    parameters[layout.damping]!,
  );
  const { reBy, imBy } = out;
  out.re = gain * unit.re;
  out.im = gain * unit.im;
  if (layout.gain >= 0) {
    reBy[layout.gain] = unit.re;
    imBy[layout.gain] = unit.im;
  }
  reBy[layout.naturalHz] = gain * unit.reByNaturalHz;
  imBy[layout.naturalHz] = gain * unit.imByNaturalHz;
  reBy[layout.damping] = gain * unit.reByDamping;
  imBy[layout.damping] = gain * unit.imByDamping;
  if (layout.offset >= 0) addComplexTerm(parameters, layout.offset, 1, out);
  if (layout.slow >= 0) addComplexTerm(parameters, layout.slow, driveHz / layout.centreHz - 1, out);
}

function addComplexTerm(parameters: Float64Array, at: number, factor: number, out: FullResponse): void {
  out.re += parameters[at]! * factor;
  out.im += parameters[at + 1]! * factor;
  out.reBy[at] = factor;
  out.imBy[at] = 0;
  out.reBy[at + 1] = 0;
  out.imBy[at + 1] = factor;
}
