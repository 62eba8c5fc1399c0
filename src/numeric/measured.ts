/**
 * A measured number with its standard uncertainty (k = 1), both in the unit its field name states.
 * `u` is null where no uncertainty can be had; `value` is null where nothing was measured. Neither is ever NaN.
 */
export interface Measured {
  readonly value: number | null;
  readonly u: number | null;
}

/** The measured number that was not measured. */
export const NOT_MEASURED: Measured = { value: null, u: null };

/** Makes a measured number; anything that is not finite becomes null (a negative `u` too). */
export function measured(value: number | null, u: number | null = null): Measured {
  const known = value !== null && Number.isFinite(value);
  return {
    value: known ? value : null,
    u: known && u !== null && Number.isFinite(u) && u >= 0 ? u : null,
  };
}
