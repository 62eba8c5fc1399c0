import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import {
  foldFrequency,
  harmonicOnFundamental,
  harmonicWarning,
  judgeAlias,
  unfoldPhase,
} from './aliasing.ts';
import { type Budget, type BudgetEntry, type BudgetSource, combineBudget } from './amplitude-budget.ts';
import { type Compression, codecLimit } from './codec-limit.ts';
import { exposureCorrection, unknownExposure } from './exposure-blur.ts';
import { frameDensity } from './frames-per-period.ts';
import { type RowFacts, rowCorrection } from './row-correction.ts';
import { stampCorrection } from './timestamp-jitter.ts';
import type { Warning } from './warning.ts';

/** A budget line proportional to the amplitude. */
export interface RelativeLine {
  readonly source: BudgetSource;
  /** Standard uncertainty over the amplitude. */
  readonly relU: number;
  readonly dof: number | null;
  readonly common: boolean;
}

/** How the clip was filmed; null where nobody knows. */
export interface FilmingFacts {
  /** True capture rate in the window, frames/s (slow motion undone). */
  readonly frameRateHz: number;
  /** Length of the window, s. */
  readonly durationS: number;
  readonly exposureS: number | null;
  /** Standard uncertainty of the exposure, s; null: the default of `exposureCorrection`. */
  readonly exposureUS: number | null;
  /** Standard deviation of the stamps' errors, s; null: none known of. */
  readonly stampJitterS: number | null;
  /** Tick to which stamps are rounded, s; null: fine enough not to matter. */
  readonly stampQuantumS: number | null;
  readonly compression: Compression;
}

/** A sine as fitted to one marker, before any correction. */
export interface RawAmplitude {
  /** Zero to peak along the motion axis, mm. */
  readonly amplitudeMm: number;
  /** Standard uncertainty of the fit alone, mm; null where it gave none. */
  readonly uFitMm: number | null;
  readonly dof: number | null;
  /** Scale where the marker moves, for the codec's sake. */
  readonly mmPerPx: number;
}

/** A lag as fitted: response behind drive, degrees. */
export interface RawLag {
  readonly lagDeg: number;
  readonly uFitDeg: number | null;
  readonly dof: number | null;
}

/** Everything that decides what a raw dwell fit means. */
export interface DwellFacts {
  /** True drive frequency, Hz, above 0. */
  readonly frequencyHz: number;
  /**
   * Whether the sine was fitted at the true frequency on true times (then phases are right even when
   * folded), or at its alias (then a flipped alias reverses the lag).
   */
  readonly fittedAt: 'true-frequency' | 'alias';
  readonly filming: FilmingFacts;
  readonly amplitude: RawAmplitude;
  /** null where no drive marker is in view. */
  readonly lag: RawLag | null;
  /** Where the markers are in the readout and whether row times were undone; null: nothing is known of rows. */
  readonly rows: RowFacts | null;
  /** Amplitude of a still patch at the same frequency, px; null where there is no control. */
  readonly stillPatchAmplitudePx: number | null;
  /** Lines proportional to the amplitude: scale, parallax, axis, tilt, perspective (see `scaleLines`). */
  readonly relativeLines: readonly RelativeLine[];
  /** Further lines of the amplitude, mm: leftover, drift, shake. */
  readonly amplitudeLines: readonly BudgetEntry[];
  /** Further lines of the lag, degrees. */
  readonly lagLines: readonly BudgetEntry[];
}

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
  const { frequencyHz, filming, amplitude } = facts;
  requireFacts(facts);
  const warnings: Warning[] = [];
  const note = (warning: Warning | null): void => {
    if (warning !== null && !warnings.some((other) => other.code === warning.code)) warnings.push(warning);
  };

  const alias = judgeAlias(frequencyHz, filming.frameRateHz, filming.durationS);
  note(alias.warning);
  const stamps = stampCorrection(frequencyHz, filming.stampJitterS ?? 0, filming.stampQuantumS ?? 0);
  const rows = rowCorrection(frequencyHz, filming.frameRateHz, facts.rows);
  const exposure =
    filming.exposureS === null
      ? unknownExposure(frequencyHz, 1 / filming.frameRateHz)
      : exposureCorrection(frequencyHz, filming.exposureS, filming.exposureUS);
  note(stamps.warning);
  note(rows.warning);
  note(exposure.warning);
  note(frameDensity(frequencyHz, filming.frameRateHz).warning);
  const harmonic = harmonicOnFundamental(frequencyHz, filming.frameRateHz, filming.durationS);
  if (harmonic !== null) note(harmonicWarning(harmonic, frequencyHz, filming.frameRateHz));

  const still = facts.stillPatchAmplitudePx === null ? null : { amplitudePx: facts.stillPatchAmplitudePx };
  const codec = codecLimit(amplitude.amplitudeMm / amplitude.mmPerPx, filming.compression, still);
  note(codec.warning);

  if (
    alias.kind === 'refused' ||
    stamps.factor === null ||
    exposure.factor === null ||
    rows.factor === null
  ) {
    return {
      amplitude: NOT_MEASURED,
      lag: NOT_MEASURED,
      factor: null,
      amplitudeBudget: null,
      lagBudget: null,
      codecLimited: codec.limited,
      warnings,
    };
  }
  const factor = stamps.factor * rows.factor * exposure.factor;
  const trueMm = amplitude.amplitudeMm * factor;
  const own = (source: BudgetSource, u: number, dof: number | null = null): BudgetEntry => ({
    source,
    u,
    dof,
    common: false,
  });
  const amplitudeBudget = combineBudget([
    own('fit', (amplitude.uFitMm ?? 0) * factor, amplitude.dof),
    own('time stamps', (trueMm * (stamps.u ?? 0)) / stamps.factor),
    { source: 'rolling shutter', u: (trueMm * (rows.u ?? 0)) / rows.factor, dof: null, common: true },
    { source: 'exposure', u: (trueMm * (exposure.u ?? 0)) / exposure.factor, dof: null, common: true },
    own('codec', codec.uPx * amplitude.mmPerPx * factor),
    ...facts.relativeLines.map(({ relU, ...line }) => ({ ...line, u: relU * trueMm })),
    ...facts.amplitudeLines,
  ]);
  const lagBudget = facts.lag === null ? null : budgetOfLag(facts, facts.lag, rows.lagUDeg, codec.uPx, own);
  return {
    amplitude: measured(trueMm, amplitude.uFitMm === null ? null : amplitudeBudget.u),
    lag: facts.lag === null ? NOT_MEASURED : trueLag(facts, facts.lag, rows.lagShiftDeg, lagBudget),
    factor,
    amplitudeBudget,
    lagBudget,
    codecLimited: codec.limited,
    warnings,
  };
}

type OwnLine = (source: BudgetSource, u: number, dof?: number | null) => BudgetEntry;

function budgetOfLag(
  facts: DwellFacts,
  lag: RawLag,
  rowsUDeg: number,
  codecUPx: number,
  own: OwnLine,
): Budget {
  const amplitudePx = facts.amplitude.amplitudeMm / facts.amplitude.mmPerPx;
  const codecDeg = amplitudePx > 0 ? (Math.atan(codecUPx / amplitudePx) * 180) / Math.PI : 180;
  return combineBudget([
    own('fit', lag.uFitDeg ?? 0, lag.dof),
    own('rolling shutter', rowsUDeg),
    own('codec', codecDeg),
    ...facts.lagLines,
  ]);
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
