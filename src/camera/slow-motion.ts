import type { Warning } from '../numeric/warning.ts';
import { foldFrequency } from './aliasing.ts';
import { PHONE_FRAME_RATES_HZ } from './frame-rates.ts';

/** Measured and set frequency nearer than this fraction agree; exciters are set to better. */
const AGREES = 0.01;

/** A clip is slowed down by no more than this. */
const LARGEST_FACTOR = 40;

/** What the measured frequency says about the time scale of a clip. */
export interface FrequencyCheck {
  readonly kind: 'agrees' | 'alias' | 'time-scale' | 'mismatch';
  /** Set over measured frequency, snapped to the likely ratio where the kind is `time-scale`. */
  readonly ratio: number;
  /** captureFps to state, where the kind is `time-scale`. */
  readonly captureFps: number | null;
  readonly warning: Warning | null;
}

/**
 * Compares the frequency measured in a clip with the one set on the exciter. Equal within 1 % or three
 * standard uncertainties: agreed. Equal to the alias: folded, nothing wrong. A ratio of two frame rates that
 * phones use (2, 4, 8, 10, 2.5 ...): the clip is slow motion stored stretched, or captureFps is stated wrongly, and the
 * likely rate is named. Anything else is a mismatch to be looked into.
 *
 * @param measuredHz from a fit with free frequency, above 0
 * @param uMeasuredHz its standard uncertainty; 0 where not known
 * @param setHz drive frequency, above 0
 * @param frameRateHz frames per second in the time scale in which `measuredHz` was measured
 */
export function checkFrequency(
  measuredHz: number,
  uMeasuredHz: number,
  setHz: number,
  frameRateHz: number,
): FrequencyCheck {
  const ratio = setHz / measuredHz;
  const near = (expectedHz: number): boolean =>
    Math.abs(measuredHz - expectedHz) <= Math.max(AGREES * expectedHz, 3 * uMeasuredHz);
  if (near(setHz)) return { kind: 'agrees', ratio, captureFps: null, warning: null };
  const fold = foldFrequency(setHz, frameRateHz);
  if (fold.multiple > 0 && near(fold.aliasHz))
    return { kind: 'alias', ratio, captureFps: null, warning: null };
  const likely = likelyRatio(ratio, Math.max(AGREES, (3 * uMeasuredHz) / measuredHz));
  if (likely === null)
    return { kind: 'mismatch', ratio, captureFps: null, warning: mismatch(measuredHz, setHz) };
  const captureFps = nearestPhoneRate(frameRateHz * likely);
  return {
    kind: 'time-scale',
    ratio: likely,
    captureFps,
    warning: wrongTimeScale(measuredHz, setHz, likely, captureFps),
  };
}

/** The ratio of two phone frame rates within `tolerance` of `ratio`; whole ones before others. */
function likelyRatio(ratio: number, tolerance: number): number | null {
  const size = ratio >= 1 ? ratio : 1 / ratio;
  const found = ratios().find((candidate) => Math.abs(size / candidate - 1) <= Math.min(tolerance, 0.05));
  if (found === undefined) return null;
  return ratio >= 1 ? found : 1 / found;
}

/** Every ratio of two phone frame rates from 1.5 to 40, whole ones first, then the smaller first. */
function ratios(): number[] {
  const all = new Set<number>();
  for (const capture of PHONE_FRAME_RATES_HZ) {
    for (const file of [24, 25, 30, 60]) {
      const ratio = capture / file;
      if (ratio >= 1.5 && ratio <= LARGEST_FACTOR) all.add(ratio);
    }
  }
  return [...all].sort((a, b) => Number(!Number.isInteger(a)) - Number(!Number.isInteger(b)) || a - b);
}

function nearestPhoneRate(rateHz: number): number {
  const near = PHONE_FRAME_RATES_HZ.find((rate) => Math.abs(rate / rateHz - 1) <= 0.03);
  return near ?? Number(rateHz.toPrecision(4));
}

function text(value: number): string {
  return String(Number(value.toPrecision(3)));
}

function wrongTimeScale(measuredHz: number, setHz: number, ratio: number, captureFps: number): Warning {
  const found = `The motion is seen at ${text(measuredHz)} Hz but ${text(setHz)} Hz was set`;
  return {
    code: 'slow-motion-likely',
    sentence:
      ratio > 1
        ? `${found}, ${text(ratio)} times as much: the clip is most likely slow motion stored stretched; state captureFps ${captureFps} and measure again.`
        : `${found}, ${text(1 / ratio)} times less: captureFps is most likely stated ${text(1 / ratio)} times too high, or a harmonic was followed; ` +
          `try captureFps ${captureFps}.`,
  };
}

function mismatch(measuredHz: number, setHz: number): Warning {
  return {
    code: 'frequency-mismatch',
    sentence:
      `The motion is seen at ${measuredHz.toPrecision(4)} Hz but ${text(setHz)} Hz was set; check the drive frequency of this dwell and ` +
      'that the clip belongs to it.',
  };
}
