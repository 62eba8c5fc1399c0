import type { BudgetEntry, BudgetSource } from './amplitude-budget.ts';
import type { Compression } from './codec-limit.ts';
import type { RowFacts } from './row-correction.ts';

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
  /** Root mean square residual of the fit, mm; null where not known. It tells how the codec behaves. */
  readonly residualRmsMm: number | null;
  /** Scale where the marker moves, for the codec's sake. */
  readonly mmPerPx: number;
}

/** A lag as fitted: response behind drive, degrees. */
export interface RawLag {
  readonly lagDeg: number;
  readonly uFitDeg: number | null;
  readonly dof: number | null;
  /** Amplitude of the drive marker as seen, px; null where the lag was not taken against one. */
  readonly driveAmplitudePx: number | null;
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
  /** Amplitude of a still patch at the same frequency, px, treated as the marker was (ground subtracted or not); null where there is no control. */
  readonly stillPatchAmplitudePx: number | null;
  /** Lines proportional to the amplitude: scale, parallax, axis, tilt, perspective (see `geometryLines`). */
  readonly relativeLines: readonly RelativeLine[];
  /** Further lines of the amplitude, mm: leftover, drift. */
  readonly amplitudeLines: readonly BudgetEntry[];
  /** Further lines of the lag, degrees. */
  readonly lagLines: readonly BudgetEntry[];
}
