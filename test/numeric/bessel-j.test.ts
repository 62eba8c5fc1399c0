import { expect, test } from 'vitest';
import { besselJ } from '../../src/numeric/bessel-j.ts';

test.each([
  [0, 0.5, 0.938469807240813],
  [1, 0.1396263402, 0.069643177781047],
  [1, 1, 0.440050585744934],
  [2, 0.28, 0.00973612999386327],
  [2, 2, 0.352834028615638],
  [3, 3.9, 0.425043744767456],
])('J_%d(%d) = %d (scipy.special.jv)', (n, x, expected) => {
  expect(besselJ(n, x) / expected).toBeCloseTo(1, 12);
});

test('recurrence J_0 + J_2 = 2 J_1 / x over the whole range', () => {
  for (let x = 0.25; x <= 4; x += 0.25) {
    expect(besselJ(0, x) + besselJ(2, x)).toBeCloseTo((2 * besselJ(1, x)) / x, 13);
  }
});

test('out of range is our own mistake', () => {
  expect(() => besselJ(1, 5)).toThrow(/outside/);
  expect(() => besselJ(0.5, 1)).toThrow(/whole/);
});
