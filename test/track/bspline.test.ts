import { describe, expect, test } from 'vitest';
import {
  cubicDerivativeWeights,
  cubicWeights,
  DIRECT_FILTER_GAIN,
  filterColumns,
  filterRows,
} from '../../src/track/bspline.ts';
import { seededRandom } from './seeded-random.ts';

const WIDTH = 64;
const HEIGHT = 51;

function coefficientsOf(at: (x: number, y: number) => number): Float64Array {
  const image = Float64Array.from({ length: WIDTH * HEIGHT }, (_, i) => at(i % WIDTH, Math.floor(i / WIDTH)));
  filterColumns(image, WIDTH, HEIGHT);
  filterRows(image, WIDTH, HEIGHT);
  return image.map((value) => value * DIRECT_FILTER_GAIN ** 2);
}

function sample(coefficients: Float64Array, x: number, y: number): number {
  const weightsX = new Float64Array(4);
  const weightsY = new Float64Array(4);
  cubicWeights(x - Math.floor(x), weightsX);
  cubicWeights(y - Math.floor(y), weightsY);
  let sum = 0;
  for (let j = 0; j < 4; j++) {
    for (let k = 0; k < 4; k++) {
      const at = (Math.floor(y) - 1 + j) * WIDTH + Math.floor(x) - 1 + k;
      sum += weightsX[k]! * weightsY[j]! * coefficients[at]!;
    }
  }
  return sum;
}

describe('cubic B-splines (Unser 1999)', () => {
  test('interpolate: at pixels they give the pixels back', () => {
    const random = seededRandom(1);
    const pixels = Float64Array.from({ length: WIDTH * HEIGHT }, () => 255 * random.uniform());
    const coefficients = coefficientsOf((x, y) => pixels[y * WIDTH + x]!);
    for (let y = 1; y < HEIGHT - 2; y++) {
      for (let x = 1; x < WIDTH - 2; x++)
        expect(sample(coefficients, x, y)).toBeCloseTo(pixels[y * WIDTH + x]!, 9);
    }
  });

  test('reproduce cubic polynomials between pixels, away from the borders', () => {
    const cubic = (x: number): number => 0.002 * x ** 3 - 0.1 * x * x + x + 5;
    const coefficients = coefficientsOf((x, y) => cubic(x) + cubic(y) + 0.01 * x * y);
    for (const [x, y] of [
      [30.25, 22.5],
      [31.9, 25.01],
      [29.5, 24.75],
    ] as const) {
      expect(sample(coefficients, x, y)).toBeCloseTo(cubic(x) + cubic(y) + 0.01 * x * y, 6);
    }
  });

  test('borders fade by the pole, 0.268 a pixel: 12 pixels in, less than 1e-5 of the picture is left of them', () => {
    const random = seededRandom(2);
    const pixels = Float64Array.from({ length: WIDTH * HEIGHT }, () => 255 * random.uniform());
    const whole = coefficientsOf((x, y) => pixels[y * WIDTH + x]!);
    const changed = coefficientsOf((x, y) => (x === 0 ? 0 : pixels[y * WIDTH + x]!));
    const difference = Math.abs(sample(whole, 12.5, 25.5) - sample(changed, 12.5, 25.5));
    expect(difference).toBeGreaterThan(0);
    expect(difference).toBeLessThan(255e-5);
  });
});

test('the weights sum to 1, the derivative weights to 0 and are the derivatives', () => {
  const [at, ahead, behind, slopes] = [0, 1, 2, 3].map(() => new Float64Array(4)) as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  for (const fraction of [0.01, 0.3, 0.5, 0.99]) {
    cubicWeights(fraction, at);
    cubicWeights(fraction + 1e-6, ahead);
    cubicWeights(fraction - 1e-6, behind);
    cubicDerivativeWeights(fraction, slopes);
    expect(at.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(1, 14);
    expect(slopes.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(0, 14);
    for (let k = 0; k < 4; k++) expect(slopes[k]).toBeCloseTo((ahead[k]! - behind[k]!) / 2e-6, 8);
  }
});
