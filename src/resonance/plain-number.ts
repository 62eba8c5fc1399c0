/** A number in a sentence: `digits` significant digits (3 where not said), no exponent for everyday sizes, no trailing zeros. */
export function plainNumber(value: number, digits = 3): string {
  return String(Number(value.toPrecision(digits)));
}
