import { expect, test } from 'vitest';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { markerFacts } from '../../src/track/marker-facts.ts';
import { drawImage, FINE, makeTexture, toImage } from './draw-texture.ts';

const SIZE = 81;

/** A Gaussian blob with a standard deviation for each axis. */
function blob(x: number, sigmaX: number, sigmaY: number, gain = 1, noiseDn = 0): ReturnType<typeof toImage> {
  const field = Float64Array.from({ length: SIZE * SIZE }, (_, i) => {
    const dx = (i % SIZE) - x;
    const dy = Math.floor(i / SIZE) - 40;
    return gain * (60 + 150 * Math.exp(-(dx * dx) / (2 * sigmaX ** 2) - (dy * dy) / (2 * sigmaY ** 2)));
  });
  return toImage(field, SIZE, noiseDn, 4);
}

test('identity: a blob of deviation 4 spread to 5 along x has 0.8 of its sharpness there and all of it along y', () => {
  const template = cutTemplate(blob(40, 4, 4), 40, 40, { widthPx: 61 });
  const facts = markerFacts({ image: blob(42.4, 5, 4), offsetX: 100, offsetY: 10 }, template, 142.4, 50)!;
  // The mean of the patch takes a little of the contrast: a wider blob more of it.
  expect(facts.sharpnessX).toBeCloseTo(0.8, 1);
  expect(facts.sharpnessY).toBeCloseTo(1, 1);
  expect(facts.saturatedFraction).toBe(0);
});

test('light and noise leave sharpness alone', () => {
  const texture = makeTexture(FINE, 3, 60);
  const template = cutTemplate(drawImage(texture, SIZE, { x: 40, y: 40, noiseDn: 2 }, 1), 40, 40, {
    widthPx: 41,
  });
  for (const noiseDn of [0, 2, 4]) {
    const image = drawImage(texture, SIZE, { x: 40.4, y: 39.7, gain: 0.7, mean: 90, noiseDn }, 2);
    const facts = markerFacts({ image, offsetX: 0, offsetY: 0 }, template, 40.4, 39.7, noiseDn)!;
    expect(Math.abs(facts.sharpnessX! - 1)).toBeLessThan(0.05);
    expect(Math.abs(facts.sharpnessY! - 1)).toBeLessThan(0.05);
  }
});

test('clipped pixels are counted, and a patch across the border is not judged', () => {
  const template = cutTemplate(blob(40, 4, 4), 40, 40, { widthPx: 41 });
  const bright = markerFacts({ image: blob(40, 4, 4, 3), offsetX: 0, offsetY: 0 }, template, 40, 40)!;
  // 3 (60 + 150 g) reaches 254 where g, the blob, is above this; there r squared is below 2 * 16 * ln(1 / g).
  const threshold = (254 / 3 - 60) / 150;
  const area = Math.PI * 32 * Math.log(1 / threshold);
  expect(bright.saturatedFraction).toBeCloseTo(area / 41 ** 2, 2);
  expect(markerFacts({ image: blob(40, 4, 4), offsetX: 0, offsetY: 0 }, template, 10, 40)).toBeNull();
});

test('a flat frame has no sharpness', () => {
  const template = cutTemplate(blob(40, 4, 4), 40, 40, { widthPx: 41 });
  const image = { data: new Uint8Array(SIZE * SIZE).fill(90), width: SIZE, height: SIZE, maxValue: 255 };
  expect(markerFacts({ image, offsetX: 0, offsetY: 0 }, template, 40, 40)).toMatchObject({
    sharpnessX: null,
    sharpnessY: null,
  });
});
