import { exposureCorrection } from '../camera/exposure-blur.ts';
import { InputError } from '../errors.ts';
import { NOT_MEASURED } from '../numeric/measured.ts';
import type { FrequencyAtAmplitude } from '../resonance/amplitude-frequency.ts';
import { measureRingDown, type RingDown } from '../ringdown/ring-down.ts';
import type { Configuration, RingDownSpec } from '../testfile/schema.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import type { RingDownResult } from './results.ts';

/** A ring-down with what a resonance fit may learn of amplitude-dependent frequency from it. */
export interface EvaluatedRingDown {
  readonly result: RingDownResult;
  readonly levels: readonly FrequencyAtAmplitude[];
}

/** A ring-down that could not be measured, with the reason in one sentence. */
export function failedRingDown(
  configuration: Configuration,
  spec: RingDownSpec,
  reason: string,
): RingDownResult {
  return {
    configuration: configuration.id,
    id: spec.id,
    clip: spec.clip,
    naturalHz: NOT_MEASURED,
    dampingRatio: NOT_MEASURED,
    amplitude: NOT_MEASURED,
    envelope: 'unknown',
    window: null,
    frames: 0,
    sentence: reason,
    warnings: [],
    error: reason,
  };
}

/** A ring-down measured before and kept in the test file; planning uses it without reading the clip. */
export function keptRingDown(configuration: Configuration, spec: RingDownSpec): RingDownResult {
  const { measured: kept } = spec;
  if (!kept)
    return failedRingDown(
      configuration,
      spec,
      `Ring-down "${spec.id}" has not been measured yet: measure it with --save.`,
    );
  return {
    ...failedRingDown(configuration, spec, ''),
    naturalHz: { value: kept.naturalHz, u: kept.naturalHzU },
    dampingRatio: { value: kept.dampingRatio, u: kept.dampingRatioU },
    sentence: 'Measured before.',
    error: null,
  };
}

/** Blur takes the same share off every swing of one frequency, so that only the stated amplitude needs it given back. */
function trueAmplitude(clip: EvaluatedClip, found: RingDown): RingDown['amplitudeMm'] {
  const { value, u } = found.amplitudeMm;
  const frequencyHz = found.dampedHz.value;
  const exposureS = clip.spec.exposure;
  if (value === null || frequencyHz === null || exposureS === undefined) return found.amplitudeMm;
  const { factor } = exposureCorrection(frequencyHz, exposureS, null);
  return factor === null ? NOT_MEASURED : { value: value * factor, u: u === null ? null : u * factor };
}

/** Measures one ring-down of a clip. */
export function evaluateRingDown(
  configuration: Configuration,
  spec: RingDownSpec,
  clip: EvaluatedClip,
): EvaluatedRingDown {
  try {
    const found = measureRingDown(clip.response, spec.window);
    if (!found.found) return { result: failedRingDown(configuration, spec, found.sentence), levels: [] };
    const result: RingDownResult = {
      configuration: configuration.id,
      id: spec.id,
      clip: spec.clip,
      naturalHz: found.naturalHz,
      dampingRatio: found.dampingRatio,
      amplitude: trueAmplitude(clip, found),
      envelope: found.envelope,
      window: found.windowS,
      frames: found.frames,
      sentence: found.sentence,
      warnings: found.warnings,
      error: null,
    };
    return { result, levels: found.levels };
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    return { result: failedRingDown(configuration, spec, error.message), levels: [] };
  }
}
