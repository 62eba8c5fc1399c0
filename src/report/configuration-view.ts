import { type FitPoints, fitPoints } from '../engine/fit-configuration.ts';
import type { DwellResult, ResonanceResult, Results, RingDownResult } from '../engine/results.ts';
import { type CircleOpinion, circleOpinion } from '../resonance/circle-resonance.ts';
import { type HalfPowerReading, readHalfPower } from '../resonance/half-power-data.ts';
import { fitResonance } from '../resonance/resonance-fit.ts';
import type { ResonanceFit } from '../resonance/resonance-fit-types.ts';
import type { Configuration } from '../testfile/schema.ts';

/** Everything known of one configuration, gathered for its part of the report. */
export interface ConfigurationView {
  readonly configuration: Configuration;
  /** Its label, or its id where it has none. */
  readonly name: string;
  readonly dwells: readonly DwellResult[];
  readonly ringdowns: readonly RingDownResult[];
  /** The fit in the words of the results; null where the results have none. */
  readonly resonance: ResonanceResult | null;
  readonly points: FitPoints;
  /** The same fit once more with what curves and bands need; null where nothing could be fitted. */
  readonly fit: ResonanceFit | null;
  /** Second opinions: half-power points read from the dwells, the circle plot; null without dwells, without lags. */
  readonly halfPower: HalfPowerReading | null;
  readonly circle: CircleOpinion | null;
}

function repeatedFit(configuration: Configuration, points: FitPoints): ResonanceFit {
  return fitResonance(points.points, {
    excitation: configuration.excitation,
    damping: configuration.damping ?? 'viscous',
    amplitudeUnit: points.unit,
    commonRelativeU: points.commonRelativeU,
    intervals: false,
    ...(configuration.movingMass === undefined
      ? {}
      : { movingMassKg: { value: configuration.movingMass, u: configuration.movingMassU ?? null } }),
  });
}

/** Gathers what the results say of a configuration, and repeats its fit for curves, bands and second opinions. */
export function viewConfiguration(configuration: Configuration, results: Results): ConfigurationView {
  const own = <T extends { readonly configuration: string }>(all: readonly T[]): T[] =>
    all.filter((each) => each.configuration === configuration.id);
  const dwells = own(results.dwells);
  const resonance = own(results.resonances)[0] ?? null;
  const points = fitPoints(configuration, dwells);
  const tried =
    resonance === null || resonance.error !== null || points.points.length === 0
      ? null
      : repeatedFit(configuration, points);
  const fit = tried === null || tried.missing !== null ? null : tried;
  const model = {
    excitation: configuration.excitation,
    damping: configuration.damping ?? 'viscous',
  } as const;
  const withLag = points.points.some((point) => point.lagDeg !== null && !point.excluded);
  return {
    configuration,
    name: configuration.label || configuration.id,
    dwells,
    ringdowns: own(results.ringdowns),
    resonance,
    points,
    fit,
    halfPower: fit === null ? null : readHalfPower(points.points, model),
    circle: fit === null || !withLag ? null : circleOpinion(points.points, fit),
  };
}
