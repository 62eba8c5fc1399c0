import { studentTQuantile } from '../numeric/quantiles.ts';

const BASES = [2, 3, 5] as const;

const made: readonly number[][] = [[], [], []];

/** Digits of k in a base, mirrored about the point: fills (0, 1) evenly as k counts up. */
function mirrored(k: number, base: number): number {
  let result = 0;
  let place = 1 / base;
  for (let rest = k; rest > 0; rest = Math.floor(rest / base)) {
    result += place * (rest % base);
    place /= base;
  }
  return result;
}

/**
 * The k-th of a deterministic, evenly spread sequence of standard normal numbers, in one of three dimensions.
 * @param k counted from 0
 * Source: J. H. Halton, Numer. Math. 2 (1960) 84 (from memory), turned normal by the quantile function.
 */
export function evenNormal(k: number, dimension: 0 | 1 | 2): number {
  const sequence = made[dimension] ?? [];
  for (let i = sequence.length; i <= k; i++)
    sequence.push(studentTQuantile(mirrored(i + 1, BASES[dimension]), Number.POSITIVE_INFINITY));
  return sequence[k] ?? 0;
}
