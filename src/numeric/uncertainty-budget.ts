import { coverageFactor } from './quantiles.ts';

/** One independent contribution to a combined standard uncertainty. */
export interface Contribution {
  /** Standard uncertainty it brings to the result, in the result's unit; 0 or more. */
  readonly u: number;
  /** Its degrees of freedom; null where it is as good as exactly known (a stated or assumed uncertainty). */
  readonly dof: number | null;
}

/** Standard uncertainty, effective degrees of freedom and the interval they give. */
export interface ExpandedUncertainty {
  /** Combined standard uncertainty, k = 1. */
  readonly u: number;
  /** Effective degrees of freedom; null where they are without bound. */
  readonly effectiveDof: number | null;
  /** Expanded uncertainty U = k u. */
  readonly U: number;
  readonly k: number;
  /** Probability that the interval holds the value, for example 0.95. */
  readonly coverage: number;
}

/** Root sum of squares of independent contributions (JCGM 100:2008, 5.1.2). */
export function combinedU(contributions: readonly Contribution[]): number {
  return Math.hypot(...contributions.map((part) => part.u));
}

/**
 * Effective degrees of freedom after Welch and Satterthwaite: u^4 / sum(u_i^4 / dof_i).
 *
 * @returns null where no contribution of finite degrees of freedom counts, that is, they are without bound
 * @throws Error for a negative u or degrees of freedom not above 0
 * Source: JCGM 100:2008, G.4.1 equation (G.2b).
 */
export function welchSatterthwaite(contributions: readonly Contribution[]): number | null {
  for (const { u, dof } of contributions) {
    if (!(u >= 0) || !Number.isFinite(u)) throw new Error(`standard uncertainty ${u} must be 0 or more`);
    if (dof !== null && !(dof > 0)) throw new Error(`degrees of freedom ${dof} must be above 0`);
  }
  const u = combinedU(contributions);
  if (u === 0) return null;
  // relative to u, so that the fourth powers neither overflow nor vanish
  let sum = 0;
  for (const part of contributions) if (part.dof !== null) sum += (part.u / u) ** 4 / part.dof;
  return sum > 0 ? 1 / sum : null;
}

/**
 * Combined and expanded uncertainty of a budget. The coverage factor is that of Student's t for the effective
 * degrees of freedom, truncated to the next lower whole number (at least 1), or of the normal distribution.
 *
 * @param coverage in (0, 1)
 * Source: JCGM 100:2008, G.4.1 and G.6.4.
 */
export function expandedUncertainty(
  contributions: readonly Contribution[],
  coverage = 0.95,
): ExpandedUncertainty {
  const u = combinedU(contributions);
  const effectiveDof = welchSatterthwaite(contributions);
  const dof = effectiveDof === null ? Number.POSITIVE_INFINITY : Math.max(1, Math.floor(effectiveDof));
  const k = coverageFactor(coverage, dof);
  return { u, effectiveDof, U: k * u, k, coverage };
}
