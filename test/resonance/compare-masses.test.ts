import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import {
  compareMasses,
  type MassComparison,
  type MassComparisonOptions,
  type MassPoint,
} from '../../src/resonance/compare-masses.ts';
import { parallelStiffness, seriesStiffness } from '../../src/resonance/compare-spring-sets.ts';
import { loadedSpringHz } from '../../src/resonance/spring-mass-share.ts';
import { seededNormal } from '../plan/seeded-random.ts';

const MASSES = [0.1, 0.2, 0.3, 0.4, 0.5];

function comparisonOf(points: MassPoint[], options: MassComparisonOptions = {}): MassComparison {
  const { comparison, reason } = compareMasses(points, options);
  if (comparison === null) throw new Error(reason);
  return comparison;
}

const pointsFor = (
  frequency: (massKg: number) => number,
  u: number | null = null,
  uMassKg = 0,
): MassPoint[] =>
  MASSES.map((massKg) => ({
    label: `${massKg} kg`,
    massKg,
    uMassKg,
    naturalHz: measured(frequency(massKg), u),
  }));

const lightSpringHz = (massKg: number) => Math.sqrt(120 / (massKg + 0.02)) / (2 * Math.PI);

describe('stiffness and effective mass from 1/f^2 against mass', () => {
  it('k 120 N/m, 0.06 kg spring counted as a third: f 5.0329 .. 2.4177 Hz give back k and 0.02 kg (derived)', () => {
    const points = pointsFor(lightSpringHz);
    expect(points[0]?.naturalHz.value).toBeCloseTo(5.0329212, 7);
    expect(points[4]?.naturalHz.value).toBeCloseTo(2.4177371, 7);
    const { line, stiffnessNPerM, effectiveMassKg } = comparisonOf(points);
    expect(line.slope).toBeCloseTo(0.3289868134, 10);
    expect(stiffnessNPerM.value).toBeCloseTo(120, 7);
    expect(effectiveMassKg.value).toBeCloseTo(0.02, 9);
  });

  const heavySpringHz = (massKg: number) => loadedSpringHz(120, 0.06, massKg);

  it('exact frequencies of a heavy spring: a plain line gives k 120.1514 and 0.3456 of the spring (numpy.polyfit)', () => {
    const { stiffnessNPerM, effectiveMassKg } = comparisonOf(pointsFor(heavySpringHz));
    expect(stiffnessNPerM.value).toBeCloseTo(120.1514337, 6);
    expect(effectiveMassKg.value).toBeCloseTo(0.0207385278, 9);
  });

  it("with the spring's mass stated its share is taken out load by load: k is 120 again and nothing is left over", () => {
    const { stiffnessNPerM, effectiveMassKg, massBesideSpringKg, springShare, notes } = comparisonOf(
      pointsFor(heavySpringHz),
      { springMassKg: 0.06 },
    );
    expect(stiffnessNPerM.value).toBeCloseTo(120, 6);
    expect(massBesideSpringKg?.value).toBeCloseTo(0, 8);
    expect(effectiveMassKg.value).toBeCloseTo(0.0205, 3);
    expect(springShare?.[0]).toBeGreaterThan(1 / 3);
    expect(springShare?.[1]).toBeCloseTo(0.3447, 2);
    expect(notes.join(' ')).toMatch(/of the spring's own 0\.0600 kg, 33\.\d % moves with the load/i);
  });

  it('identity: added masses in place of moving masses add the bare mass to the effective mass', () => {
    const bare = 0.35;
    const added = pointsFor((massKg) => lightSpringHz(massKg + bare), 0.002);
    const moving = added.map((point) => ({ ...point, massKg: point.massKg + bare }));
    const fromAdded = comparisonOf(added);
    const fromMoving = comparisonOf(moving);
    expect(fromAdded.stiffnessNPerM.value).toBeCloseTo(fromMoving.stiffnessNPerM.value!, 8);
    expect(fromAdded.effectiveMassKg.value).toBeCloseTo(fromMoving.effectiveMassKg.value! + bare, 8);
  });

  it('seeded simulation: stated uncertainties and correlation are those of the scatter, intervals hold 92 to 98 %', () => {
    const normal = seededNormal(21);
    const runs = 1500;
    let [held, meanK, meanM, varK, varM, covKM] = [0, 0, 0, 0, 0, 0];
    let stated: MassComparison | undefined;
    for (let run = 0; run < runs; run++) {
      const points = MASSES.map((massKg) => ({
        label: '',
        massKg: massKg + 0.0005 * normal(),
        uMassKg: 0.0005,
        naturalHz: measured(lightSpringHz(massKg) + 0.003 * normal(), 0.003),
      }));
      const { stiffnessNPerM, effectiveMassKg, ...rest } = comparisonOf(points);
      stated ??= { stiffnessNPerM, effectiveMassKg, ...rest };
      const [k, m] = [stiffnessNPerM.value!, effectiveMassKg.value!];
      if (Math.abs(k - 120) < 1.96 * stiffnessNPerM.u!) held++;
      meanK += k / runs;
      meanM += m / runs;
      varK += (k - 120) ** 2 / runs;
      varM += (m - 0.02) ** 2 / runs;
      covKM += ((k - 120) * (m - 0.02)) / runs;
    }
    expect(held / runs).toBeGreaterThan(0.92);
    expect(held / runs).toBeLessThan(0.98);
    expect(Math.abs(meanK - 120)).toBeLessThan(4 * Math.sqrt(varK / runs) + 0.02);
    expect(Math.abs(meanM - 0.02)).toBeLessThan(4 * Math.sqrt(varM / runs) + 1e-5);
    const correlation = covKM / Math.sqrt(varK * varM);
    expect(stated!.correlation!).toBeGreaterThan(correlation - 0.03);
    expect(stated!.correlation!).toBeLessThan(correlation + 0.03);
  });

  it('a clock or balance that is wrong for all points alike widens k, and the mass only through the balance', () => {
    const points = pointsFor(lightSpringHz, 0.002);
    const plain = comparisonOf(points);
    const clock = comparisonOf(points, { commonFrequencyU: 0.01 });
    expect(clock.stiffnessNPerM.u).toBeCloseTo(Math.hypot(plain.stiffnessNPerM.u!, 0.02 * 120), 8);
    expect(clock.effectiveMassKg.u).toBeCloseTo(plain.effectiveMassKg.u!, 12);
    const balance = comparisonOf(points, { commonMassU: 0.01 });
    expect(balance.stiffnessNPerM.u).toBeCloseTo(Math.hypot(plain.stiffnessNPerM.u!, 0.01 * 120), 8);
    expect(balance.effectiveMassKg.u).toBeCloseTo(Math.hypot(plain.effectiveMassKg.u!, 0.01 * 0.02), 10);
  });

  it('says so where the points scatter more than their uncertainties allow', () => {
    const points = pointsFor(lightSpringHz, 0.0005).map((point, i) => ({
      ...point,
      naturalHz: measured(point.naturalHz.value! + (i % 2 === 0 ? 0.02 : -0.02), 0.0005),
    }));
    const { line, notes } = comparisonOf(points);
    expect(line.widenedBy).toBeGreaterThan(5);
    expect(notes.join(' ')).toMatch(/scatter about the line more/);
  });

  it.each([
    ['nothing', [], /at least two different masses; there are none/],
    ['one point', [{ label: 'a', massKg: 1, naturalHz: measured(2) }], /there is one/],
    [
      'one without a frequency',
      [
        { label: 'bare', massKg: 1, naturalHz: measured(2) },
        { label: 'plus 200 g', massKg: 1.2, naturalHz: measured(null) },
      ],
      /No natural frequency: plus 200 g/,
    ],
    [
      'equal masses',
      [
        { label: 'a', massKg: 1, naturalHz: measured(2, 0.1) },
        { label: 'b', massKg: 1, naturalHz: measured(2.1, 0.1) },
      ],
      /same mass/,
    ],
    [
      'frequency growing with mass',
      [
        { label: 'a', massKg: 1, naturalHz: measured(2, 0.01) },
        { label: 'b', massKg: 2, naturalHz: measured(3, 0.01) },
      ],
      /does not grow with mass/,
    ],
  ])('%s: says what is missing', (_, points, sentence) => {
    const { comparison, reason } = compareMasses(points);
    expect(comparison).toBeNull();
    expect(reason).toMatch(sentence);
  });

  it('two points without uncertainties give values whose uncertainties are null', () => {
    const { stiffnessNPerM, effectiveMassKg, correlation, notes } = comparisonOf(
      pointsFor(lightSpringHz).slice(0, 2),
    );
    expect(stiffnessNPerM).toEqual({ value: expect.closeTo(120, 6), u: null });
    expect(effectiveMassKg.u).toBeNull();
    expect(correlation).toBeNull();
    expect(notes.join(' ')).toMatch(/third mass/);
  });
});

describe('springs combined', () => {
  it('300 and 600 N/m: 200 in series, 900 side by side (textbook)', () => {
    const springs = [measured(300, 3), measured(600, 6)];
    expect(seriesStiffness(springs).value).toBeCloseTo(200, 12);
    expect(parallelStiffness(springs).value).toBe(900);
    expect(parallelStiffness(springs).u).toBeCloseTo(Math.hypot(3, 6), 12);
    // d(series)/dk1 = (ks/k1)^2
    expect(seriesStiffness(springs).u).toBeCloseTo(Math.hypot((4 / 9) * 3, (1 / 9) * 6), 12);
  });

  it('an unknown spring leaves the set unknown', () => {
    expect(seriesStiffness([measured(300), measured(null)])).toEqual({ value: null, u: null });
    expect(parallelStiffness([])).toEqual({ value: null, u: null });
    expect(parallelStiffness([measured(300, 1), measured(600)])).toEqual({ value: 900, u: null });
  });
});
