import { decimalsFor, significant } from '../../../src/report/format-number.ts';

/** A number as people type it: decimal comma or point, spaces around; null where it is none. */
export function parseNumber(text: string): number | null {
  const plain = text.trim().replace(/\s/g, '').replace(',', '.').replace(/^\+/, '').replace('−', '-');
  if (!/^-?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain)) return null;
  const value = Number(plain);
  return Number.isFinite(value) ? value : null;
}

/** `12.1 ± 0.3`, `12,1 +- 0,3` or `12.1` as value and standard uncertainty; null where it is none. */
export function parseMeasured(text: string): { value: number; u: number | null } | null {
  const [first = '', second, more] = text.split(/±|\+\/?-/);
  const value = parseNumber(first);
  if (value === null || more !== undefined) return null;
  if (second === undefined) return { value, u: null };
  const u = parseNumber(second);
  return u === null || u < 0 ? null : { value, u };
}

/** A value and its uncertainty as two texts of the same decimals; an uncertainty that is not known is null. */
export function measuredTexts(value: number, u: number | null): { value: string; u: string | null } {
  if (u === null || !(u > 0)) return { value: significant(value, 4), u: null };
  const decimals = decimalsFor(u);
  return { value: value.toFixed(decimals), u: u.toFixed(decimals) };
}

/** Seconds as a person says them: `42 s`, `3 min 05 s`, `1 h 02 min`. */
export function durationText(seconds: number): string {
  const whole = Math.max(0, Math.round(seconds));
  if (whole < 60) return `${whole} s`;
  const two = (value: number): string => String(value).padStart(2, '0');
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${two(whole % 60)} s`;
  return `${Math.floor(whole / 3600)} h ${two(Math.floor((whole % 3600) / 60))} min`;
}
