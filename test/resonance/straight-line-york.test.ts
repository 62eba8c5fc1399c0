import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lineValue } from '../../src/resonance/compare-line-band.ts';
import {
  fitStraightLine,
  type LinePoints,
  type StraightLine,
} from '../../src/resonance/straight-line-york.ts';
import gum from '../data/gum.json' with { type: 'json' };
import norris from '../data/norris.json' with { type: 'json' };
import york from '../data/york.json' with { type: 'json' };
import { seededNormal } from '../plan/seeded-random.ts';

function lineOf(points: LinePoints, scatter: 'keep' | 'widen' = 'keep'): StraightLine {
  const { line, reason } = fitStraightLine(points, { scatter });
  if (line === null) throw new Error(reason);
  return line;
}

const relative = (got: number | null, want: number) => Math.abs((got ?? Number.NaN) / want - 1);

const pearson: LinePoints = {
  x: york.x,
  y: york.y,
  uX: york.wx.map((w) => 1 / Math.sqrt(w)),
  uY: york.wy.map((w) => 1 / Math.sqrt(w)),
};

describe('straight line with errors in both coordinates', () => {
  it("Pearson's data with York's weights, as printed by York et al., Am. J. Phys. 72 (2004) 367", () => {
    const line = lineOf(pearson);
    expect(line.method).toBe('york');
    expect(relative(line.intercept, york.expected.intercept)).toBeLessThan(1e-7);
    expect(relative(line.slope, york.expected.slope)).toBeLessThan(1e-7);
    expect(relative(line.uIntercept, york.expected.u_intercept)).toBeLessThan(1e-7);
    expect(relative(line.uSlope, york.expected.u_slope)).toBeLessThan(1e-7);
    expect(relative(line.chi2, york.expected.chi2)).toBeLessThan(1e-7);
    expect(line.dof).toBe(8);
    expect(line.chi2Probability).toBeCloseTo(0.157, 3); // scipy.stats.chi2.sf(11.8663532, 8)
  });

  it('identity: with x and y exchanged it is the same line, its slope the reciprocal', () => {
    const line = lineOf(pearson);
    const turned = lineOf({ x: york.y, y: york.x, uX: pearson.uY!, uY: pearson.uX! });
    expect(relative(turned.slope, 1 / line.slope)).toBeLessThan(1e-9);
    expect(relative(turned.intercept, -line.intercept / line.slope)).toBeLessThan(1e-9);
    expect(relative(turned.chi2, line.chi2!)).toBeLessThan(1e-9);
  });

  it('identity: y + s x in place of y makes correlated errors, adds s to the slope and moves nothing else', () => {
    const shear = 0.7;
    const line = lineOf(pearson);
    const uX = Array.from(pearson.uX!);
    const uSheared = Array.from(pearson.uY!, (u, i) => Math.hypot(u, shear * uX[i]!));
    const sheared = lineOf({
      x: york.x,
      y: york.y.map((y, i) => y + shear * york.x[i]!),
      uX,
      uY: uSheared,
      correlation: uX.map((u, i) => (shear * u) / uSheared[i]!),
    });
    expect(relative(sheared.slope, line.slope + shear)).toBeLessThan(1e-9);
    expect(relative(sheared.intercept, line.intercept)).toBeLessThan(1e-9);
    expect(relative(sheared.uSlope, line.uSlope!)).toBeLessThan(1e-9);
    expect(relative(sheared.uIntercept, line.uIntercept!)).toBeLessThan(1e-9);
    expect(relative(sheared.covariance, line.covariance!)).toBeLessThan(1e-9);
  });

  it('identity: units of x and y scale the line and its uncertainties and nothing else', () => {
    const line = lineOf(pearson);
    fc.assert(
      fc.property(
        fc.double({ min: -8, max: 8, noNaN: true }),
        fc.double({ min: -8, max: 8, noNaN: true }),
        (a, b) => {
          const [sx, sy] = [10 ** a, 10 ** b];
          const scaled = lineOf({
            x: york.x.map((v) => v * sx),
            y: york.y.map((v) => v * sy),
            uX: Array.from(pearson.uX!, (v) => v * sx),
            uY: Array.from(pearson.uY!, (v) => v * sy),
          });
          expect(relative(scaled.slope, (line.slope * sy) / sx)).toBeLessThan(1e-9);
          expect(relative(scaled.uSlope, (line.uSlope! * sy) / sx)).toBeLessThan(1e-9);
          expect(relative(scaled.chi2, line.chi2!)).toBeLessThan(1e-9);
        },
      ),
      { numRuns: 40, seed: 11 },
    );
  });

  it('NIST Norris, certified intercept, slope, standard errors and residual sd (no uncertainties given)', () => {
    const line = lineOf({ x: norris.x, y: norris.y });
    expect(line.method).toBe('unweighted');
    expect(relative(line.intercept, -0.262323073774029)).toBeLessThan(1e-9);
    expect(relative(line.slope, 1.00211681802045)).toBeLessThan(1e-9);
    expect(relative(line.uIntercept, 0.232818234301152)).toBeLessThan(1e-9);
    expect(relative(line.uSlope, 4.29796848199937e-4)).toBeLessThan(1e-9);
    expect(relative(line.residualSd, 0.884796396144373)).toBeLessThan(1e-9);
  });

  it('GUM annex H.3, thermometer calibration: line, correlation and the correction at 30 degrees', () => {
    const line = lineOf({ x: gum.H3.t.map((t) => t - gum.H3.t0), y: gum.H3.b });
    expect(line.intercept).toBeCloseTo(-0.17120379, 8);
    expect(line.uIntercept).toBeCloseTo(0.0028776, 7);
    expect(line.slope).toBeCloseTo(0.0021827, 7);
    expect(line.uSlope).toBeCloseTo(0.00066794, 8);
    expect(line.covariance! / (line.uIntercept! * line.uSlope!)).toBeCloseTo(-0.93043, 6);
    expect(line.residualSd).toBeCloseTo(0.00349756, 8);
    const at30 = lineValue(line, 10);
    expect(at30.value).toBeCloseTo(-0.14937681, 8);
    expect(at30.u).toBeCloseTo(0.0041386, 7);
    expect(at30.k).toBeCloseTo(2.262157, 6); // t factor, 95 %, nine degrees of freedom (scipy.stats.t.ppf)
    expect(at30.extrapolated).toBe(true);
  });

  it('seeded simulation: the 95 % intervals of a line with errors in both hold the truth in 92 to 98 %', () => {
    const normal = seededNormal(5);
    const runs = 800;
    let slopeHeld = 0;
    let valueHeld = 0;
    for (let run = 0; run < runs; run++) {
      const truth = [0, 1, 2, 3, 4, 5, 6, 7];
      const line = lineOf({
        x: truth.map((x) => x + 0.1 * normal()),
        y: truth.map((x) => 1 + 0.5 * x + 0.08 * normal()),
        uX: truth.map(() => 0.1),
        uY: truth.map(() => 0.08),
      });
      if (Math.abs(line.slope - 0.5) < 1.96 * line.uSlope!) slopeHeld++;
      const value = lineValue(line, 3);
      if (value.low! < 2.5 && value.high! > 2.5) valueHeld++;
    }
    expect(slopeHeld / runs).toBeGreaterThan(0.92);
    expect(slopeHeld / runs).toBeLessThan(0.98);
    expect(valueHeld / runs).toBeGreaterThan(0.92);
    expect(valueHeld / runs).toBeLessThan(0.98);
  });

  it('widens the uncertainties by sqrt(chi2 / dof) where the scatter is beyond them, and says so', () => {
    const points = { x: [1, 2, 3, 4, 5], y: [1, 2.4, 2.7, 4.3, 4.8], uY: [0.1, 0.1, 0.1, 0.1, 0.1] };
    const kept = lineOf(points);
    const widened = lineOf(points, 'widen');
    expect(kept.widenedBy).toBe(1);
    expect(widened.widenedBy).toBeCloseTo(Math.sqrt(kept.chi2! / 3), 12);
    expect(widened.uSlope! / kept.uSlope!).toBeCloseTo(widened.widenedBy, 12);
    const plain = lineOf({ x: points.x, y: points.y }); // equal weights: then it is the line without any
    expect(widened.uSlope).toBeCloseTo(plain.uSlope!, 12);
    expect(widened.coverageDof).toBe(3);
  });

  it('finds the least chi2 where a first guess at the slope would have led elsewhere', () => {
    // errors in x far above those in y: the ordinary slope is flattened towards zero
    const normal = seededNormal(8);
    const truth = Array.from({ length: 60 }, (_, i) => i / 10);
    const line = lineOf({
      x: truth.map((x) => x + 1.5 * normal()),
      y: truth.map((x) => -4 * x + 0.5 * normal()),
      uX: truth.map(() => 1.5),
      uY: truth.map(() => 0.5),
    });
    expect(Math.abs(line.slope + 4)).toBeLessThan(3 * line.uSlope!);
  });
});

