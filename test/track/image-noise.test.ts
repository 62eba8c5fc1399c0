import { expect, test } from 'vitest';
import { imageNoiseDn, roundingNoiseDn } from '../../src/track/image-noise.ts';
import { derivativeNoiseGain, interpolatedNoiseGain } from '../../src/track/spline-noise-gain.ts';
import { drawImage, FINE, makeTexture, SOFT, toImage } from './draw-texture.ts';

const SIZE = 192;

test.each([1, 2, 4, 8])(
  'noise of %d DN drawn on a soft texture and on shading is found within a tenth',
  (noiseDn) => {
    const soft = drawImage(makeTexture(SOFT, 1, 100), SIZE, { x: 96, y: 96, noiseDn }, 5);
    expect(Math.abs(imageNoiseDn(soft) / Math.hypot(noiseDn, Math.sqrt(1 / 12)) - 1)).toBeLessThan(0.1);
    const shading = Float64Array.from({ length: SIZE * SIZE }, (_, i) => 40 + 0.6 * (i % SIZE));
    const shaded = toImage(shading, SIZE, noiseDn, 6);
    expect(Math.abs(imageNoiseDn(shaded) / Math.hypot(noiseDn, Math.sqrt(1 / 12)) - 1)).toBeLessThan(0.1);
  },
);

test('texture finer than the noise estimate can see passes for at most 1 DN of noise', () => {
  expect(imageNoiseDn(drawImage(makeTexture(FINE, 1, 100), SIZE, { x: 96, y: 96 }))).toBeLessThan(1);
});

test('a clean, a clipped and a tiny picture have the noise of rounding: one step over root 12', () => {
  const flat = { data: new Uint8Array(64 * 64).fill(80), width: 64, height: 64, maxValue: 255 };
  expect(imageNoiseDn(flat)).toBeCloseTo(1 / Math.sqrt(12), 12);
  expect(imageNoiseDn({ ...flat, data: flat.data.map(() => 255) })).toBeCloseTo(1 / Math.sqrt(12), 12);
  expect(imageNoiseDn({ data: new Uint8Array(64), width: 8, height: 8, maxValue: 255 })).toBeCloseTo(
    1 / Math.sqrt(12),
    12,
  );
  expect(roundingNoiseDn(1023)).toBeCloseTo(255 / 1023 / Math.sqrt(12), 12);
});

test('identity: ten bits and eight bits of the same noise give the same estimate', () => {
  const field = new Float64Array(SIZE * SIZE).fill(100);
  const eight = imageNoiseDn(toImage(field, SIZE, 3, 9));
  // Eight bits carry the rounding of a whole step, 1.4 % here.
  expect(Math.abs(imageNoiseDn(toImage(field, SIZE, 3, 9, 1023)) / eight - 1)).toBeLessThan(0.02);
});

test('only the area asked for is judged', () => {
  const left = toImage(new Float64Array(SIZE * SIZE).fill(100), SIZE, 1, 2);
  const right = toImage(new Float64Array(SIZE * SIZE).fill(100), SIZE, 5, 3);
  const data = left.data.map((value, i) => (i % SIZE < 96 ? value : right.data[i]!));
  const both = { ...left, data };
  expect(imageNoiseDn(both, { left: 96, top: 0, width: 96, height: SIZE })).toBeGreaterThan(4);
  expect(imageNoiseDn(both, { left: 0, top: 0, width: 96, height: SIZE })).toBeLessThan(1.2);
});

test('noise gains: 1 at pixels, 3/8 after [1 2 1] / 4; at half a pixel and of slopes as their frequency responses integrate', () => {
  expect(interpolatedNoiseGain(0, false)).toBeCloseTo(1, 12);
  expect(interpolatedNoiseGain(0, true)).toBeCloseTo(3 / 8, 12);
  expect(interpolatedNoiseGain(1, true)).toBeCloseTo(3 / 8, 12);
  // Integrals by another route: sums of squares of the filters' own impulse responses.
  const pole = Math.sqrt(3) - 2;
  const taps = Array.from({ length: 121 }, (_, k) => Math.sqrt(3) * pole ** Math.abs(k - 60));
  const convolve = (kernel: readonly number[]): number => {
    let sum = 0;
    for (let k = 0; k < taps.length + kernel.length - 1; k++) {
      let value = 0;
      for (let j = 0; j < kernel.length; j++) value += kernel[j]! * (taps[k - j] ?? 0);
      sum += value * value;
    }
    return sum;
  };
  expect(interpolatedNoiseGain(0.5, false)).toBeCloseTo(convolve([1 / 48, 23 / 48, 23 / 48, 1 / 48]), 9);
  expect(derivativeNoiseGain(false)).toBeCloseTo(convolve([-0.5, 0, 0.5]), 9);
});
