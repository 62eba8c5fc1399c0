/**
 * One CSV field (RFC 4180). A text that a spreadsheet would take for a formula (it begins with = + - @, a tab or a
 * carriage return) gets an apostrophe in front; numbers are left alone.
 */
export function csvField(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return Number.isFinite(value) ? String(value) : '';
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** One line of a CSV file, with its line end. */
export function csvLine(values: readonly (string | number | null)[]): string {
  return `${values.map(csvField).join(',')}\r\n`;
}
