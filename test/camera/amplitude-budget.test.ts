import { describe, expect, test } from 'vitest';
import { type BudgetEntry, combineBudget } from '../../src/camera/amplitude-budget.ts';

const fit: BudgetEntry = { source: 'fit', u: 3, dof: 9, common: false };
const drift: BudgetEntry = { source: 'drift', u: 4, dof: 4, common: false };
const length: BudgetEntry = { source: 'scale length', u: 12, dof: null, common: true };

describe('budget of one dwell (JCGM 100:2008, 5.1.2 and G.4)', () => {
  test('u 5 with 8.56 degrees of freedom: U 95 % = 2.306004 x 5', () => {
    const budget = combineBudget([fit, drift]);
    expect(budget.u).toBeCloseTo(5, 12);
    expect(budget.effectiveDof).toBeCloseTo(8.561644, 6);
    expect(budget.k).toBeCloseTo(2.306004, 6);
    expect(budget.U).toBeCloseTo(11.53002, 5);
  });

  test("what is common is kept apart from what is the dwell's own: 12 and 5, 13 in all", () => {
    const budget = combineBudget([fit, drift, length]);
    expect([budget.uCommon, budget.uOwn, budget.u]).toEqual([12, 5, 13].map((v) => expect.closeTo(v, 12)));
  });

  test('lines come largest first, lines of nothing are left out', () => {
    const none: BudgetEntry = { source: 'parallax', u: 0, dof: null, common: true };
    expect(combineBudget([fit, none, length, drift]).entries.map((e) => e.source)).toEqual([
      'scale length',
      'drift',
      'fit',
    ]);
    expect(combineBudget([none])).toMatchObject({ u: 0, U: 0, uCommon: 0, uOwn: 0, entries: [] });
  });

  test('identity: scaling every line scales u and U and leaves the degrees of freedom', () => {
    const small = combineBudget([fit, drift, length]);
    const large = combineBudget([fit, drift, length].map((e) => ({ ...e, u: 1e-6 * e.u })));
    expect(large.u / small.u / 1e-6).toBeCloseTo(1, 12);
    expect((large.effectiveDof ?? 0) / (small.effectiveDof ?? 1)).toBeCloseTo(1, 9);
  });

  test('a line that is not a number is our own mistake', () => {
    expect(() => combineBudget([{ ...fit, u: Number.NaN }])).toThrow(/0 or more/);
    expect(() => combineBudget([{ ...fit, u: -1 }])).toThrow(/0 or more/);
  });
});
