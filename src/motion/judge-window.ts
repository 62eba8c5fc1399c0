import { type Measured, measured } from '../numeric/measured.ts';
import { type Samples, spanS } from '../sine/samples.ts';
import type { JointFit } from './joint-fit.ts';
import type { FrequencyKnowledge, MotionModel } from './motion-model.ts';
import { withoutForeignMotion } from './other-tones.ts';
import { type Steadiness, steadiness, strays } from './steadiness.ts';

/** What was found about a window, with the numbers its sentence needs. Times in s, changes as fractions. */
export type Finding =
  | { readonly kind: 'steady' }
  /** A decaying transient; `beatS` is the period of the swelling where it is seen to swell. */
  | {
      readonly kind: 'transient';
      readonly atEnd: number;
      readonly waitS: number;
      readonly beatS: number | null;
    }
  /** Swelling and shrinking that does not die away. */
  | { readonly kind: 'beat'; readonly swing: number; readonly beatS: number | null }
  /** The amplitude rose (positive) or fell. */
  | { readonly kind: 'trend'; readonly change: number }
  /** The phase slid evenly: not settled, or the drive is not where it was set. */
  | { readonly kind: 'slide'; readonly degrees: number; readonly measuredHz: number }
  /** It changed in no simple way. */
  | { readonly kind: 'wander'; readonly excursion: number };

/** A window of a motion, judged. */
export interface WindowJudgement {
  readonly windowS: readonly [number, number];
  readonly finding: Finding;
  readonly model: MotionModel;
  /** A steady foreign tone that was taken out, Hz; null where there was none. */
  readonly toneHz: number | null;
  readonly leftover: Measured;
  readonly leftoverEffect: number | null;
}

/** Leftover a window begins with where the record allows, and the most that is still called steady. */
export const LEFTOVER_AIM = 0.01;
/** The most leftover that is still called steady, a fraction of the amplitude. */
export const LEFTOVER_LIMIT = 0.02;

// Change of amplitude over a window that is called drifting, beyond its noise.
const CHANGE_LIMIT = 0.003;
// Swelling and shrinking without decay that is called beating.
const BEAT_LIMIT = 0.01;
// Wandering of the block amplitudes that is called unsteady, beyond its noise.
const STRAY_LIMIT = 0.02;
// Exciter and camera keep time to about this; a frequency difference below it is nobody's fault.
const CLOCK_TOLERANCE = 2e-4;

/** Leftover at a time of the joint fit's record, as a fraction of the steady amplitude. */
export function leftoverAt(joint: JointFit, timeS: number): number {
  return joint.leftover * Math.exp(-joint.decayRatePerS * (timeS - joint.originS));
}

/**
 * Largest share by which a leftover can move the amplitude of a steady fit over a window: its mean in the frame
 * that turns with the drive.
 */
export function effectOn(joint: JointFit, windowS: readonly [number, number], frequencyHz: number): number {
  const span = windowS[1] - windowS[0];
  const turn = Math.hypot(joint.decayRatePerS, 2 * Math.PI * (joint.dampedHz - frequencyHz)) * span;
  return leftoverAt(joint, windowS[0]) * (turn > 2 ? 2 / turn : 1);
}

function beatPeriodS(joint: JointFit): number | null {
  const beatHz = Math.abs(joint.dampedHz - joint.frequencyHz);
  const seen = beatHz * (joint.endS - joint.originS) >= 1;
  return seen ? 1 / beatHz : null;
}

/** Largest departure of steady plus transient from their mean, in the frame that turns with the drive. */
function excursionOf(joint: JointFit): number {
  const span = joint.endS - joint.originS;
  const turn = 2 * Math.PI * (joint.dampedHz - joint.frequencyHz);
  const points = Array.from({ length: 41 }, (_, k) => {
    const elapsed = (k / 40) * span;
    const size = joint.leftover * Math.exp(-joint.decayRatePerS * elapsed);
    return [size * Math.cos(turn * elapsed), size * Math.sin(turn * elapsed)] as const;
  });
  const mean = [0, 1].map((axis) => points.reduce((sum, point) => sum + point[axis as 0 | 1] / 41, 0));
  return Math.max(...points.map(([x, y]) => Math.hypot(x - mean[0]!, y - mean[1]!)));
}

function transientFinding(joint: JointFit): Finding {
  const beatS = beatPeriodS(joint);
  const dies =
    joint.decayRatePerS > 2 * joint.decayRateU && joint.decayRatePerS * (joint.endS - joint.originS) > 0.3;
  if (!dies) {
    const swing = excursionOf(joint);
    return beatS !== null ? { kind: 'beat', swing, beatS } : { kind: 'trend', change: trendOf(joint) };
  }
  const waitS = Math.max(0, Math.log(joint.leftoverAtEnd / LEFTOVER_AIM) / joint.decayRatePerS);
  // swelling is what is seen where a beat comes back to more than half
  const swells = beatS !== null && joint.decayRatePerS * beatS < Math.LN2;
  return { kind: 'transient', atEnd: joint.leftoverAtEnd, waitS, beatS: swells ? beatS : null };
}

