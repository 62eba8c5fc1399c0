import type { Measured } from '../numeric/measured.ts';
import { medianIntervalS } from '../sine/samples.ts';
import type { MotionWarning } from './dwell-judgement.ts';
import { LEFTOVER_AIM, type WindowJudgement } from './judge-window.ts';
import type { MotionRecord } from './motion-record.ts';
import { unseenPhaseShare } from './record-checks.ts';
import { hertz, percent } from './verdict-sentences.ts';

/** What the warnings are drawn from. */
export interface WarningFacts {
  readonly record: MotionRecord;
  readonly windowS: readonly [number, number];
  readonly driveHz: number | null;
  readonly judged: WindowJudgement;
  /** Change of the amplitude over the window, as a fraction. */
  readonly drift: Measured;
  readonly harmonics: readonly Measured[];
  readonly frames: { readonly total: number; readonly lost: number };
  readonly periods: number;
}

const HARMONIC_LIMIT = 0.02;
const LOST_SHARE = 0.05;
const FEW_PERIODS = 5;
const DRIFT_REMARK = 0.003;
// Exciter and camera keep time to about this.
const CLOCK_TOLERANCE = 2e-4;

/** Everything about a measured dwell that the engineer should know beside the verdict. */
export function dwellWarnings(facts: WarningFacts): MotionWarning[] {
  const { judged, driveHz, frames } = facts;
  const { model, finding } = judged;
  const steady = finding.kind === 'steady';
  const warnings: MotionWarning[] = [];
  const warn = (code: MotionWarning['code'], sentence: string) => warnings.push({ code, sentence });

  const leftover = judged.leftover.value ?? 0;
  if (steady && leftover > LEFTOVER_AIM) {
    warn(
      'leftover',
      `The start-up transient is still ${percent(leftover)} of the amplitude where the window begins.`,
    );
  }
  if (driveHz !== null && Math.abs(model.frequencyHz - driveHz) > CLOCK_TOLERANCE * driveHz) {
    const seen = hertz(model.frequencyHz);
    const sentence = `The motion runs at ${seen}, not at the ${hertz(driveHz)} set: correct the drive frequency.`;
    if (finding.kind !== 'slide') warn('frequency-differs', sentence);
  }
  if (judged.toneHz !== null) {
    const sentence = `A steady motion of ${Number(judged.toneHz.toPrecision(3))} Hz from another source was taken out; look for it.`;
    warn('other-tone', sentence);
  }
  const bent = facts.harmonics.flatMap(({ value, u }, k) =>
    value !== null && value > HARMONIC_LIMIT && value > 4 * (u ?? 0) ? [{ order: k + 2, value }] : [],
  );
  if (bent.length > 0) {
    const list = bent
      .map(({ order, value }) => `${percent(value)} at ${order} times the frequency`)
      .join(', ');
    warn(
      'harmonics',
      `The swing is no pure sine (${list}): the part may strike a stop, the marker may not sit on the part, or a ` +
        'rolling shutter runs along the motion.',
    );
  }
  if (facts.periods < FEW_PERIODS) {
    warn('few-periods', `Only ${Number(facts.periods.toPrecision(2))} periods were used: film longer.`);
  }
  if (frames.lost > LOST_SHARE * frames.total) {
    warn('lost-frames', `The marker was lost in ${frames.lost} of ${frames.total} frames of the window.`);
  }
  const unseen = frames.lost === 0 ? 0 : unseenPhaseShare(facts.record, facts.windowS, model.frequencyHz);
  if (unseen > 0 && 1 / (medianIntervalS(asSamples(facts.record)) * model.frequencyHz) >= 4) {
    warn(
      'phase-gap',
      `The marker was lost at the same point of every swing (${percent(unseen)} of the period): the amplitude there ` +
        'is the fit, not seen.',
    );
  }
  const drift = facts.drift.value ?? 0;
  if (steady && Math.abs(drift) > DRIFT_REMARK && Math.abs(drift) > 3 * (facts.drift.u ?? 0)) {
    warn('slow-drift', `The amplitude changed by ${percent(Math.abs(drift))} over the window.`);
  }
  if (!steady && model.joint !== null && !model.joint.conditioned) {
    warn(
      'joint-fit-ill-conditioned',
      'The record is too short to tell the transient from the steady motion.',
    );
  }
  return warnings;
}

function asSamples({ timesS, displacementMm }: MotionRecord) {
  return { timesS, values: displacementMm };
}
