import { combinedU, type ExpandedUncertainty, expandedUncertainty } from '../numeric/uncertainty-budget.ts';

/** Where an uncertainty of amplitude or lag comes from, in the words the report prints. */
export type BudgetSource =
  | 'fit'
  | 'scale length'
  | 'scale clicks'
  | 'perspective'
  | 'axis'
  | 'tilt'
  | 'parallax'
  | 'exposure'
  | 'rolling shutter'
  | 'time stamps'
  | 'leftover'
  | 'drift'
  | 'shake'
  | 'codec';

/** One line of a budget. */
export interface BudgetEntry {
  readonly source: BudgetSource;
  /** Standard uncertainty it brings, mm of amplitude or degrees of lag; 0 or more. */
  readonly u: number;
  /** Degrees of freedom; null where stated or assumed and so as good as unbounded. */
  readonly dof: number | null;
  /** Whether it moves every dwell of the setup alike, and so leaves natural frequency and damping alone. */
  readonly common: boolean;
}

/** A budget's lines and what they come to. */
export interface Budget extends ExpandedUncertainty {
  /** Lines that count, largest first; lines of 0 are left out. */
  readonly entries: readonly BudgetEntry[];
  /** What is common to all dwells, k = 1. */
  readonly uCommon: number;
  /** What is this dwell's own, k = 1: the weight of a resonance fit. */
  readonly uOwn: number;
}

/**
 * Combines independent lines after JCGM 100 (5.1.2, G.4): root sum of squares, Welch-Satterthwaite degrees of
 * freedom, U at the coverage asked for with k from Student's t. The common part is kept apart.
 *
 * @throws Error for a line that is not finite or negative: lines are made here, never typed
 */
export function combineBudget(entries: readonly BudgetEntry[], coverage = 0.95): Budget {
  const counting = entries.filter((entry) => entry.u !== 0).sort((a, b) => b.u - a.u);
  return {
    ...expandedUncertainty(counting, coverage),
    entries: counting,
    uCommon: combinedU(counting.filter((entry) => entry.common)),
    uOwn: combinedU(counting.filter((entry) => !entry.common)),
  };
}
