import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import type { FrequencyAtAmplitude } from '../resonance/amplitude-frequency.ts';
import type { ResonanceFitOptions } from '../resonance/fit-options.ts';
import { fitResonance } from '../resonance/resonance-fit.ts';
import type { ResonanceFit } from '../resonance/resonance-fit-types.ts';
import type { ResonancePoint } from '../resonance/resonance-points.ts';
import type { Configuration } from '../testfile/schema.ts';
import type { DwellResult, Interval, ResonanceResult, SecondOpinions } from './results.ts';
import { secondOpinions } from './second-opinions.ts';

const DRIVE_IN_VIEW = new Set(['spring-end', 'base', 'base-relative']); // the drive marker shows the input itself

/** Points for a resonance fit, all in one unit, with the uncertainty that all of them share kept apart. */
export interface FitPoints {
  readonly points: readonly ResonancePoint[];
  readonly unit: 'mm' | 'gain';
  readonly commonRelativeU: number;
}

function fitted(dwell: DwellResult): boolean {
  return dwell.excluded === null && dwell.error === null;
}

/**
 * The dwells of a configuration as points: gain where the drive moves in view in every one of them and is the input of
 * the model (its scale then cancels), else millimetres.
 */
export function fitPoints(configuration: Configuration, dwells: readonly DwellResult[]): FitPoints {
  const usable = dwells.filter(
    (dwell) => dwell.amplitude.value !== null && (dwell.driveHz ?? dwell.frequency.value) !== null,
  );
  const inGain =
    DRIVE_IN_VIEW.has(configuration.excitation) &&
    usable.length > 0 &&
    usable.filter(fitted).every((dwell) => dwell.gain.value !== null);
  const common = usable.map((dwell) => {
    const own = dwell.independentU;
    const { value, u } = dwell.amplitude;
    return value === null || u === null || own === null || value === 0
      ? 0
      : Math.sqrt(Math.max(0, u * u - own * own)) / value;
  });
  return {
    unit: inGain ? 'gain' : 'mm',
    commonRelativeU: inGain ? 0 : Math.max(0, ...common),
    points: usable.map((dwell) => ({
      id: dwell.id,
      driveHz: dwell.driveHz ?? dwell.frequency.value ?? Number.NaN,
      amplitude: inGain
        ? dwell.gain
        : measured(dwell.amplitude.value, dwell.independentU ?? dwell.amplitude.u),
      lagDeg: dwell.lag.value === null ? null : dwell.lag,
      ...(fitted(dwell) ? {} : { excluded: dwell.excluded ?? true }),
    })),
  };
}

function interval(of: ResonanceFit['intervals']['naturalHz']): Interval | null {
  return of === null ? null : [of.lower, of.upper];
}

function halved(of: Interval | null): Interval | null {
  return of === null ? null : [of[0] === null ? null : of[0] / 2, of[1] === null ? null : of[1] / 2];
}

const QUANTITY = { amplitude: 'amplitude', lag: 'lag', complex: 'amplitude and lag' } as const;

/** A fit in the words of the results. */
export function resonanceResult(
  configuration: Configuration,
  fit: ResonanceFit,
  opinions: SecondOpinions | null,
): ResonanceResult {
  const { quantities: q } = fit;
  const damping = interval(fit.intervals.damping);
  const structural = configuration.damping === 'structural';
  return {
    configuration: configuration.id,
    model: configuration.excitation,
    damping: configuration.damping ?? 'viscous',
    formula: fit.formula,
    quantity: QUANTITY[fit.mode],
    points: fit.pointCount,
    naturalHz: q.naturalHz,
    dampingRatio: q.dampingRatio,
    q: q.q,
    peakHz: q.peakHz,
    peakAmplitude: q.peakAmplitude,
    bandwidthHz: q.bandwidthHz,
    staticGain: fit.mode === 'lag' ? NOT_MEASURED : q.staticGain,
    lossFactor: q.lossFactor,
    logDecrement: q.logDecrement,
    lowerHalfPowerHz: q.lowerHalfPowerHz,
    upperHalfPowerHz: q.upperHalfPowerHz,
    classicBandwidthHz: q.classicBandwidthHz,
    gainUnit: fit.amplitudeUnit === 'gain' ? '1' : 'mm',
    stiffness: q.stiffnessNPerM,
    dampingCoefficient: q.dampingNsPerM,
    intervals: {
      naturalHz: interval(fit.intervals.naturalHz),
      dampingRatio: structural ? halved(damping) : damping,
      staticGain: interval(fit.intervals.staticGain),
    },
    coverage: fit.confidence,
    coverageFactor: fit.coverageFactor,
    correlation: fit.correlation.length > 0 ? fit.correlation : null,
    chi2: fit.chi2,
    dof: fit.dof,
    aicc: fit.aicc,
    opinions,
    fitted: fit.points.map((point) => ({
      dwell: point.name,
      driveHz: point.driveHz,
      used: point.used,
      amplitude: point.amplitude,
      lagDeg: point.lagDeg,
      amplitudeResidual: point.amplitudeResidual,
      lagResidual: point.lagResidual,
    })),
    notes: [
      fit.description,
      ...(fit.scatter ? [fit.scatter.sentence] : []),
      ...(fit.lackOfFit ? [fit.lackOfFit.sentence] : []),
    ],
    warnings: fit.warnings,
    error: fit.missing,
  };
}

const MODE = { amplitude: 'amplitude', lag: 'lag', 'amplitude and lag': 'complex' } as const;

/** The fit options that a configuration of the test file asks for. */
export function fitOptions(configuration: Configuration, given: FitPoints): ResonanceFitOptions {
  const { fit = {}, movingMass, movingMassU } = configuration;
  return {
    excitation: configuration.excitation,
    damping: configuration.damping ?? 'viscous',
    amplitudeUnit: given.unit,
    commonRelativeU: given.commonRelativeU,
    ...(fit.quantity ? { mode: MODE[fit.quantity] } : {}),
    rigidOffset: fit.rigidOffset ?? false,
    slowResidual: fit.slowResidual ?? false,
    robust: fit.robust ?? false,
    ...(movingMass === undefined ? {} : { movingMassKg: { value: movingMass, u: movingMassU ?? null } }),
  };
}

/**
 * Fits the resonance of one configuration from its dwells; what is missing for a fit stands in `error`.
 * @param levels natural frequencies known at other amplitudes, from ring-downs
 */
export function fitConfiguration(
  configuration: Configuration,
  dwells: readonly DwellResult[],
  levels: readonly FrequencyAtAmplitude[] = [],
): ResonanceResult {
  const given = fitPoints(configuration, dwells);
  const options = fitOptions(configuration, given);
  const fit = fitResonance(given.points, options);
  const opinions =
    fit.missing === null ? secondOpinions(configuration, given.points, fit, options, levels) : null;
  return resonanceResult(configuration, fit, opinions);
}