/** Change of the amplitude from the joint fit's first to its last moment. */
function trendOf(joint: JointFit): number {
  const at = (timeS: number) => {
    const size = leftoverAt(joint, timeS);
    const drive = 2 * Math.PI * joint.frequencyHz * (timeS - joint.referenceTimeS) + joint.phaseRad;
    const free = 2 * Math.PI * joint.dampedHz * (timeS - joint.originS) + joint.transientPhaseRad;
    return Math.hypot(1 + size * Math.cos(free - drive), size * Math.sin(free - drive));
  };
  const [first, last] = [at(joint.originS), at(joint.endS)];
  return (2 * (last - first)) / (first + last);
}

/** What the blocks say where no transient is demanded. */
function blockFinding(blocks: Steadiness | null): Finding | null {
  if (blocks === null) return null;
  if (strays(blocks, STRAY_LIMIT)) {
    if (blocks.signChanges >= 3) return { kind: 'beat', swing: blocks.excursion, beatS: null };
    const mostly = Math.abs(blocks.change) > blocks.excursion;
    return mostly
      ? { kind: 'trend', change: blocks.change }
      : { kind: 'wander', excursion: blocks.excursion };
  }
  const changed = Math.abs(blocks.change) > CHANGE_LIMIT + 3 * blocks.changeU;
  return changed ? { kind: 'trend', change: blocks.change } : null;
}

/** A measured frequency that the record cannot tell from a slow transient. */
function slideFinding(samples: Samples, model: MotionModel, driveHz: number): Finding | null {
  const off = model.frequencyHz - driveHz;
  const slideRad = 2 * Math.PI * Math.abs(off) * spanS(samples);
  return model.frequencyInDoubt && Math.abs(off) > CLOCK_TOLERANCE * driveHz
    ? { kind: 'slide', degrees: (slideRad * 180) / Math.PI, measuredHz: model.frequencyHz }
    : null;
}

/**
 * Judges the samples of one window as a whole.
 *
 * @returns null where no sine can be fitted
 */
export function judgeWindow(
  samples: Samples,
  driveHz: number,
  knowledge: FrequencyKnowledge,
): WindowJudgement | null {
  const { clean, model, toneHz } = withoutForeignMotion(samples, driveHz, knowledge);
  if (model === null) return null;
  const windowS = [samples.timesS[0]!, samples.timesS[samples.timesS.length - 1]!] as const;
  const { joint, steady } = model;
  const blocks = steadiness(
    clean,
    model.frequencyHz,
    joint?.conditioned ? joint.amplitude : steady.amplitude,
  );
  const told = (finding: Finding, leftover: Measured, leftoverEffect: number | null): WindowJudgement => ({
    windowS,
    finding,
    model,
    toneHz,
    leftover,
    leftoverEffect,
  });

  if (joint === null) {
    // nothing found: what a transient of the size of the noise would be
    const none = measured(0, (2 * steady.amplitudeU) / steady.amplitude);
    const slide =
      model.frequencyMeasured && knowledge === 'set' ? slideFinding(samples, model, driveHz) : null;
    return told(blockFinding(blocks) ?? slide ?? { kind: 'steady' }, none, 0);
  }
  if (!model.adequate) {
    const excursion = Math.max(blocks?.excursion ?? 0, LEFTOVER_LIMIT);
    const finding: Finding =
      blocks !== null && blocks.signChanges >= 3
        ? { kind: 'beat', swing: excursion, beatS: null }
        : { kind: 'wander', excursion };
    return told(finding, measured(null), null);
  }
  if (joint.conditioned) {
    const leftover = measured(joint.leftover, joint.leftoverU);
    const steadyEnough = joint.leftover + 2 * joint.leftoverU <= LEFTOVER_LIMIT;
    const finding: Finding = steadyEnough ? { kind: 'steady' } : transientFinding(joint);
    return told(finding, leftover, effectOn(joint, windowS, model.frequencyHz));
  }
  // steady and transient cannot be told apart, but how much they move can
  const excursion = excursionOf(joint);
  // a beat is seen whole, so its size is its size; a slow change may be the beginning of a large one
  const limit = transientFinding(joint).kind === 'beat' ? BEAT_LIMIT : CHANGE_LIMIT;
  if (excursion <= limit) return told({ kind: 'steady' }, measured(null), excursion);
  return told(transientFinding(joint), measured(null), null);
}
