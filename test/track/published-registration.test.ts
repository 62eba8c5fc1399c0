import { describe, expect, test } from 'vitest';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';
import { shiftBoundPx } from '../../src/track/registration-uncertainty.ts';
import speckle from '../data/speckle.json' with { type: 'json' };
import { toImage } from './draw-texture.ts';
import { seededRandom } from './seeded-random.ts';

/** The speckle field moved by (u, v), 0 to 200 DN, point-sampled. */
function speckleField(u: number, v: number): Float64Array {
  const { size, R, xk, yk, I0 } = speckle;
  const draw = (shiftX: number, shiftY: number): Float64Array =>
    Float64Array.from({ length: size * size }, (_, i) => {
      let sum = 0;
      for (let k = 0; k < xk.length; k++) {
        const dx = (i % size) - xk[k]! - shiftX;
        const dy = Math.floor(i / size) - yk[k]! - shiftY;
        sum += I0[k]! * Math.exp(-(dx * dx + dy * dy) / (R * R));
      }
      return sum;
    });
  const scale = 200 / Math.max(...draw(0, 0));
  return draw(u, v).map((value) => value * scale);
}

/** Sixteen bits, so that rounding does not hide what interpolation does. */
function exactImage(field: Float64Array): LumaImage {
  return toImage(field, Math.sqrt(field.length), 0, 1, 65535);
}

describe('inverse-compositional Gauss-Newton on a 31 x 31 subset of an analytic speckle field', () => {
  const reference = exactImage(speckleField(0, 0));
  const shifts = [0.1, 0.25, 0.5, 0.75, 0.9];
  const shifted = shifts.map((u) => exactImage(speckleField(u, 0)));

  // Method: Baker and Matthews 2004, Pan et al. 2013; the S-shaped bias: Schreier et al. 2000; values derived.
  test('cubic B-spline: the S-shaped bias by interpolation is below 8e-4 px and as derived', () => {
    const derived = [2.9e-4, 4.7e-4, 5e-6, -4.6e-4, -2.9e-4];
    const registrar = new TranslationRegistrar(
      cutTemplate(reference, 40, 40, { widthPx: 31, smoothed: false }),
      { marginPx: 12, stopPx: 1e-8 },
    );
    shifts.forEach((u, k) => {
      const found = registrar.register(shifted[k]!, 40, 40);
      expect(found.converged).toBe(true);
      expect(Math.abs(found.x - 40 - u)).toBeLessThan(8e-4);
      expect(Math.abs(found.x - 40 - u - derived[k]!)).toBeLessThan(1e-4);
      expect(found.iterations).toBeLessThanOrEqual(8);
    });
  });

  test('smoothing once by [1 2 1] takes a quarter of that bias away', () => {
    const registrar = new TranslationRegistrar(cutTemplate(reference, 40, 40, { widthPx: 31 }), {
      stopPx: 1e-8,
    });
    const errors = shifts.map((u, k) => registrar.register(shifted[k]!, 40, 40).x - 40 - u);
    for (const error of errors) expect(Math.abs(error)).toBeLessThan(4e-4);
    expect(Math.hypot(...errors)).toBeLessThan(0.75 * Math.hypot(2.9e-4, 4.7e-4, 5e-6, 4.6e-4, 2.9e-4));
  });

  // Pan et al. 2008, Opt. Express 16, 7037; prediction 0.010089 px and Monte Carlo 0.0094 px derived.
  test('noise of 2 DN in both frames gives sqrt(2) sigma / sqrt(sum of gx squared) within 12 %', () => {
    const size = speckle.size;
    const [still, moved] = [speckleField(0, 0), speckleField(0.3, 0)];
    const gradient = new Float64Array(31 * 31);
    for (let i = 0; i < gradient.length; i++) {
      const at = (25 + Math.floor(i / 31)) * size + 25 + (i % 31);
      // Fourth order: the field is smooth enough for it.
      gradient[i] = (8 * (still[at + 1]! - still[at - 1]!) - (still[at + 2]! - still[at - 2]!)) / 12;
    }
    const predicted = Math.SQRT2 * shiftBoundPx(2, gradient)!;
    expect(predicted).toBeCloseTo(0.010089, 5);
    let sum = 0;
    let squares = 0;
    const trials = 300;
    for (let k = 0; k < trials; k++) {
      const template = cutTemplate(toImage(still, size, 2, 2 * k + 1), 40, 40, {
        widthPx: 31,
        smoothed: false,
      });
      const error =
        new TranslationRegistrar(template).register(toImage(moved, size, 2, 2 * k + 2), 40, 40).x - 40.3;
      sum += error;
      squares += error * error;
    }
    const deviation = Math.sqrt((squares - (sum * sum) / trials) / (trials - 1));
    expect(Math.abs(deviation / predicted - 1)).toBeLessThan(0.12);
  });
});

