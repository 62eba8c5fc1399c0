import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { fitPolynomial, polynomialSlope, polynomialValue } from '../../src/resonance/compare-polynomial.ts';
import {
  compareSettings,
  type SettingPoint,
  type SettingTrend,
  type SettingTrendOptions,
  settingBand,
  settingFor,
  valueAtSetting,
} from '../../src/resonance/compare-settings.ts';
import { fitStraightLine } from '../../src/resonance/straight-line-york.ts';
import { seededNormal } from '../plan/seeded-random.ts';

function trendOf(points: SettingPoint[], options: SettingTrendOptions = {}): SettingTrend {
  const { result, reason } = compareSettings(points, options);
  if (result === null) throw new Error(reason);
  return result;
}

const pointsOf = (settings: number[], f: (x: number) => number, u: number | null): SettingPoint[] =>
  settings.map((setting) => ({ label: `gap ${setting}`, setting, value: measured(f(setting), u) }));

// NIST StRD data set Pontius (load cell calibration), from memory: the certified values come out of it
const PONTIUS_Y = [
  0.11019, 0.21956, 0.32949, 0.43899, 0.54803, 0.65694, 0.76562, 0.87487, 0.98292, 1.09146, 1.20001, 1.30822,
  1.41599, 1.52399, 1.63194, 1.73947, 1.84646, 1.95392, 2.06128, 2.16844, 0.11052, 0.22018, 0.32939, 0.43886,
  0.54798, 0.65739, 0.76596, 0.87474, 0.983, 1.0915, 1.20004, 1.30818, 1.41613, 1.52408, 1.63159, 1.73965,
  1.84696, 1.95445, 2.06177, 2.16829,
];
const PONTIUS_X = PONTIUS_Y.map((_, i) => 150000 * ((i % 20) + 1));

describe('polynomial trend', () => {
  it('NIST Pontius, certified quadratic: value, slope and residual sd', () => {
    const trend = fitPolynomial(PONTIUS_X, PONTIUS_Y, null, 2);
    if (trend === null) throw new Error('no trend');
    // at x = 0 value and slope are the certified B0 and B1 with their standard deviations
    const atZero = polynomialValue(trend, 0);
    const slope = polynomialSlope(trend, 0);
    expect(atZero.value / 0.673565789473684e-3).toBeCloseTo(1, 7);
    expect(atZero.u! / 0.107938612033077e-3).toBeCloseTo(1, 9);
    expect(slope.value / 0.732059160401003e-6).toBeCloseTo(1, 9);
    expect(slope.u! / 0.157817399981659e-9).toBeCloseTo(1, 9);
    expect(trend.residualSd! / 0.205177424076185e-3).toBeCloseTo(1, 9);
  });

  it('identity: of degree one it is the straight line with its covariance', () => {
    const x = [1, 2, 4, 7];
    const y = [0.02, 0.031, 0.048, 0.086];
    const uY = [0.001, 0.002, 0.002, 0.003];
    const trend = fitPolynomial(x, y, uY, 1)!;
    const { line } = fitStraightLine({ x, y, uY });
    expect(polynomialValue(trend, 0).value).toBeCloseTo(line!.intercept, 12);
    expect(polynomialValue(trend, 0).u).toBeCloseTo(line!.uIntercept!, 12);
    expect(polynomialSlope(trend, 3).u).toBeCloseTo(line!.uSlope!, 12);
    expect(trend.chi2).toBeCloseTo(line!.chi2!, 10);
  });
});

