import type { Measured } from '../../src/numeric/measured.ts';
import type { TrendData } from '../../src/report/charts/trend-chart.ts';
import type { ParameterComparison } from '../../src/resonance/compare-parameters.ts';

// Answers of operations that both host and page speak of.

/** A quantity of several configurations against mass or setting. */
export interface TrendAnswer {
  readonly heading: string;
  /** Null where there is nothing to draw. */
  readonly data: TrendData | null;
  /** What the trend gives. */
  readonly quantities: readonly { readonly name: string; readonly unit: string; readonly of: Measured }[];
  /** What to mind, or what is missing, one sentence each. */
  readonly notes: readonly string[];
}

/** The configurations of a test side by side. */
export interface ComparisonAnswer {
  readonly parameters: ParameterComparison;
  readonly trends: readonly TrendAnswer[];
}

/** What became of files that were dropped. */
export interface Intake {
  /** A test file among them was opened; everything else was then left alone. */
  readonly opened: boolean;
  /** Ids of the clips added, in the order of their names. */
  readonly added: readonly string[];
  /** Those of them whose name told no drive frequency. */
  readonly unknownFrequency: readonly string[];
  /** What was not taken, each with the reason as a sentence. */
  readonly refused: readonly string[];
}

/** One thing in a folder that can be opened. */
export interface FolderEntry {
  readonly name: string;
  readonly path: string;
  readonly kind: 'folder' | 'test' | 'clip';
}

/** What the page's file chooser shows of a folder. */
export interface FolderListing {
  readonly path: string;
  /** The folder above; null at the top of what may be looked at. */
  readonly parent: string | null;
  readonly entries: readonly FolderEntry[];
  /** Starting points that may be looked at. */
  readonly roots: readonly string[];
}

/** An error across a thread or a wire: what kind it is of, and its message. */
export interface Failure {
  readonly name: string;
  readonly message: string;
}

/** How a call from the page ended. */
export type CallOutcome =
  | { readonly ok: true; readonly output: unknown }
  | { readonly ok: false; readonly kind: 'refused' | 'failed' | 'fault'; readonly failure: Failure };
