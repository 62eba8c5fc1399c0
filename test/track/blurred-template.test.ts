import { expect, test } from 'vitest';
import { BlurRecovery } from '../../src/track/blur-recovery.ts';
import { blurTemplate } from '../../src/track/blurred-template.ts';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { drawField, drawImage, FINE, makeTexture, toImage } from './draw-texture.ts';

const SIZE = 81;
const texture = makeTexture(FINE, 3, 44);
const template = cutTemplate(drawImage(texture, SIZE, { x: 40, y: 40 }), 40.2, 39.9, { widthPx: 41 });

/** The texture drawn at many places along a line and averaged: an open shutter. */
function smeared(
  x: number,
  y: number,
  alongX: number,
  alongY: number,
  noiseDn = 0,
): ReturnType<typeof toImage> {
  const mean = new Float64Array(SIZE * SIZE);
  const moments = 24;
  for (let k = 0; k < moments; k++) {
    const share = (k + 0.5) / moments - 0.5;
    const field = drawField(texture, SIZE, SIZE, { x: x + share * alongX, y: y + share * alongY });
    for (let i = 0; i < mean.length; i++) mean[i]! += field[i]! / moments;
  }
  return toImage(mean, SIZE, noiseDn, 8);
}

test.each([
  [8, 0],
  [5, 3],
  [0, 6],
])(
  'a template smeared by (%d, %d) px fits the picture of a part that moved so during the exposure',
  (alongX, alongY) => {
    const image = smeared(40.6, 39.7, alongX, alongY);
    const sharp = new TranslationRegistrar(template).register(image, 40.8, 39.6);
    const length = Math.hypot(alongX, alongY);
    const blurred = blurTemplate(template, length, Math.atan2(alongY, alongX))!;
    expect(blurred.widthPx).toBe(41 - 2 * (Math.ceil(alongX / 2) + 2));
    expect(sharp.score).toBeLessThan(0.97);
    const found = new TranslationRegistrar(blurred).register(image, 40.8, 39.6);
    expect(found.score).toBeGreaterThan(0.999);
    expect(Math.hypot(found.x - 40.8, found.y - 39.6)).toBeLessThan(0.005);
  },
);

test('a smear longer than the patch leaves no template', () => {
  expect(blurTemplate(template, 30, 0)).toBeNull();
});

test('the smear is found from the step between frames, whatever share of it the shutter was open', () => {
  const recovery = new BlurRecovery(template);
  for (const [share, alongX] of [
    [0.5, 6],
    [1, 12],
    [0.25, 3],
  ] as const) {
    const fit = recovery.recover(smeared(40, 40, alongX, 0, 2), 40.2, 39.9, 12, 0.4, 0.985)!;
    expect(fit.blurPx, `shutter ${share}`).toBeCloseTo(alongX, 0);
    // The smeared patch is half as large and half as steep: 0.01 px of noise.
    expect(Math.abs(fit.registration.x - 40.2)).toBeLessThan(0.05);
  }
});

test('a covered marker is not explained by a smear, nor a still one looked at', () => {
  const recovery = new BlurRecovery(template);
  const image = smeared(40, 40, 6, 0, 2);
  for (let y = 0; y < SIZE; y++) for (let x = 40; x < SIZE; x++) image.data[y * SIZE + x] = 90;
  expect(recovery.recover(image, 40.2, 39.9, 12, 0, 0.97)).toBeNull();
  expect(recovery.recover(smeared(40, 40, 6, 0), 40.2, 39.9, 0.5, 0, 0.97)).toBeNull();
});