describe('a quantity against the setting', () => {
  const normal = seededNormal(3);

  it('a straight dependence stays a line, a bent one takes a bend (seeded)', () => {
    const settings = [2, 3, 4, 5, 6, 7, 8];
    const straight = trendOf(pointsOf(settings, (x) => 0.01 + 0.004 * x + 0.0003 * normal(), 0.0003));
    expect(straight.trend.degree).toBe(1);
    expect(straight.dependsOnSetting).toBe(true);
    expect(Math.abs(straight.slopeAtCentre.value! - 0.004)).toBeLessThan(3 * straight.slopeAtCentre.u!);
    const bent = trendOf(pointsOf(settings, (x) => 0.2 * Math.exp(-0.35 * x) + 0.0003 * normal(), 0.0003));
    expect(bent.trend.degree).toBeGreaterThan(1);
    expect(Math.abs(valueAtSetting(bent, 4.5).value - 0.2 * Math.exp(-0.35 * 4.5))).toBeLessThan(0.001);
  });

  it('seeded simulation: the 95 % band holds the truth, and a prediction band a further point, in 92 to 98 %', () => {
    const settings = [1, 2, 3, 4, 5, 6];
    const truth = (x: number) => 0.02 + 0.003 * x;
    const runs = 1500;
    let held = 0;
    let further = 0;
    for (let run = 0; run < runs; run++) {
      const result = trendOf(
        pointsOf(settings, (x) => truth(x) + 0.001 * normal(), null),
        { degree: 1 },
      );
      const value = valueAtSetting(result, 4.5);
      if (value.low! < truth(4.5) && truth(4.5) < value.high!) held++;
      const point = valueAtSetting(result, 4.5, { uOfNewPoint: result.trend.residualSd! });
      const measuredAgain = truth(4.5) + 0.001 * normal();
      if (point.low! < measuredAgain && measuredAgain < point.high!) further++;
    }
    expect(held / runs).toBeGreaterThan(0.92);
    expect(held / runs).toBeLessThan(0.98);
    expect(further / runs).toBeGreaterThan(0.92);
    expect(further / runs).toBeLessThan(0.98);
  });

  it('says that there is no dependence where there is none', () => {
    const flat = trendOf(
      pointsOf([1, 2, 3, 4, 5], () => 0.02, 0.001).map((p, i) => ({
        ...p,
        value: measured(0.02 + [0.0005, -0.0004, 0.0002, -0.0006, 0.0003][i]!, 0.001),
      })),
    );
    expect(flat.dependsOnSetting).toBe(false);
    expect(flat.notes.join(' ')).toMatch(/no dependence on the setting/);
  });

  it('uncertain settings widen the band as errors in both coordinates do', () => {
    const settings = [1, 2, 3, 4, 5];
    const points = pointsOf(settings, (x) => 0.01 + 0.01 * x, 0.0005).map((p) => ({ ...p, uSetting: 0.1 }));
    const result = trendOf(points, { degree: 1 });
    const { line } = fitStraightLine({
      x: settings,
      y: points.map((p) => p.value.value!),
      uX: settings.map(() => 0.1),
      uY: settings.map(() => 0.0005),
    });
    expect(result.slopeAtCentre.u).toBeCloseTo(line!.uSlope!, 9);
  });

  it('reads the setting for a wanted value, and none outside the range', () => {
    const result = trendOf(
      pointsOf([1, 2, 3, 4], (x) => 0.01 + 0.005 * x, 0.0002),
      { degree: 1 },
    );
    const setting = settingFor(result, 0.0225);
    expect(setting?.value).toBeCloseTo(2.5, 9);
    expect(setting?.u).toBeCloseTo(0.0001 / 0.005, 6); // mean of four, u / 2, over the slope
    expect(settingFor(result, 0.05)).toBeNull();
    const humped = trendOf(
      pointsOf([1, 2, 3, 4, 5], (x) => 1 - (x - 3) ** 2, 0.01),
      { degree: 2 },
    );
    expect(settingFor(humped, 0)).toBeNull(); // taken twice
  });

  it('band: narrowest inside, evenly spaced, ends included', () => {
    const band = settingBand(
      trendOf(
        pointsOf([1, 2, 3, 5], (x) => x, 0.1),
        { degree: 1 },
      ),
      5,
    );
    expect(band.map((b) => b.x)).toEqual([1, 2, 3, 4, 5]);
    expect(band[0]!.u!).toBeGreaterThan(band[2]!.u!);
    expect(band[4]!.u!).toBeGreaterThan(band[2]!.u!);
  });

  it('one setting only, and a configuration without a setting: says what is missing', () => {
    const same = compareSettings(
      pointsOf([4, 4], () => 0.02, 0.001),
      { quantity: 'damping ratio' },
    );
    expect(same.reason).toMatch(
      /damping ratio against the setting needs at least 2 different settings; there is 1/,
    );
    const lacking = compareSettings([
      { label: 'bare', setting: null, value: measured(0.02) },
      { label: 'gap 4', setting: 4, value: measured(null) },
    ]);
    expect(lacking.reason).toMatch(/Left out .* bare, gap 4/);
    expect(compareSettings([]).reason).toMatch(/are 0/);
  });

  it('two settings: a line without a check, and without uncertainties no band', () => {
    const result = trendOf(pointsOf([1, 2], (x) => x, null));
    expect(result.dependsOnSetting).toBeNull();
    expect(valueAtSetting(result, 1.5)).toMatchObject({ value: expect.closeTo(1.5, 12), u: null, low: null });
    expect(result.notes.join(' ')).toMatch(/passes through every point/);
  });
});
