import { describe, expect, it } from 'vitest';
import { differenceOf, effectiveDof, holmAdjusted } from '../../src/resonance/compare-differences.ts';
import { compareParameters, type ParameterSet } from '../../src/resonance/compare-parameters.ts';
import { seededNormal } from '../plan/seeded-random.ts';

const COLUMNS = [{ key: 'dampingRatio', name: 'damping ratio', unit: '' }];

const set = (id: string, value: number | null, u: number | null, commonRelativeU = 0): ParameterSet => ({
  id,
  label: `gap ${id}`,
  parameters: { dampingRatio: { value, u, commonRelativeU } },
});

describe('difference of two values', () => {
  it('Welch-Satterthwaite: u 3 and 4 with 9 and 4 degrees of freedom give 8.561644 (JCGM 100 formula G.2b)', () => {
    expect(effectiveDof(3, 9, 4, 4)).toBeCloseTo(8.561644, 6);
    expect(effectiveDof(3, null, 4, null)).toBe(Number.POSITIVE_INFINITY);
  });

  it('chances of a t value: 1.96 normal 0.05, 2.228139 with 10 degrees of freedom 0.05 (t table)', () => {
    const of = (t: number, dof: number | null) =>
      differenceOf({ value: 0, u: 0.6, dof: dof === null ? null : 1e12 }, { value: t, u: 0.8, dof });
    expect(of(1.959963985, null).pValue).toBeCloseTo(0.05, 6);
    const single = differenceOf({ value: 0, u: 0, dof: null }, { value: 2.228139, u: 1, dof: 10 });
    expect(single.pValue).toBeCloseTo(0.05, 6);
    expect(single.expandedDifference).toBeCloseTo(2.228139, 6);
  });

  it('what both share enters the difference once, leaves the ratio alone and never makes equal values differ', () => {
    const plain = differenceOf({ value: 10, u: 0.1 }, { value: 12, u: 0.1 });
    const shared = differenceOf(
      { value: 10, u: 0.1, commonRelativeU: 0.05 },
      { value: 12, u: 0.1, commonRelativeU: 0.05 },
    );
    expect(shared.uDifference).toBeCloseTo(Math.hypot(0.1, 0.1, 0.05 * 2), 12);
    expect(shared.uRatio).toBe(plain.uRatio);
    expect(shared.pValue).toBe(plain.pValue);
    expect(plain.ratio).toBeCloseTo(1.2, 12);
    expect(plain.uRatio).toBeCloseTo(1.2 * Math.hypot(0.1 / 10, 0.1 / 12), 12);
  });

  it('seeded simulation: a common scale error of 5 % is covered by these uncertainties, 92 to 98 %', () => {
    const normal = seededNormal(17);
    const runs = 2000;
    let differenceHeld = 0;
    let ratioHeld = 0;
    for (let run = 0; run < runs; run++) {
      const scale = 1 + 0.05 * normal();
      const d = differenceOf(
        { value: scale * (10 + 0.1 * normal()), u: 0.1, commonRelativeU: 0.05 },
        { value: scale * (14 + 0.1 * normal()), u: 0.1, commonRelativeU: 0.05 },
      );
      if (Math.abs(d.difference! - 4) < 1.96 * d.uDifference!) differenceHeld++;
      if (Math.abs(d.ratio! - 1.4) < 1.96 * d.uRatio!) ratioHeld++;
    }
    for (const held of [differenceHeld, ratioHeld]) {
      expect(held / runs).toBeGreaterThan(0.92);
      expect(held / runs).toBeLessThan(0.98);
    }
  });
});

describe('several comparisons', () => {
  it("Holm's step-down: 0.01, 0.04, 0.03, 0.005 become 0.03, 0.06, 0.06, 0.02 (R p.adjust)", () => {
    const adjusted = holmAdjusted([0.01, 0.04, 0.03, 0.005]);
    [0.03, 0.06, 0.06, 0.02].forEach((p, i) => {
      expect(adjusted[i]).toBeCloseTo(p, 12);
    });
    expect(holmAdjusted([null, 0.04, null])).toEqual([null, 0.04, null]);
  });

  it('seeded simulation: with six equal configurations a false finding stays below about 5 % of tests', () => {
    const normal = seededNormal(29);
    const runs = 600;
    let falseFindings = 0;
    let uncorrected = 0;
    for (let run = 0; run < runs; run++) {
      const sets = Array.from({ length: 6 }, (_, i) => set(`${i}`, 0.02 + 0.001 * normal(), 0.001));
      const pairs = compareParameters(sets, COLUMNS).parameters[0]!.pairs;
      expect(pairs).toHaveLength(15);
      if (pairs.some((pair) => pair.significant)) falseFindings++;
      if (pairs.some((pair) => pair.pValue! < 0.05)) uncorrected++;
    }
    expect(falseFindings / runs).toBeLessThan(0.07);
    expect(uncorrected / runs).toBeGreaterThan(0.2);
  });
});

describe('table of configurations', () => {
  it('names each difference with its interval and verdict', () => {
    const { parameters, notes } = compareParameters(
      [set('2', 0.05, 0.001), set('4', 0.03, 0.001), set('6', 0.0305, 0.001)],
      COLUMNS,
    );
    const [first, , third] = parameters[0]!.pairs;
    expect(first).toMatchObject({
      from: '2',
      to: '4',
      significant: true,
      difference: expect.closeTo(-0.02, 12),
    });
    expect(first!.sentence).toBe(
      'The damping ratio of gap 4 is 0.020 lower than that of gap 2, ± 0.0028 (95 %): a significant difference.',
    );
    expect(third).toMatchObject({ from: '4', to: '6', significant: false });
    expect(third!.sentence).toMatch(/do not differ significantly/);
    expect(notes.join(' ')).toMatch(/3 comparisons .*Holm/);
  });

  it('compares with one configuration where asked', () => {
    const sets = [set('a', 1, 0.1), set('b', 2, 0.1), set('c', 3, 0.1)];
    const { parameters } = compareParameters(sets, COLUMNS, { against: 'b' });
    expect(parameters[0]!.pairs.map((pair) => [pair.from, pair.to])).toEqual([
      ['b', 'a'],
      ['b', 'c'],
    ]);
    expect(() => compareParameters(sets, COLUMNS, { against: 'z' })).toThrow(/no configuration z/);
  });

  it('missing values and uncertainties are named and leave null, not zero', () => {
    const { parameters } = compareParameters(
      [set('a', 1, 0.1), set('b', null, null), set('c', 2, null)],
      COLUMNS,
    );
    const [ab, ac] = parameters[0]!.pairs;
    expect(ab).toMatchObject({ difference: null, uDifference: null, pValue: null, significant: null });
    expect(ab!.sentence).toBe('No damping ratio for gap b, so nothing can be compared.');
    expect(ac).toMatchObject({ difference: 1, uDifference: null, significant: null });
    expect(ac!.sentence).toMatch(/without an uncertainty for gap c/);
  });

  it('one configuration, and none: said, not failed', () => {
    expect(compareParameters([set('a', 1, 0.1)], COLUMNS).notes[0]).toMatch(/nothing to compare/);
    expect(compareParameters([], COLUMNS).parameters[0]!.pairs).toEqual([]);
  });
});
