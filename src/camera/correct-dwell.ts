import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import type { Warning } from '../numeric/warning.ts';
import { foldFrequency, unfoldPhase } from './aliasing.ts';
import type { Budget } from './amplitude-budget.ts';
import { type CodecLimit, codecLimit } from './codec-limit.ts';
import { amplitudeBudget, codecEvidence, lagBudget } from './dwell-budget.ts';
import type { DwellFacts, RawLag } from './dwell-facts.ts';
import { exposureCorrection, unknownExposure } from './exposure-blur.ts';
import { filmingWarnings, isRefused } from './filming-warnings.ts';
import { rowCorrection } from './row-correction.ts';
import { stampCorrection } from './timestamp-jitter.ts';

export type { DwellFacts, FilmingFacts, RawAmplitude, RawLag, RelativeLine } from './dwell-facts.ts';

/** A dwell's true amplitude and lag with their budgets. */
export interface CorrectedDwell {
  /** mm zero to peak. */
  readonly amplitude: Measured;
  /** Degrees, above -180 to 180. */
  readonly lag: Measured;
  /** True over seen amplitude; null where the dwell is refused. */
  readonly factor: number | null;
  readonly amplitudeBudget: Budget | null;
  readonly lagBudget: Budget | null;
  readonly codecLimited: boolean;
  /** Why the dwell is refused; null where it is measured. Also the first of the warnings. */
  readonly refusal: Warning | null;
  readonly warnings: readonly Warning[];
}

/**
 * From what a fit saw to what the part did, in the order of the light's way back: folding judged and its
 * phase undone, time stamps, rolling shutter (where row times were not), exposure, then the codec's doubt
 * and the lines of scale and setup. Scale, parallax and perspective are already in the amplitude's
 * millimetres; here they only bring their lines. A dwell whose amplitude cannot be known (folded onto
 * standstill, smeared beyond three quarters of a period) comes back as null with the reason among the warnings.
 *
 * @throws Error for facts that are not numbers in their ranges
 */
export function correctDwell(facts: DwellFacts): CorrectedDwell {
  requireFacts(facts);
  const { frequencyHz, filming } = facts;
  const stamps = stampCorrection(frequencyHz, filming.stampJitterS ?? 0, filming.stampQuantumS ?? 0);
  const rows = rowCorrection(frequencyHz, filming.frameRateHz, facts.rows);
  const exposure =
    filming.exposureS === null
      ? unknownExposure(frequencyHz, 1 / filming.frameRateHz)
      : exposureCorrection(frequencyHz, filming.exposureS, filming.exposureUS);
  const codec = codecOf(facts);
  const folded = filmingWarnings(frequencyHz, filming);
  const refusal =
    (isRefused(frequencyHz, filming) ? folded[0] : undefined) ??
    [exposure, rows].find((correction) => correction.factor === null)?.warning ??
    null;
  const found = [refusal, ...folded, stamps.warning, rows.warning, exposure.warning, codec.warning];
  const warnings = [...new Set(found.filter((warning) => warning !== null))];
  if (refusal !== null || exposure.factor === null || rows.factor === null) {
    return { ...UNKNOWN, codecLimited: codec.limited, refusal, warnings };
  }

  const factor = stamps.factor * rows.factor * exposure.factor;
  const ofAmplitude = amplitudeBudget(facts, { stamps, rows, exposure }, codec);
  const ofLag = facts.lag === null ? null : lagBudget(facts, facts.lag, rows.lagUDeg);
  const { uFitMm, amplitudeMm } = facts.amplitude;
  return {
    amplitude: measured(amplitudeMm * factor, uFitMm === null ? null : ofAmplitude.u),
    lag: facts.lag === null ? NOT_MEASURED : trueLag(facts, facts.lag, rows.lagShiftDeg, ofLag),
    factor,
    amplitudeBudget: ofAmplitude,
    lagBudget: ofLag,
    codecLimited: codec.limited,
    refusal: null,
    warnings,
  };
}

const UNKNOWN = {
  amplitude: NOT_MEASURED,
  lag: NOT_MEASURED,
  factor: null,
  amplitudeBudget: null,
  lagBudget: null,
} as const;

function codecOf(facts: DwellFacts): CodecLimit {
  const { amplitudeMm, mmPerPx } = facts.amplitude;
  return codecLimit(amplitudeMm / mmPerPx, facts.filming.compression, codecEvidence(facts));
}

function trueLag(facts: DwellFacts, lag: RawLag, shiftDeg: number, budget: Budget | null): Measured {
  const fold = foldFrequency(facts.frequencyHz, facts.filming.frameRateHz);
  const unfolded = facts.fittedAt === 'alias' ? unfoldPhase(lag.lagDeg, fold) : lag.lagDeg;
  return measured(wrapDeg(unfolded + shiftDeg), lag.uFitDeg === null || budget === null ? null : budget.u);
}

/** Into the range above -180 to 180. */
function wrapDeg(angleDeg: number): number {
  const wrapped = ((((angleDeg + 180) % 360) + 360) % 360) - 180;
  return wrapped === -180 ? 180 : wrapped;
}

function requireFacts(facts: DwellFacts): void {
  const { frequencyHz, filming, amplitude } = facts;
  const positive = [frequencyHz, filming.frameRateHz, filming.durationS, amplitude.mmPerPx];
  if (!positive.every((value) => value > 0 && Number.isFinite(value))) {
    throw new Error('frequency, frame rate, duration and scale must be above 0');
  }
  if (!(amplitude.amplitudeMm >= 0))
    throw new Error(`amplitude ${amplitude.amplitudeMm} mm must be 0 or more`);
}
