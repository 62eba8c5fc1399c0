import { expect, it } from 'vitest';
import { chiSquareCdf } from '../../src/numeric/quantiles.ts';
import { seededRandom } from '../../src/numeric/seeded-random.ts';

it('the same seed gives the same numbers, another seed others', () => {
  const draw = (seed: number) => {
    const random = seededRandom(seed);
    return Array.from({ length: 5 }, () => random.uniform());
  };
  expect(draw(3)).toEqual(draw(3));
  expect(draw(3)).not.toEqual(draw(4));
});

it('uniform: 100 classes of 100000 numbers pass a chi-square test, and the ends are never reached', () => {
  const random = seededRandom(1);
  const classes = new Float64Array(100);
  for (let i = 0; i < 1e5; i++) {
    const value = random.uniform();
    expect(value > 0 && value < 1).toBe(true);
    classes[Math.floor(100 * value)]!++;
  }
  const chi2 = classes.reduce((sum, count) => sum + (count - 1000) ** 2 / 1000, 0);
  const p = chiSquareCdf(chi2, 99);
  expect(p).toBeGreaterThan(0.005);
  expect(p).toBeLessThan(0.995);
});

it('normal: moments 0, 1, 0, 3 and no memory, within four standard errors of 100000 numbers', () => {
  const random = seededRandom(2);
  const n = 1e5;
  const z = Array.from({ length: n }, () => random.normal());
  const mean = (f: (value: number, i: number) => number) =>
    z.reduce((sum, value, i) => sum + f(value, i), 0) / n;
  const error = 4 / Math.sqrt(n);
  expect(Math.abs(mean((v) => v))).toBeLessThan(error);
  expect(Math.abs(mean((v) => v * v) - 1)).toBeLessThan(error * Math.sqrt(2));
  expect(Math.abs(mean((v) => v ** 3))).toBeLessThan(error * Math.sqrt(15));
  expect(Math.abs(mean((v) => v ** 4) - 3)).toBeLessThan(error * Math.sqrt(96));
  expect(Math.abs(mean((v, i) => v * (z[i - 1] ?? 0)))).toBeLessThan(error);
});
