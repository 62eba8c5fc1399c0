import { describe, expect, test } from 'vitest';
import { linearLeastSquares } from '../../src/numeric/linear-algebra.ts';
import { covarianceFrom, propagate, secondOrderVariance } from '../../src/numeric/uncertainty-propagation.ts';
import gum from '../data/gum.json' with { type: 'json' };

const { H1, H2, H3 } = gum;

/** Means of simultaneous readings, and the covariance of the means. */
function meansOf(readings: readonly (readonly number[])[]): { mean: Float64Array; covariance: Float64Array } {
  const n = readings[0]?.length ?? 0;
  const m = readings.length;
  const mean = Float64Array.from(readings, (row) => row.reduce((a, b) => a + b, 0) / n);
  const covariance = new Float64Array(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = 0; b < m; b++) {
      for (let k = 0; k < n; k++) {
        covariance[a * m + b]! +=
          ((readings[a]![k]! - mean[a]!) * (readings[b]![k]! - mean[b]!)) / (n * (n - 1));
      }
    }
  }
  return { mean, covariance };
}

/** Resistance, reactance and impedance of JCGM 100 H.2 from volts, amperes and radians. */
function impedance(x: Float64Array): Float64Array {
  const [v, i, phi] = [x[0]!, x[1]!, x[2]!];
  return Float64Array.of((v / i) * Math.cos(phi), (v / i) * Math.sin(phi), v / i);
}

describe('JCGM 100:2008 H.2, simultaneous resistance and reactance (results recomputed unrounded with numpy)', () => {
  test('from the five raw triplets', () => {
    const { mean, covariance } = meansOf([H2.V, H2.I_mA.map((mA) => mA / 1000), H2.phi]);
    const out = propagate(impedance, mean, covariance);
    for (const [k, y, u] of [
      [0, 127.73217, 0.0710714],
      [1, 219.84651, 0.2955817],
      [2, 254.2597, 0.2363361],
    ] as const) {
      expect(out.y[k]! / y).toBeCloseTo(1, 7);
      expect(out.u[k]! / u).toBeCloseTo(1, 6);
    }
    expect(out.correlation[1]).toBeCloseTo(-0.58843, 6);
    expect(out.correlation[2]).toBeCloseTo(-0.485259, 6);
    expect(out.correlation[5]).toBeCloseTo(0.992512, 6);
    expect(out.correlation[5]).toBe(out.correlation[7]);
  });

  test('from the rounded means, uncertainties and correlations of the printed table', () => {
    const u = Float64Array.of(0.0032, 0.0095e-3, 0.00075);
    const correlation = Float64Array.of(1, -0.36, 0.86, -0.36, 1, -0.65, 0.86, -0.65, 1);
    const out = propagate(
      impedance,
      Float64Array.of(4.999, 19.661e-3, 1.04446),
      covarianceFrom(u, correlation),
    );
    [0.0699787, 0.2957168, 0.236603].forEach((expected, k) => {
      expect(out.u[k]! / expected).toBeCloseTo(1, 6);
    });
    expect(out.correlation[1]).toBeCloseTo(-0.591485, 6);
    expect(out.correlation[2]).toBeCloseTo(-0.490624, 6);
    expect(out.correlation[5]).toBeCloseTo(0.992797, 6);
  });
});

describe('JCGM 100:2008 H.1, end-gauge calibration', () => {
  // inputs: ls, d, dalpha, theta, alpha_s, dtheta
  const model = (x: Float64Array): number => x[0]! + x[1]! - x[0]! * (x[2]! * x[3]! + x[4]! * x[5]!);
  const x = Float64Array.of(
    H1.ls.x,
    H1.d0.x + H1.d1.x + H1.d2.x,
    H1.dalpha.x,
    H1.thbar.x + H1.Delta.x,
    H1.alpha_s.x,
    H1.dtheta.x,
  );
  const u = Float64Array.of(
    H1.ls.u,
    Math.hypot(H1.d0.u, H1.d1.u, H1.d2.u),
    H1.dalpha.half_width / Math.sqrt(3),
    Math.hypot(H1.thbar.u, H1.Delta.half_width / Math.SQRT2),
    H1.alpha_s.half_width / Math.sqrt(3),
    H1.dtheta.half_width / Math.sqrt(3),
  );
  const out = propagate((v) => Float64Array.of(model(v)), x, covarianceFrom(u));

  test('length 50.000838 mm, combined standard uncertainty 31.663879 nm (printed 32)', () => {
    expect((out.y[0]! * 1e-6).toFixed(6)).toBe(H1.printed.l_mm.toFixed(6));
    expect(out.u[0]! / 31.663879).toBeCloseTo(1, 6);
  });

  test('the thermal terms alone: 2.886787 and 16.599027 nm', () => {
    expect(Math.abs(out.sensitivities[2]! * u[2]!) / 2.886787).toBeCloseTo(1, 6);
    expect(Math.abs(out.sensitivities[5]! * u[5]!) / 16.599027).toBeCloseTo(1, 6);
  });

  test('with second-order terms 33.806545 nm (printed 34)', () => {
    const total = Math.sqrt(out.u[0]! ** 2 + secondOrderVariance(model, x, u));
    expect(total / 33.806545).toBeCloseTo(1, 6);
  });
});

