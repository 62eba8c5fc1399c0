/**
 * Bessel function of the first kind J_n(x) by its ascending series,
 * sum over k of (-1)^k (x/2)^(2k+n) / (k! (k+n)!). Good to 1e-14 for |x| up to 4, which is all that physics
 * here asks for.
 *
 * @param n order, a whole number 0 or more
 * @throws Error outside this range
 * Source: Abramowitz and Stegun 9.1.10 (from memory).
 */
export function besselJ(n: number, x: number): number {
  if (!Number.isInteger(n) || n < 0) throw new Error(`order ${n} must be a whole number, 0 or more`);
  if (!(Math.abs(x) <= 4)) throw new Error(`argument ${x} is outside -4 to 4`);
  const half = x / 2;
  let term = 1;
  for (let k = 1; k <= n; k++) term *= half / k;
  let sum = term;
  for (let k = 1; Math.abs(term) > 1e-18 && k < 60; k++) {
    term *= (-half * half) / (k * (k + n));
    sum += term;
  }
  return sum;
}
