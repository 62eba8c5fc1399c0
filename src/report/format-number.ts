/**
 * Numbers as a reader of a measurement expects them: rounded to their uncertainty, which itself is given with
 * two significant digits (the practice of JCGM 100, 7.2.6).
 */

const MOST_DECIMALS = 9;

/** Decimals that show `u` with two significant digits; 0 where `u` is 10 or more. */
export function decimalsFor(u: number): number {
  if (!(u > 0) || !Number.isFinite(u)) return 3;
  let exponent = Math.floor(Math.log10(u));
  // rounding may carry into the next decade: 0.0996 is shown as 0.10
  if (Number((u / 10 ** (exponent - 1)).toFixed(0)) >= 100) exponent += 1;
  return Math.min(MOST_DECIMALS, Math.max(0, 1 - exponent));
}

/** `value ± u`, both with the same decimals; the value alone with four significant digits where u is unknown. */
export function withUncertainty(value: number | null, u: number | null): string {
  if (value === null) return '–';
  if (u === null) return significant(value, 4);
  if (u === 0) return `${significant(value, 6)} ± 0`;
  const decimals = decimalsFor(u);
  return `${value.toFixed(decimals)} ± ${u.toFixed(decimals)}`;
}

/** A number with so many significant digits, never in exponent form between 1e-6 and 1e9. */
export function significant(value: number, digits: number): string {
  if (value === 0) return '0';
  const magnitude = Math.floor(Math.log10(Math.abs(value)));
  if (magnitude < -6 || magnitude > 9) return value.toExponential(digits - 1);
  return value.toFixed(Math.max(0, digits - 1 - magnitude));
}

/** A drive frequency as it was set: no digits invented, at least three significant digits. */
export function frequencyText(frequencyHz: number): string {
  const plain = String(Number(frequencyHz.toPrecision(9)));
  const withThree = significant(frequencyHz, 4);
  return plain.length >= withThree.length ? plain : withThree;
}
