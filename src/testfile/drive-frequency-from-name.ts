const LARGEST_HZ = 100_000; // beyond this a number in a file name is a date or a serial number

// A number with point, comma or "p" as decimal sign, then Hz or kHz, with at most a space, _ or - between.
const WITH_UNIT = /(?<![\d.,])(\d+(?:[.,p]\d+)?)[\s_-]*(k?hz)(?![a-z])/gi;
const WITH_LETTER = /(?:^|[^a-z])f(?:req|requency)?\s*=\s*(\d+(?:[.,p]\d+)?)(?![\d.,])/gi;
const RANGE_BEFORE = /\d\s*(?:-|\.\.+|–|\bto\b)\s*$/i;

function toHz(digits: string, unit: string): number {
  const value = Number(digits.replace(/[,p]/i, '.'));
  return unit.toLowerCase() === 'khz' ? value * 1000 : value;
}

/**
 * The drive frequency that a clip's file name tells: `1.62Hz.mp4`, `1p62_hz.mov`, `f=1,62 Hz (2).mp4`, `f=1.62.mp4`.
 * @param fileName the name alone or with folders before it, which are not looked at
 * @returns Hz, more than 0; null where the name holds no frequency, two different ones, or a range such as `1-5Hz`
 */
export function driveFrequencyFromName(fileName: string): number | null {
  const name = fileName.split(/[\\/]/).at(-1) ?? '';
  const stem = name.replace(/\.(?!\d)[a-z0-9]{2,4}$/i, '');
  const found = new Set<number>();
  for (const match of stem.matchAll(WITH_UNIT)) {
    if (RANGE_BEFORE.test(stem.slice(0, match.index))) return null;
    found.add(toHz(match[1] ?? '', match[2] ?? ''));
  }
  if (found.size === 0) for (const match of stem.matchAll(WITH_LETTER)) found.add(toHz(match[1] ?? '', 'hz'));
  const [only] = found;
  if (only === undefined || found.size > 1) return null;
  return Number.isFinite(only) && only > 0 && only <= LARGEST_HZ ? only : null;
}
