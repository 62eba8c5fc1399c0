import { describe, expect, test } from 'vitest';
import { combinedU, expandedUncertainty, welchSatterthwaite } from '../../src/numeric/uncertainty-budget.ts';
import gum from '../data/gum.json' with { type: 'json' };

const { d0, d1, d2, printed } = gum.H1;

describe('Welch-Satterthwaite', () => {
  test('u = (3, 4) with 9 and 4 degrees of freedom: 8.561644, used as 8 (closed form)', () => {
    const parts = [
      { u: 3, dof: 9 },
      { u: 4, dof: 4 },
    ];
    expect(welchSatterthwaite(parts)).toBeCloseTo(8.561644, 6);
    expect(expandedUncertainty(parts).k).toBeCloseTo(2.306004, 6);
    expect(expandedUncertainty(parts).U).toBeCloseTo(5 * 2.306004, 5);
  });

  test('JCGM 100:2008 H.1: u(d) 9.681942 nm with 25.447251, in all 31.663879 nm with 16.751856 (printed 9.7, 25.6, 32, 16)', () => {
    const difference = [
      { u: d0.u, dof: d0.nu },
      { u: d1.u, dof: d1.nu },
      { u: d2.u, dof: d2.nu },
    ];
    const uD = combinedU(difference);
    const dofD = welchSatterthwaite(difference);
    expect(uD).toBeCloseTo(9.681942, 6);
    expect(dofD).toBeCloseTo(25.447251, 6);
    const all = [
      { u: 25, dof: 18 },
      { u: uD, dof: dofD },
      { u: 2.886787, dof: 50 },
      { u: 16.599027, dof: 2 },
    ];
    const expanded = expandedUncertainty(all, 0.99);
    expect(expanded.u / 31.663879).toBeCloseTo(1, 6);
    expect(expanded.effectiveDof).toBeCloseTo(16.751856, 4);
    expect(expanded.k).toBeCloseTo(2.920782, 6);
    expect(Math.round(2.92 * 32)).toBe(printed.U99_nm);
    expect(expanded.U).toBeCloseTo(92.48, 2);
  });

  test('no degrees of freedom stated: unbounded, k of the normal distribution 1.959964', () => {
    const expanded = expandedUncertainty([{ u: 2, dof: null }]);
    expect(expanded.effectiveDof).toBeNull();
    expect(expanded.k).toBeCloseTo(1.959964, 6);
  });

  test('scaling every u leaves the degrees of freedom alone, however small the unit', () => {
    const parts = [
      { u: 3e-90, dof: 9 },
      { u: 4e-90, dof: 4 },
    ];
    expect(welchSatterthwaite(parts)).toBeCloseTo(8.561644, 6);
  });
});

describe('coverage factors, GUM table G.2 (from memory, confirmed with scipy)', () => {
  test.each([
    [1, 12.706205, 63.656741],
    [2, 4.302653, 9.924843],
    [5, 2.570582, 4.032143],
    [10, 2.228139, 3.169273],
    [30, 2.042272, 2.749996],
    [100, 1.983972, 2.625891],
  ])('%d degrees of freedom: %d at 95 %%, %d at 99 %%', (dof, k95, k99) => {
    expect(expandedUncertainty([{ u: 1, dof }]).U).toBeCloseTo(k95, 6);
    expect(expandedUncertainty([{ u: 1, dof }], 0.99).U).toBeCloseTo(k99, 5);
  });

  test.each([
    [5, 2.6486],
    [10, 2.2837],
    [50, 2.0512],
  ])('%d degrees of freedom: %d at 95.45 %%', (dof, k) => {
    expect(expandedUncertainty([{ u: 1, dof }], 0.9545).k).toBeCloseTo(k, 3);
  });
});

test('an empty budget has no uncertainty, and a wrong line is refused', () => {
  expect(expandedUncertainty([])).toMatchObject({ u: 0, U: 0, effectiveDof: null });
  expect(() => welchSatterthwaite([{ u: -1, dof: 3 }])).toThrow(/0 or more/);
  expect(() => welchSatterthwaite([{ u: 1, dof: 0 }])).toThrow(/above 0/);
  expect(() => welchSatterthwaite([{ u: Number.NaN, dof: null }])).toThrow(/0 or more/);
});