test('JCGM 100:2008 H.3, straight line: prediction at 30 degrees with correlated coefficients', () => {
  const n = H3.t.length;
  const design = Float64Array.from({ length: 2 * n }, (_, k) =>
    k % 2 === 0 ? 1 : H3.t[Math.floor(k / 2)]! - H3.t0,
  );
  const fit = linearLeastSquares(design, n, 2, Float64Array.from(H3.b));
  if (fit === null) throw new Error('the line is determined');
  const variance = fit.residualSumOfSquares / fit.degreesOfFreedom;
  const covariance = fit.unscaledCovariance.map((v) => v * variance);
  expect(fit.coefficients[0]).toBeCloseTo(-0.17120379, 8);
  expect(fit.coefficients[1]).toBeCloseTo(0.0021827, 8);
  expect(Math.sqrt(covariance[0]!)).toBeCloseTo(0.0028776, 8);
  expect(Math.sqrt(covariance[3]!)).toBeCloseTo(0.00066794, 8);
  const atThirty = propagate(
    (c) => Float64Array.of(c[0]! + c[1]! * (30 - H3.t0)),
    fit.coefficients,
    covariance,
  );
  expect(atThirty.y[0]).toBeCloseTo(-0.14937681, 8);
  expect(atThirty.u[0]).toBeCloseTo(0.0041386, 8);
});

describe('second order, where the first says nothing (closed forms for a normal variable)', () => {
  test('the variance of x^2 at x = 0 is 2 u^4, and at x = 3 it is 4 x^2 u^2 + 2 u^4', () => {
    const square = (x: Float64Array): number => x[0]! ** 2;
    expect(secondOrderVariance(square, Float64Array.of(0), Float64Array.of(0.5))).toBeCloseTo(0.125, 12);
    const first = propagate((x) => Float64Array.of(square(x)), Float64Array.of(3), Float64Array.of(0.25));
    const total = first.u[0]! ** 2 + secondOrderVariance(square, Float64Array.of(3), Float64Array.of(0.5));
    expect(total).toBeCloseTo(4 * 9 * 0.25 + 2 * 0.0625, 8);
  });

  test('the variance of a product of two independent zero-mean variables is the product of theirs', () => {
    const product = (x: Float64Array): number => x[0]! * x[1]!;
    expect(secondOrderVariance(product, Float64Array.of(0, 0), Float64Array.of(0.3, 0.2))).toBeCloseTo(
      0.0036,
      12,
    );
  });
});

test('an exactly known input brings nothing, and a fully correlated pair can cancel', () => {
  const difference = (x: Float64Array): Float64Array => Float64Array.of(x[0]! - x[1]!);
  const exact = propagate(difference, Float64Array.of(5, 3), covarianceFrom(Float64Array.of(0.2, 0)));
  expect(exact.u[0]).toBeCloseTo(0.2, 10);
  const together = covarianceFrom(Float64Array.of(0.2, 0.2), Float64Array.of(1, 1, 1, 1));
  expect(propagate(difference, Float64Array.of(5, 3), together).u[0]).toBeLessThan(1e-6);
});

test('lengths that disagree are our own mistake', () => {
  expect(() => propagate((x) => x, Float64Array.of(1, 2), Float64Array.of(1))).toThrow(/covariance/);
  expect(() => covarianceFrom(Float64Array.of(1, 2), Float64Array.of(1))).toThrow(/n x n/);
});