describe('a Gaussian spot', () => {
  const spot = (x: number, y: number, sigma: number, size: number): Float64Array =>
    Float64Array.from({ length: size * size }, (_, i) => {
      const dx = (i % size) - x;
      const dy = Math.floor(i / size) - y;
      return 60 + 100 * Math.exp(-(dx * dx + dy * dy) / (2 * sigma * sigma));
    });

  // Robinson and Milanfar 2004; the closed form sqrt(2 / pi) sigma / A derived.
  test('of amplitude 100 in noise of 2 DN can be placed within 0.015957691 px, whatever its width', () => {
    for (const sigma of [2, 3, 4.5]) {
      const size = 61;
      const gradient = spot(30, 30, sigma, size).map(
        (value, i) => (-(value - 60) * ((i % size) - 30)) / (sigma * sigma),
      );
      expect(shiftBoundPx(2, gradient)).toBeCloseTo(0.015957691, 8);
    }
    expect(shiftBoundPx(2, new Float64Array(9))).toBeNull();
  });

  test('is placed within 6 % of that bound by registration against a clean template', () => {
    const size = 51;
    const template = cutTemplate(exactImage(spot(25, 25, 2, size)), 25, 25, { widthPx: 31, smoothed: false });
    const registrar = new TranslationRegistrar(template);
    const random = seededRandom(3);
    let squares = 0;
    const trials = 800;
    for (let k = 0; k < trials; k++) {
      const [x, y] = [24.5 + random.uniform(), 24.5 + random.uniform()];
      const found = registrar.register(toImage(spot(x, y, 2, size), size, 2, 100 + k, 65535), 25, 25);
      squares += ((found.x - x) ** 2 + (found.y - y) ** 2) / 2;
    }
    const ratio = Math.sqrt(squares / trials) / 0.015957691;
    expect(Math.abs(ratio - 1)).toBeLessThan(0.06);
  });

  // Peak locking of the parabola through three points of a correlation peak of width w, derived; true shift 0.25.
  test.each([
    [2, -0.011649],
    [3, -0.005196],
  ])(
    'a parabola through a correlation peak of width %d is off by %d px, registration by a twentieth of that at most',
    (width, bias) => {
      const size = 61;
      const sigma = width / Math.SQRT2;
      const still = spot(30, 30, sigma, size);
      const moved = spot(30.25, 30, sigma, size);
      const correlation = (lag: number): number => {
        let sum = 0;
        for (let i = 0; i < size * size - 2; i++) sum += (still[i]! - 60) * ((moved[i + lag] ?? 60) - 60);
        return sum;
      };
      const [before, at, after] = [correlation(-1), correlation(0), correlation(1)] as [
        number,
        number,
        number,
      ];
      const parabola = (before - after) / (2 * (before - 2 * at + after));
      expect(parabola - 0.25).toBeCloseTo(bias, 5);
      const registrar = new TranslationRegistrar(cutTemplate(exactImage(still), 30, 30, { widthPx: 31 }), {
        stopPx: 1e-8,
      });
      const error = registrar.register(exactImage(moved), 30, 30).x - 30.25;
      expect(Math.abs(error)).toBeLessThan(Math.abs(bias) / 20);
    },
  );
});
