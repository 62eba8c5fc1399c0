import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import { fitSine } from '../sine/four-parameter.ts';
import { separableHarmonics } from '../sine/harmonics.ts';
import type { Samples } from '../sine/samples.ts';
import { columnCount, sineDesign } from '../sine/sine-model.ts';
import { recordCentre } from '../sine/three-parameter.ts';
import type { JointFit } from './joint-fit.ts';
import { chooseModel, type FrequencyKnowledge, type MotionModel } from './motion-model.ts';

/**
 * The samples less their harmonics 2 to 5 of the drive frequency, so that a bent waveform is not taken for a second
 * motion. Unchanged where the record is too short to tell them.
 */
function withoutHarmonics(samples: Samples, frequencyHz: number): Samples {
  const model = {
    frequencyHz,
    ...recordCentre(samples),
    baselineTerms: 2,
    harmonics: separableHarmonics(samples, frequencyHz),
  };
  const columns = columnCount(model);
  const frames = samples.timesS.length;
  if (model.harmonics.length === 0 || frames < 3 * columns) return samples;
  const design = sineDesign(model, samples.timesS);
  const fit = linearLeastSquares(design, frames, columns, samples.values);
  if (fit === null) return samples;
  const values = samples.values.map((value, i) => {
    let harmonics = 0;
    for (let k = 4; k < columns; k++) harmonics += design[i * columns + k]! * fit.coefficients[k]!;
    return value - harmonics;
  });
  return { timesS: samples.timesS, values };
}

/** The samples less one steady tone near `toneHz`; null where none is found there. */
function withoutTone(samples: Samples, residuals: Float64Array, toneHz: number): Samples | null {
  const tone = fitSine(samples.timesS, residuals, { startHz: toneHz, noise: 'white' });
  if (tone === null) return null;
  const values = samples.values.map((value, i) => {
    const angle = 2 * Math.PI * tone.frequencyHz * (samples.timesS[i]! - tone.referenceTimeS) + tone.phaseRad;
    return value - tone.amplitude * Math.cos(angle);
  });
  return { timesS: samples.timesS, values };
}

// A tone this far from the drive, as a share of the drive frequency, is no beating of the part with its drive.
const FOREIGN_DISTANCE = 0.2;
// It must also be told from the drive clearly, in units of 1/duration.
const FOREIGN_RESOLUTION = 3;

/** A dwell's samples cleaned of what does not belong to it, and the model chosen for them. */
export interface CleanMotion {
  readonly clean: Samples;
  /** Null where no sine can be fitted. */
  readonly model: MotionModel | null;
  /** Frequency of a steady foreign tone that was taken out; null where there was none. */
  readonly toneHz: number | null;
}

/**
 * The samples less everything that is not the dwell: harmonics, and a steady tone far from the drive (a second mode
 * rung by the floor, a shaking camera), which would mask the start-up transient.
 */
export function withoutForeignMotion(
  samples: Samples,
  driveHz: number,
  knowledge: FrequencyKnowledge,
): CleanMotion {
  const clean = withoutHarmonics(samples, driveHz);
  const model = chooseModel(clean, driveHz, knowledge);
  const toneHz = foreignToneHz(model?.joint ?? null, driveHz);
  if (model === null || toneHz === null) return { clean, model, toneHz: null };
  const rest = withoutTone(clean, model.steady.residuals, toneHz);
  if (rest === null) return { clean, model, toneHz: null };
  return { clean: rest, model: chooseModel(rest, driveHz, knowledge), toneHz };
}

/** Where the second motion of a joint fit neither decays nor lies near the drive. */
function foreignToneHz(joint: JointFit | null, driveHz: number): number | null {
  if (joint === null) return null;
  const spanS = joint.endS - joint.originS;
  const apartHz = Math.abs(joint.dampedHz - joint.frequencyHz);
  const decays = joint.decayRatePerS * spanS > 0.3;
  const apart = apartHz > FOREIGN_DISTANCE * driveHz && apartHz * spanS > FOREIGN_RESOLUTION;
  return !decays && apart ? joint.dampedHz : null;
}
