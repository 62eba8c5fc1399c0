import type { ResonanceResult } from '../../../src/engine/results.ts';
import type { Measured } from '../../../src/numeric/measured.ts';
import type { AmplitudeUnit } from '../format/amplitude.ts';

/** One line of the parameter table. */
export interface Quantity {
  readonly name: string;
  readonly unit: string;
  readonly of: Measured;
  /** Interval at the fit's coverage, where one was computed. */
  readonly interval: readonly [number | null, number | null] | null;
}

/** The quantities of a fit in the order in which they are read. */
export function quantitiesOf(fit: ResonanceResult, unit: AmplitudeUnit): Quantity[] {
  const asGain = fit.gainUnit === '1';
  const factor = asGain ? 1 : unit.factor;
  const scaled = ({ value, u }: Measured): Measured => ({
    value: value === null ? null : value * factor,
    u: u === null ? null : u * factor,
  });
  const size = asGain ? '' : `mm ${unit.short}`;
  const line = (
    name: string,
    of: Measured,
    unitText: string,
    interval: Quantity['interval'] = null,
  ): Quantity => ({
    ...{ name, of, unit: unitText, interval },
  });
  return [
    line('natural frequency', fit.naturalHz, 'Hz', fit.intervals.naturalHz),
    line('damping ratio', fit.dampingRatio, '', fit.intervals.dampingRatio),
    line('Q', fit.q, ''),
    line('bandwidth, half power', fit.bandwidthHz, 'Hz'),
    line('frequency of the peak', fit.peakHz, 'Hz'),
    line('amplitude at the peak', scaled(fit.peakAmplitude), size),
    line('static response', scaled(fit.staticGain), size),
    line('stiffness', fit.stiffness, 'N/m'),
    line('damping coefficient', fit.dampingCoefficient, 'N s/m'),
  ].filter((each) => each.of.value !== null);
}
