import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import type { Configuration, DwellSpec } from '../testfile/schema.ts';
import type { DwellResult } from './results.ts';

/** What every dwell result starts from: nothing measured. */
export function emptyDwell(configuration: Configuration, spec: DwellSpec): DwellResult {
  return {
    configuration: configuration.id,
    id: spec.id,
    clip: spec.clip ?? null,
    driveHz: spec.driveHz ?? null,
    frequency: NOT_MEASURED,
    amplitude: NOT_MEASURED,
    lag: NOT_MEASURED,
    driveAmplitude: NOT_MEASURED,
    gain: NOT_MEASURED,
    amplitudeU95: null,
    lagU95: null,
    coverageFactor: null,
    independentU: null,
    amplitudePx: null,
    noiseFloor: null,
    window: null,
    frames: 0,
    lostFrames: 0,
    verdict: 'failed',
    sentence: '',
    leftover: null,
    jointFit: false,
    transient: null,
    harmonics: [],
    budget: [],
    excluded: spec.excluded ?? null,
    typed: false,
    codecLimited: false,
    warnings: [],
    error: null,
  };
}

/** A dwell that could not be measured, with the reason in one sentence. */
export function failedDwell(configuration: Configuration, spec: DwellSpec, reason: string): DwellResult {
  return { ...emptyDwell(configuration, spec), sentence: reason, error: reason };
}

const K95 = 1.959963984540054; // normal quantile: the user's own uncertainties come without degrees of freedom

function gainOf(
  amplitude: number,
  u: number | undefined,
  drive: number | undefined,
  driveU: number | undefined,
): DwellResult['gain'] {
  if (drive === undefined || drive === 0) return NOT_MEASURED;
  const gain = amplitude / drive;
  return measured(
    gain,
    u === undefined ? null : Math.abs(gain) * Math.hypot(u / amplitude, (driveU ?? 0) / drive),
  );
}

/** A dwell whose amplitude the user typed in. */
export function typedDwell(configuration: Configuration, spec: DwellSpec): DwellResult {
  const { typed } = spec;
  if (!typed) throw new Error('a typed dwell without typed numbers');
  if (!(typed.amplitude > 0)) {
    return failedDwell(
      configuration,
      spec,
      `Dwell "${spec.id}": the typed amplitude is ${typed.amplitude} mm; an amplitude is above 0.`,
    );
  }
  if (spec.driveHz === undefined || !(spec.driveHz > 0)) {
    return failedDwell(
      configuration,
      spec,
      `Dwell "${spec.id}" has a typed amplitude but no drive frequency above 0; give driveHz.`,
    );
  }
  return {
    ...emptyDwell(configuration, spec),
    frequency: measured(spec.driveHz, null),
    amplitude: measured(typed.amplitude, typed.u ?? null),
    lag: measured(typed.lag ?? null, typed.lagU ?? null),
    driveAmplitude: measured(typed.driveAmplitude ?? null, typed.driveAmplitudeU ?? null),
    gain: gainOf(typed.amplitude, typed.u, typed.driveAmplitude, typed.driveAmplitudeU),
    amplitudeU95: typed.u === undefined ? null : K95 * typed.u,
    lagU95: typed.lagU === undefined ? null : K95 * typed.lagU,
    coverageFactor: K95,
    independentU: typed.u ?? null,
    verdict: 'steady',
    sentence: 'Typed in.',
    typed: true,
  };
}

/** A dwell measured before and kept in the test file; `fit` and `plan` use it without reading the clip. */
export function keptDwell(configuration: Configuration, spec: DwellSpec): DwellResult {
  const { measured: kept } = spec;
  if (!kept) throw new Error('a kept dwell without its measurement');
  const u = kept.u ?? null;
  const own =
    u === null ? null : Math.sqrt(Math.max(0, u * u - ((kept.commonRelativeU ?? 0) * kept.amplitude) ** 2));
  const verdicts = ['steady', 'settling', 'beating', 'drifting', 'lost', 'failed'] as const;
  return {
    ...emptyDwell(configuration, spec),
    frequency: measured(kept.frequency ?? spec.driveHz ?? null, null),
    amplitude: measured(kept.amplitude, u),
    lag: measured(kept.lag ?? null, kept.lagU ?? null),
    gain: measured(kept.gain ?? null, kept.gainU ?? null),
    amplitudeU95: u === null ? null : K95 * u,
    lagU95: kept.lagU === null || kept.lagU === undefined ? null : K95 * kept.lagU,
    coverageFactor: K95,
    independentU: own,
    verdict: verdicts.find((each) => each === kept.verdict) ?? 'steady',
    sentence: 'Measured before.',
  };
}
