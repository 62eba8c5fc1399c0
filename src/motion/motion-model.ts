import { projectedSum, projectModel } from '../sine/decaying-model.ts';
import { fitSine } from '../sine/four-parameter.ts';
import { durationS, type Samples } from '../sine/samples.ts';
import type { SineFit } from '../sine/sine-fit.ts';
import { fitSineAtFrequency, recordCentre } from '../sine/three-parameter.ts';
import { fitJoint, type JointFit } from './joint-fit.ts';
import { steadiness, strays } from './steadiness.ts';

/**
 * How well the drive frequency is known: `measured` on the drive itself, so that it is not in question; `set` on the
 * exciter, which may be a little off; `unknown`, a rough value only.
 */
export type FrequencyKnowledge = 'measured' | 'set' | 'unknown';

/** The simplest description of a motion that the samples do not contradict. */
export interface MotionModel {
  /** Frequency of the steady part. */
  readonly frequencyHz: number;
  /** True where the frequency had to be measured because the given one does not fit. */
  readonly frequencyMeasured: boolean;
  /** Steady fit at that frequency, as if there were no transient. */
  readonly steady: SineFit;
  /** Steady fit with the frequency free, where it was tried. */
  readonly free: SineFit | null;
  /** Steady and decaying motion together, only where the samples demand a transient. */
  readonly joint: JointFit | null;
  /**
   * True where the frequency was measured and differs from the set one, but the set one with a slowly dying transient
   * describes the samples as well.
   */
  readonly frequencyInDoubt: boolean;
  /** False where even this description leaves something that wanders with the drive frequency. */
  readonly adequate: boolean;
}

/** Slow baseline of every fit of a dwell: an offset and a slope, for a camera that sags. */
export const BASELINE_TERMS = 2;

// A parameter must earn its place by lowering the residual by this many noise variances: a transient of noise alone
// passes in about one record of a hundred.
const COST_PER_PARAMETER = 8;
// Residuals below this share of the amplitude are rounding, not motion.
const ROUNDING = 1e-7;
// A transient or foreign tone below this share of the amplitude is not worth a word.
const NEGLIGIBLE = 5e-4;
// What a description may leave unexplained, as a share of the amplitude.
const LARGEST_STRAY = 0.02;

/**
 * Chooses between steady motion at the given or at a measured frequency, with or without a decaying transient.
 *
 * @param samples harmonics already taken out
 * @returns null where no sine can be fitted
 */
export function chooseModel(
  samples: Samples,
  driveHz: number,
  knowledge: FrequencyKnowledge,
): MotionModel | null {
  const options = { baselineTerms: BASELINE_TERMS };
  const steady = fitSineAtFrequency(samples.timesS, samples.values, driveHz, options);
  if (steady === null) return null;
  const free =
    knowledge === 'measured'
      ? null
      : fitSine(samples.timesS, samples.values, { ...options, startHz: driveHz });
  const known = knowledge !== 'unknown';

  const joints: JointFit[] = [];
  const addJoint = (hz: number, driveFree: boolean, residuals: Float64Array) => {
    const joint = fitJoint(samples, { ...options, driveHz: hz, driveFree, steadyResiduals: residuals });
    // of two free tones the one that outlasts the other is the dwell, whatever the fit calls it
    const swapped = driveFree && joint !== null && joint.leftoverAtEnd > 1;
    if (joint !== null && joint.leftover > NEGLIGIBLE && !swapped) joints.push(joint);
    return joint;
  };
  if (known) {
    const joint = addJoint(driveHz, false, steady.residuals);
    // a frequency slightly off looks like a transient that hardly decays: let it be found
    if (knowledge === 'set' && free !== null && (joint === null || !joint.conditioned)) {
      addJoint(free.frequencyHz, true, free.residuals);
    }
  } else {
    addJoint(free?.frequencyHz ?? driveHz, true, (free ?? steady).residuals);
  }

  const noise = Math.max(
    (ROUNDING * steady.amplitude) ** 2,
    Math.min(...[steady, free].map(noiseOf), ...joints.map(({ noiseVariance }) => noiseVariance)),
  );
  const cost = (sum: number, parameters: number) => sum / noise + COST_PER_PARAMETER * parameters;
  const choices: { cost: number; fit: SineFit; joint: JointFit | null; measured: boolean }[] = [];
  if (known)
    choices.push({ cost: cost(steady.residualSumOfSquares, 0), fit: steady, joint: null, measured: false });
  if (free !== null) {
    choices.push({ cost: cost(free.residualSumOfSquares, 1), fit: free, joint: null, measured: true });
  }
  for (const joint of joints) {
    const measured = joint.frequencyU !== null;
    choices.push({ cost: cost(joint.residualSumOfSquares, measured ? 5 : 4), fit: steady, joint, measured });
  }
  if (choices.length === 0) return null;
  const best = choices.reduce((a, b) => (b.cost < a.cost ? b : a));
  const frequencyHz = best.joint?.frequencyHz ?? best.fit.frequencyHz;
  const fit =
    best.joint !== null && best.measured
      ? fitSineAtFrequency(samples.timesS, samples.values, frequencyHz, options)
      : best.fit;
  if (fit === null) return null;
  return {
    frequencyHz,
    frequencyMeasured: best.measured,
    steady: fit,
    free,
    joint: best.joint,
    frequencyInDoubt:
      knowledge === 'set' &&
      best.joint === null &&
      best.measured &&
      transientRivals(samples, driveHz, best.fit, noise),
    adequate: !leavesStray(samples, best.joint ?? fit, frequencyHz),
  };
}

// Damping ratios of the slow transients that an even phase slide is weighed against, and how much more residual, in
// noise variances, still counts as describing it as well.
const RIVAL_DAMPING = [0.003, 0.008];
const RIVAL_MARGIN = 25;

/** Whether a slow transient at the set frequency explains what a measured frequency explains. */
function transientRivals(samples: Samples, driveHz: number, free: SineFit, noise: number): boolean {
  const model = {
    originS: samples.timesS[0]!,
    ...recordCentre(samples),
    baselineTerms: BASELINE_TERMS,
    steady: { frequencyHz: driveHz, free: false },
  };
  const limit = free.residualSumOfSquares + RIVAL_MARGIN * noise;
  const stepHz = 0.1 / durationS(samples);
  for (const ratio of RIVAL_DAMPING) {
    for (let k = -8; k <= 8; k++) {
      const omega = 2 * Math.PI * (driveHz + k * stepHz);
      if (omega > 0 && projectedSum(projectModel(model, samples, [ratio * omega, omega]), samples) < limit)
        return true;
    }
  }
  return false;
}

/** Noise variance per frame at the signal, back from the amplitude's uncertainty. */
function noiseOf(fit: SineFit | null): number {
  return fit === null ? Number.POSITIVE_INFINITY : (fit.amplitudeU ** 2 * fit.frames) / 2;
}

/** Whether the residuals still move with the drive frequency here and there, though not on the whole. */
function leavesStray(
  samples: Samples,
  fit: { readonly residuals: Float64Array; readonly amplitude: number },
  frequencyHz: number,
): boolean {
  const left = steadiness({ timesS: samples.timesS, values: fit.residuals }, frequencyHz, fit.amplitude);
  return strays(left, LARGEST_STRAY);
}
