import { createRequire } from 'node:module';
import { describe, expect, test } from 'vitest';
import { correlatePlainly, type FloatImage } from '../../src/track/correlation-map.ts';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { findTemplate } from '../../src/track/find-template.ts';
import { correlateByOpenCv } from '../../src/track/opencv.ts';
import { searchCoarsely } from '../../src/track/search-image.ts';
import { drawField, drawImage, FINE, makeTexture, SOFT, toImage } from './draw-texture.ts';
import { seededRandom } from './seeded-random.ts';

// Taken before the first search loads OpenCV.
const handlersBefore = {
  uncaught: process.listeners('uncaughtException'),
  rejected: process.listeners('unhandledRejection'),
};

const WIDTH = 400;
const HEIGHT = 300;
const part = makeTexture(FINE, 3, 36);
const background = drawField(makeTexture({ sigma: [2, 7], contrastDn: 22 }, 8, 210), WIDTH, HEIGHT, {
  x: WIDTH / 2,
  y: HEIGHT / 2,
});

/** Parts on a background: squares of 64 px, textured alike. */
function scene(
  parts: readonly { x: number; y: number; angleRad?: number; gain?: number }[],
  noiseDn = 2,
  maxValue = 255,
): ReturnType<typeof toImage> {
  const field = Float64Array.from(background);
  for (const pose of parts) {
    const gain = pose.gain ?? 1;
    const drawn = drawField(part, WIDTH, HEIGHT, { ...pose, mean: 120 * gain });
    for (let i = 0; i < field.length; i++) {
      const [dx, dy] = [(i % WIDTH) - pose.x, Math.floor(i / WIDTH) - pose.y];
      if (Math.abs(dx) < 32 && Math.abs(dy) < 32) field[i] = drawn[i]!;
    }
  }
  return toImage(field, WIDTH, noiseDn, 17, maxValue);
}

const template = cutTemplate(scene([{ x: 100, y: 90 }]), 100.3, 90.2, { widthPx: 41 });

describe.each([
  ['findTemplate (matchTemplate)', findTemplate],
  ['searchCoarsely (plain sums)', searchCoarsely],
])('%s', (_name, search) => {
  test('finds the part where it stands elsewhere, to a few hundredths of a pixel, at odd and even places', () => {
    for (const [x, y] of [
      [250.4, 180.7],
      [251, 181],
      [60.5, 230],
    ] as const) {
      const found = search(scene([{ x, y }]), template)!;
      expect(Math.hypot(found.x - x - 0.3, found.y - y - 0.2)).toBeLessThan(0.03);
      expect(found.score).toBeGreaterThan(0.98);
      expect(found.ambiguous).toBe(false);
    }
  });

  test('in other light, at 10 bits, and turned by 4 degrees', () => {
    const darker = search(scene([{ x: 250.4, y: 180.7, gain: 0.6 }]), template)!;
    expect(Math.hypot(darker.x - 250.7, darker.y - 180.9)).toBeLessThan(0.05);
    expect(darker.gain).toBeCloseTo(0.6, 1);
    const tenBit = search(scene([{ x: 250.4, y: 180.7 }], 2, 1023), template)!;
    expect(Math.hypot(tenBit.x - 250.7, tenBit.y - 180.9)).toBeLessThan(0.03);
    expect(tenBit.gain).toBeCloseTo(1, 1);
    const turned = search(scene([{ x: 250.4, y: 180.7, angleRad: (4 * Math.PI) / 180 }]), template)!;
    expect(turned.score).toBeGreaterThan(0.97);
    expect(Math.hypot(turned.x - 250.7, turned.y - 180.9)).toBeLessThan(0.05);
  });

  test('says that two alike are ambiguous and where the second is, or keeps to the one near a point', () => {
    const twins = scene([
      { x: 100, y: 90 },
      { x: 280.5, y: 200 },
    ]);
    const found = search(twins, template)!;
    expect(found.ambiguous).toBe(true);
    const places = [found, found.second!].map(({ x }) => Math.round(x)).sort((a, b) => a - b);
    expect(places).toEqual([100, 281]);
    const near = search(twins, template, { near: { x: 285, y: 195, radiusPx: 20 } })!;
    expect(near.ambiguous).toBe(false);
    expect(near.x).toBeCloseTo(280.8, 1);
  });

  test('finds nothing where nothing is, in pictures too small, and not below the score asked for', () => {
    expect(search(scene([]), template)).toBeNull();
    expect(
      search(scene([{ x: 100, y: 90 }]), template, { near: { x: 300, y: 200, radiusPx: 40 } }),
    ).toBeNull();
    expect(search(drawImage(part, 30, { x: 15, y: 15 }), template)).toBeNull();
    expect(search(scene([{ x: 250, y: 180 }]), template, { minScore: 0.9999 })).toBeNull();
    const flat = { data: new Uint8Array(100 * 100).fill(77), width: 100, height: 100, maxValue: 255 };
    expect(search(flat, template)).toBeNull();
  });

  test('small patches are searched pixel by pixel', () => {
    const small = cutTemplate(scene([{ x: 100, y: 90 }]), 100, 90, { widthPx: 17 });
    const found = search(scene([{ x: 151.4, y: 120.2 }]), small, { near: { x: 150, y: 110, radiusPx: 40 } })!;
    expect(Math.hypot(found.x - 151.4, found.y - 120.2)).toBeLessThan(0.06);
  });
});

test('a patch at the very corner of the frame is found', () => {
  const image = drawImage(makeTexture(SOFT, 5, 140), 240, { x: 120, y: 120, noiseDn: 1 });
  const corner = cutTemplate(image, 20, 219, { widthPx: 41 });
  const found = findTemplate(image, corner)!;
  expect(Math.hypot(found.x - 20, found.y - 219)).toBeLessThan(0.05);
});

describe('OpenCV behind its adapter', () => {
  const random = seededRandom(6);
  const randomImage = (width: number, height: number): FloatImage => ({
    data: Float32Array.from({ length: width * height }, () => 255 * random.uniform()),
    width,
    height,
  });

  test('correlates as the definition does', () => {
    const [image, patch] = [randomImage(70, 53), randomImage(15, 11)];
    const [ours, theirs] = [correlatePlainly(image, patch), correlateByOpenCv(image, patch)];
    expect(theirs.length).toBe((70 - 15 + 1) * (53 - 11 + 1));
    for (let i = 0; i < ours.length; i++) expect(theirs[i]).toBeCloseTo(ours[i]!, 4);
  });

  test('leaves the process as it was: no handlers of uncaught errors or rejections', () => {
    correlateByOpenCv(randomImage(20, 20), randomImage(5, 5));
    expect(process.listeners('uncaughtException')).toEqual(handlersBefore.uncaught);
    expect(process.listeners('unhandledRejection')).toEqual(handlersBefore.rejected);
  });

  test('holds no memory: after 60 calls with 2.9 MB each its heap is still the 128 MB it began with', () => {
    const { cv } = createRequire(import.meta.url)('opencv-wasm') as { cv: { HEAPU8: Uint8Array } };
    const [image, patch] = [randomImage(600, 600), randomImage(3, 3)];
    correlateByOpenCv(image, patch);
    const before = cv.HEAPU8.length;
    for (let k = 0; k < 60; k++) expect(correlateByOpenCv(image, patch).length).toBe(598 * 598);
    expect(cv.HEAPU8.length).toBe(before);
  });

  test('refuses a patch larger than the picture', () => {
    expect(() => correlateByOpenCv(randomImage(20, 20), randomImage(21, 5))).toThrow(/cannot lie in/);
  });
});
