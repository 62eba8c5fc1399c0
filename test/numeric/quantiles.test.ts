import { describe, expect, test } from 'vitest';
import {
  chiSquareCdf,
  coverageFactor,
  fCdf,
  fQuantile,
  studentTQuantile,
} from '../../src/numeric/quantiles.ts';

describe('coverage factors', () => {
  // JCGM 100:2008 table G.2 (from memory), digits from scipy.stats.t.ppf
  const published: readonly [number, number, number][] = [
    [1, 12.706205, 63.656741],
    [2, 4.302653, 9.924843],
    [3, 3.182446, 5.840909],
    [4, 2.776445, 4.604095],
    [5, 2.570582, 4.032143],
    [8, 2.306004, 3.355387],
    [10, 2.228139, 3.169273],
    [16, 2.119905, 2.920782],
    [20, 2.085963, 2.84534],
    [30, 2.042272, 2.749996],
    [50, 2.008559, 2.677793],
    [100, 1.983972, 2.625891],
  ];
  test.each(published)('JCGM 100 table G.2, %d degrees of freedom: 95 %% and 99 %%', (dof, k95, k99) => {
    expect(coverageFactor(0.95, dof)).toBeCloseTo(k95, 5);
    expect(coverageFactor(0.99, dof)).toBeCloseTo(k99, 5);
  });

  test('broken and endless degrees of freedom (scipy.stats)', () => {
    expect(coverageFactor(0.95, 8.56)).toBeCloseTo(2.2800069298836148, 9);
    expect(studentTQuantile(0.995, 4.4)).toBeCloseTo(4.33044957082477, 9);
    expect(coverageFactor(0.95, Number.POSITIVE_INFINITY)).toBeCloseTo(1.959963984540054, 7);
  });

  test('impossible arguments are refused', () => {
    expect(() => coverageFactor(0.95, 0)).toThrow(/degrees of freedom/);
    expect(() => studentTQuantile(1, 5)).toThrow(/probability/);
  });
});

describe('F and chi-square (scipy.stats)', () => {
  test('F', () => {
    expect(fQuantile(0.95, 3, 20)).toBeCloseTo(3.098391212140781, 9);
    expect(fQuantile(0.95, 2.5, 7.25)).toBeCloseTo(4.432607520307703, 9);
    expect(fCdf(2, 4, 9)).toBeCloseTo(0.8218039411699366, 10);
    expect(() => fQuantile(0.95, 0, 3)).toThrow(/degrees of freedom/);
  });

  test('chi-square', () => {
    expect(chiSquareCdf(7.5, 5)).toBeCloseTo(0.813970166397133, 10);
    expect(() => chiSquareCdf(1, -1)).toThrow(/degrees of freedom/);
  });
});
