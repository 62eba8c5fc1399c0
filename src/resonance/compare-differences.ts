import { coverageFactor, fCdf } from '../numeric/quantiles.ts';

/**
 * A value of one configuration. `u` is its independent standard uncertainty; what all configurations share
 * (a wrong scale, a wrong clock) is kept apart as a relative uncertainty, because it cancels in comparisons.
 */
export interface ComparedValue {
  readonly value: number | null;
  readonly u: number | null;
  /** Degrees of freedom behind `u`; left out or null: so many that they do not matter. */
  readonly dof?: number | null;
  /** Relative standard uncertainty shared by all configurations; 0 where left out. */
  readonly commonRelativeU?: number;
}

/** Difference and ratio of two values; numbers are null where a value or an uncertainty is missing. */
export interface Difference {
  /** `to` minus `from`, with the standard uncertainty that counts what both share once only. */
  readonly difference: number | null;
  readonly uDifference: number | null;
  /** `to` over `from`; what both share cancels. Null where `from` is 0. */
  readonly ratio: number | null;
  readonly uRatio: number | null;
  /** Half-width of the 95 % interval of the difference. */
  readonly expandedDifference: number | null;
  /** Chance of a difference at least this large if there were none; null where it cannot be told. */
  readonly pValue: number | null;
}

const UNKNOWN: Difference = {
  difference: null,
  uDifference: null,
  ratio: null,
  uRatio: null,
  expandedDifference: null,
  pValue: null,
};

/** Effective degrees of freedom of a sum of two independent contributions (Welch and Satterthwaite); Infinity if large. */
export function effectiveDof(u1: number, dof1: number | null, u2: number, dof2: number | null): number {
  const term = (u: number, dof: number | null) => (dof === null ? 0 : u ** 4 / dof);
  const sum = term(u1, dof1) + term(u2, dof2);
  return sum > 0 ? (u1 ** 2 + u2 ** 2) ** 2 / sum : Number.POSITIVE_INFINITY;
}

/**
 * Compares two values of the same parameter.
 *
 * A shared relative error s makes both wrong by the same factor: the difference carries s times itself, the ratio
 * nothing, and it can never make two equal values differ, so that the significance counts independent errors only.
 * Where the two values state different shared uncertainties the larger is taken.
 * Source: JCGM 100:2008, 5.2 (correlated inputs), G.4 (Welch and Satterthwaite).
 */
export function differenceOf(from: ComparedValue, to: ComparedValue): Difference {
  if (from.value === null || to.value === null) return UNKNOWN;
  const difference = to.value - from.value;
  const ratio = from.value === 0 ? null : to.value / from.value;
  if (from.u === null || to.u === null) return { ...UNKNOWN, difference, ratio };

  const independent = Math.hypot(from.u, to.u);
  const shared = Math.max(from.commonRelativeU ?? 0, to.commonRelativeU ?? 0) * Math.abs(difference);
  const uDifference = Math.hypot(independent, shared);
  const dof = effectiveDof(from.u, from.dof ?? null, to.u, to.dof ?? null);
  const t = independent > 0 ? difference / independent : null;
  return {
    difference,
    uDifference,
    ratio,
    uRatio: ratio === null ? null : Math.hypot(to.u, ratio * from.u) / Math.abs(from.value),
    expandedDifference: coverageFactor(0.95, dof) * uDifference,
    pValue: t === null ? null : twoSidedChance(t, dof),
  };
}

const PRACTICALLY_INFINITE = 1e8; // degrees of freedom beyond which t and normal agree to all digits used

function twoSidedChance(t: number, dof: number): number {
  return 1 - fCdf(t ** 2, 1, Math.min(dof, PRACTICALLY_INFINITE));
}

/**
 * Chances corrected for having made several comparisons, by Holm's step-down method: with them below 0.05, the
 * chance of even one false finding is at most 5 %. Entries that are null stay null and do not count.
 * Source: S. Holm, Scand. J. Statist. 6 (1979) 65 (from memory).
 */
export function holmAdjusted(pValues: readonly (number | null)[]): (number | null)[] {
  const ranked = pValues.flatMap((p, index) => (p === null ? [] : [{ p, index }])).sort((a, b) => a.p - b.p);
  const adjusted: (number | null)[] = pValues.map(() => null);
  let largest = 0;
  ranked.forEach(({ p, index }, rank) => {
    largest = Math.max(largest, Math.min(1, p * (ranked.length - rank)));
    adjusted[index] = largest;
  });
  return adjusted;
}
