/** Coordinates that each command takes, for the commands that the drawing library writes. */
const PAIRS: Readonly<Record<string, number>> = { M: 1, L: 1, Q: 2, C: 3, Z: 0 };
const STEPS_PER_PX = 10; // coordinates are rounded to a tenth of a CSS pixel, one dot at 960 dots per inch

/** A whole number of tenths as a number in the fewest characters, with a space only where one is needed. */
function short(tenths: number, first: boolean): string {
  const whole = Math.trunc(Math.abs(tenths) / STEPS_PER_PX);
  const rest = Math.abs(tenths) % STEPS_PER_PX;
  const digits = `${whole === 0 && rest !== 0 ? '' : whole}${rest === 0 ? '' : `.${rest}`}`;
  if (tenths < 0) return `-${digits}`;
  return first ? digits : ` ${digits}`;
}

/**
 * The same path in half the characters: rounded to a tenth of a pixel and written as steps from point to point. Rounding
 * errors do not add up. A path with commands other than M, L, Q, C and Z comes back as it is.
 */
export function shortPath(path: string): string {
  let [x, y, startX, startY] = [0, 0, 0, 0];
  let out = '';
  const parts = path.match(/[A-Za-z][^A-Za-z]*/g) ?? [];
  for (const part of parts) {
    const command = part.charAt(0);
    const pairs = PAIRS[command];
    if (pairs === undefined) return path;
    const numbers =
      part.length > 1
        ? part
            .slice(1)
            .trim()
            .split(/[\s,]+/)
        : [];
    if (numbers.length !== 2 * pairs) return path;
    if (pairs === 0) {
      out += 'z';
      [x, y] = [startX, startY];
      continue;
    }
    let steps = '';
    let [endX, endY] = [x, y];
    for (let k = 0; k < numbers.length; k += 2) {
      endX = Math.round(Number(numbers[k]) * STEPS_PER_PX);
      endY = Math.round(Number(numbers[k + 1]) * STEPS_PER_PX);
      steps += short(endX - x, k === 0) + short(endY - y, false);
    }
    // a line of no length draws nothing; the first point of a sub-path stays
    if (command !== 'L' || endX !== x || endY !== y) out += command.toLowerCase() + steps;
    [x, y] = [endX, endY];
    if (command === 'M') [startX, startY] = [x, y];
  }
  return out;
}