describe('points that give no line', () => {
  it.each([
    ['no point', { x: [], y: [] }, /at least two/],
    ['one point', { x: [1], y: [2] }, /at least two/],
    ['equal x', { x: [3, 3, 3], y: [1, 2, 3], uY: [0.1, 0.1, 0.1] }, /same x/],
    [
      'some uncertainties zero',
      { x: [1, 2, 3], y: [1, 2, 3], uY: [0.1, 0, 0.1] },
      /every point one, or none/,
    ],
    [
      'x lost in its uncertainty',
      { x: [3, 3.01, 3.02], y: [1, 9, 2], uX: [1, 1, 1], uY: [0.01, 0.01, 0.01] },
      /by more than/,
    ],
  ])('%s: says what is missing', (_, points, sentence) => {
    const { line, reason } = fitStraightLine(points);
    expect(line).toBeNull();
    expect(reason).toMatch(sentence);
  });

  it('two points without uncertainties give a line whose uncertainty is null, not zero', () => {
    const line = lineOf({ x: [1, 2], y: [3, 5] });
    expect([line.intercept, line.slope]).toEqual([expect.closeTo(1, 12), expect.closeTo(2, 12)]);
    expect([line.uSlope, line.uIntercept, line.covariance, line.residualSd]).toEqual([
      null,
      null,
      null,
      null,
    ]);
    expect(lineValue(line, 1.5)).toMatchObject({ u: null, low: null, high: null, extrapolated: false });
  });

  it('two points with uncertainties give the slope that error propagation gives', () => {
    const line = lineOf({ x: [0, 2], y: [1, 5], uY: [0.3, 0.4] });
    expect(line.slope).toBeCloseTo(2, 12);
    expect(line.uSlope).toBeCloseTo(0.25, 12); // hypot(0.3, 0.4) / 2
  });

  it('refuses arrays of different length and values that are not numbers as mistakes of the caller', () => {
    expect(() => fitStraightLine({ x: [1, 2], y: [1] })).toThrow(/one length/);
    expect(() => fitStraightLine({ x: [1, 2], y: [1, Number.NaN] })).toThrow(/finite/);
    expect(() => fitStraightLine({ x: [1, 2], y: [1, 2], uY: [1, -1] })).toThrow(/negative/);
  });
});
