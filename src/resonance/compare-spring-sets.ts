import { type Measured, measured } from '../numeric/measured.ts';

function known(springs: readonly Measured[]): { k: number; u: number | null }[] {
  return springs.flatMap(({ value, u }) => (value === null ? [] : [{ k: value, u }]));
}

/**
 * Stiffness of springs side by side: the sum, each with independent uncertainty. Unit as given, N/m.
 * A spring without a value makes the sum unknown; one without an uncertainty makes that unknown.
 */
export function parallelStiffness(springs: readonly Measured[]): Measured {
  const all = known(springs);
  if (all.length < springs.length || all.length === 0) return measured(null);
  let variance: number | null = 0;
  let sum = 0;
  for (const { k, u } of all) {
    sum += k;
    variance = variance === null || u === null ? null : variance + u ** 2;
  }
  return measured(sum, variance === null ? null : Math.sqrt(variance));
}

/**
 * Stiffness of springs end to end: the reciprocal of the sum of reciprocals, each with independent uncertainty.
 * Unknown where a spring is unknown or not above zero.
 */
export function seriesStiffness(springs: readonly Measured[]): Measured {
  if (springs.some(({ value }) => value === null || value <= 0)) return measured(null);
  const compliance = parallelStiffness(
    known(springs).map(({ k, u }) => measured(1 / k, u === null ? null : u / k ** 2)),
  );
  if (compliance.value === null) return compliance;
  return measured(1 / compliance.value, compliance.u === null ? null : compliance.u / compliance.value ** 2);
}
