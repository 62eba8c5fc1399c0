import { InputError } from '../errors.ts';
import type { MotionRecord } from '../motion/motion-record.ts';
import { type Measured, NOT_MEASURED } from '../numeric/measured.ts';
import { presentSamples } from '../sine/samples.ts';
import { type DecayFit, fitDecay } from './decay-fit.ts';
import { findDecay } from './decay-window.ts';
import { type EnvelopeKind, judgeEnvelope } from './envelope.ts';

/** A natural frequency with the amplitude it holds at. */
export interface LevelOfDecay {
  readonly amplitudeMm: number;
  readonly naturalHz: Measured;
}

/** What a free decay tells. */
export interface RingDown {
  readonly naturalHz: Measured;
  readonly dampedHz: Measured;
  readonly dampingRatio: Measured;
  /** Swing at the start of the window, mm zero-to-peak. */
  readonly amplitudeMm: Measured;
  /** null where no decay was found. */
  readonly windowS: readonly [number, number] | null;
  readonly frames: number;
  readonly lostFrames: number;
  readonly envelope: EnvelopeKind;
  readonly exponent: Measured;
  readonly levels: readonly LevelOfDecay[];
  /** What was found, or why nothing was. */
  readonly sentence: string;
  readonly warnings: readonly string[];
  readonly found: boolean;
}

const SHORT_TIME_CONSTANTS = 1.5; // shorter decays leave the damping several times less certain than they could

const CLEAR_SWING = 4; // first swing over the residual: less is noise that happens to oscillate
const CLEAR_DECAY = 5; // decay rate over its uncertainty: less is a steady motion

/** Whether the fit shows a swing that stands out of the noise and shrinks. */
function isDecay({ converged, amplitude, residualSd, decayRatePerS: rate }: DecayFit): boolean {
  if (!converged || amplitude.value === null || rate.value === null || rate.u === null) return false;
  return amplitude.value > CLEAR_SWING * residualSd && rate.value > CLEAR_DECAY * rate.u;
}

function nothing(record: MotionRecord, sentence: string): RingDown {
  const lostFrames = record.displacementMm.filter((value) => !Number.isFinite(value)).length;
  return {
    naturalHz: NOT_MEASURED,
    dampedHz: NOT_MEASURED,
    dampingRatio: NOT_MEASURED,
    amplitudeMm: NOT_MEASURED,
    windowS: null,
    frames: 0,
    lostFrames,
    envelope: 'unknown',
    exponent: NOT_MEASURED,
    levels: [],
    sentence,
    warnings: [],
    found: false,
  };
}

function envelopeWarning(kind: EnvelopeKind, exponent: Measured): string[] {
  const p = exponent.value?.toFixed(2) ?? '';
  if (kind === 'friction') {
    return [
      `The swing falls faster than in proportion while it is small (exponent ${p}, viscous damping has 1): dry friction; the damping ratio holds only near the amplitude it was found at.`,
    ];
  }
  if (kind === 'growing-with-amplitude') {
    return [
      `Damping grows with the swing (exponent ${p}, viscous damping has 1), as with air drag; the damping ratio holds only near the amplitude it was found at.`,
    ];
  }
  return [];
}

function lengthWarning(fit: DecayFit): string[] {
  const timeConstants = (fit.decayRatePerS.value ?? 0) * (fit.endS - fit.originS);
  if (timeConstants >= SHORT_TIME_CONSTANTS || timeConstants <= 0) return [];
  return [
    `The record holds ${timeConstants.toFixed(1)} time constants of the decay: film ${((3 / timeConstants - 1) * (fit.endS - fit.originS)).toFixed(0)} s longer for the damping to be as certain as it can be.`,
  ];
}

/**
 * Natural frequency and damping from a free decay.
 * @param windowS the part to fit, s; found where absent
 * @throws InputError where the window lies outside the record
 */
export function measureRingDown(record: MotionRecord, windowS?: readonly [number, number]): RingDown {
  const { timesS } = record;
  const lastS = timesS.at(-1) ?? 0;
  if (windowS && !(windowS[0] < windowS[1] && windowS[0] < lastS && windowS[1] > (timesS[0] ?? 0))) {
    throw new InputError(
      `The window from ${windowS[0]} s to ${windowS[1]} s does not lie in the record, which ends at ${lastS.toFixed(2)} s; correct it or leave it out.`,
    );
  }
  const samples = presentSamples(timesS, record.displacementMm, windowS);
  const fit = windowS ? fitDecay(samples) : (findDecay(samples)?.fit ?? null);
  if (!fit || !isDecay(fit)) {
    return nothing(
      record,
      'No free decay was found: film from the release, or from when the drive stops, until the swing has gone, at least five periods.',
    );
  }
  const decay = presentSamples(timesS, record.displacementMm, [fit.originS, fit.endS]);
  const envelope = judgeEnvelope(decay, fit);
  const inWindow = timesS.filter((time) => time >= fit.originS && time <= fit.endS).length;
  return {
    naturalHz: fit.naturalHz,
    dampedHz: fit.dampedHz,
    dampingRatio: fit.dampingRatio,
    amplitudeMm: fit.amplitude,
    windowS: [fit.originS, fit.endS],
    frames: fit.frames,
    lostFrames: inWindow - fit.frames,
    envelope: envelope.kind,
    exponent: envelope.exponent,
    levels: envelope.stretches.map((each) => ({ amplitudeMm: each.amplitude, naturalHz: each.naturalHz })),
    sentence: `Free decay from ${fit.originS.toFixed(2)} s to ${fit.endS.toFixed(2)} s, ${Math.floor((fit.endS - fit.originS) * (fit.dampedHz.value ?? 0))} periods.`,
    warnings: [...envelopeWarning(envelope.kind, envelope.exponent), ...lengthWarning(fit)],
    found: true,
  };
}
