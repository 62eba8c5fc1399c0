import { describe, expect, test } from 'vitest';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { chooseTemplate, judgeSpot } from '../../src/track/judge-spot.ts';
import { drawImage, FINE, makeTexture, SOFT, toImage, WEAK } from './draw-texture.ts';

const SIZE = 200;
const MIDDLE = 100;

function picture(at: (x: number, y: number) => number, noiseDn = 1): ReturnType<typeof toImage> {
  const field = Float64Array.from({ length: SIZE * SIZE }, (_, i) => at(i % SIZE, Math.floor(i / SIZE)));
  return toImage(field, SIZE, noiseDn, 11);
}

describe('spots that are refused, each with a sentence', () => {
  test.each([
    ['flat', () => 120, /too little texture/],
    ['a straight edge', (x: number) => 120 + 60 * Math.tanh((x - MIDDLE) / 1.5), /one direction only/],
    [
      'a tilted edge',
      (x: number, y: number) => 120 + 60 * Math.tanh((x - 0.4 * y - 60) / 1.5),
      /one direction only/,
    ],
    ['stripes', (x: number) => 120 + 60 * Math.sin(x / 2), /one direction only/],
    ['overexposed', (x: number, y: number) => ((x * y) % 97 < 80 ? 300 : 60), /clipped/],
    ['faint', (x: number, y: number) => 120 + 1.5 * Math.sin(x / 2) * Math.sin(y / 2), /too little texture/],
  ])('%s', (_name, at, reason) => {
    const judgement = judgeSpot(picture(at), MIDDLE, MIDDLE);
    expect(judgement.ok).toBe(false);
    expect(judgement.reason).toMatch(reason);
    expect(judgement.reason).toMatch(/^[A-Z].*\.$/);
    expect(chooseTemplate(picture(at), MIDDLE, MIDDLE).template).toBeNull();
  });

  test('too near the edge, and outside', () => {
    const image = drawImage(makeTexture(FINE, 2, 100), SIZE, { x: MIDDLE, y: MIDDLE });
    expect(judgeSpot(image, 5, MIDDLE).reason).toMatch(/too near the edge/);
    expect(judgeSpot(image, MIDDLE, 180, { sizePx: 61 }).reason).toMatch(/61 px needs 30 px/);
    expect(judgeSpot(image, -20, MIDDLE).reason).toMatch(/outside/);
    expect(judgeSpot(image, Number.NaN, MIDDLE).reason).toMatch(/outside/);
  });
});

test('near the edge a smaller patch is chosen where a usual one does not fit', () => {
  const image = drawImage(makeTexture(FINE, 2, 100), SIZE, { x: MIDDLE, y: MIDDLE });
  expect(judgeSpot(image, 12, MIDDLE)).toMatchObject({ ok: true, sizePx: 21 });
});

test('the aperture problem is told by direction: an edge leaning by 30 degrees is seen best across itself', () => {
  const tan = Math.tan(Math.PI / 6);
  const image = picture((x, y) => 120 + 60 * Math.tanh((x - MIDDLE + tan * (y - MIDDLE)) / 1.5));
  const judgement = judgeSpot(image, MIDDLE, MIDDLE);
  expect(judgement.bestDirectionDeg).toBeCloseTo(30, 0);
  expect(judgement.expectedUBestPx).toBeLessThan(0.02);
  expect(judgement.expectedUPx).toBeNull();
});

test('corners, dots and textures are accepted, and larger patches are chosen where noise asks for them', () => {
  const corner = picture((x, y) => (x > MIDDLE && y > MIDDLE ? 180 : 80));
  const dot = picture((x, y) => 80 + 100 * Math.exp(-((x - MIDDLE) ** 2 + (y - MIDDLE) ** 2) / 32));
  for (const image of [corner, dot]) expect(judgeSpot(image, MIDDLE, MIDDLE).ok).toBe(true);
  const sizes = [
    [FINE, 1],
    [SOFT, 2],
    [WEAK, 4],
  ].map(([kind, noiseDn]) => {
    const texture = makeTexture(kind as typeof FINE, 3, 100);
    return judgeSpot(
      drawImage(texture, SIZE, { x: MIDDLE, y: MIDDLE, noiseDn: noiseDn as number }),
      MIDDLE,
      MIDDLE,
    );
  });
  for (const judgement of sizes) expect(judgement).toMatchObject({ ok: true, reason: null, warnings: [] });
  const [fine, soft, weak] = sizes.map(({ sizePx }) => sizePx) as [number, number, number];
  expect(fine).toBeLessThan(soft);
  expect(soft).toBeLessThan(weak);
});

test('the expected uncertainty is the spread that registration shows (80 trials, within 20 %)', () => {
  const texture = makeTexture(SOFT, 3, 60);
  const draw = (x: number, seed: number): ReturnType<typeof toImage> =>
    drawImage(texture, 120, { x, y: 60, noiseDn: 3 }, seed);
  const { template, judgement } = chooseTemplate(draw(60, 1), 60, 60, { sizePx: 41 });
  const registrar = new TranslationRegistrar(template!);
  let squares = 0;
  let sum = 0;
  for (let k = 0; k < 80; k++) {
    const found = registrar.register(draw(60.3, 100 + k), 60, 60);
    const angle = ((judgement.bestDirectionDeg + 90) * Math.PI) / 180;
    const error = (found.x - 60.3) * Math.cos(angle) + (found.y - 60) * Math.sin(angle);
    sum += error;
    squares += error * error;
  }
  const deviation = Math.sqrt(squares / 80 - (sum / 80) ** 2);
  expect(Math.abs(judgement.expectedUPx! / deviation - 1)).toBeLessThan(0.2);
});

test('a repeating pattern is accepted with a warning that names the distance of the repeat', () => {
  const image = picture(
    (x, y) => 120 + 60 * Math.sin((2 * Math.PI * x) / 18) * Math.sin((2 * Math.PI * y) / 18),
  );
  const { judgement, template } = chooseTemplate(image, MIDDLE, MIDDLE);
  expect(judgement.ok).toBe(true);
  // Half a period along both axes is the same pattern again.
  expect(judgement.aliasPx).toBeCloseTo(18 / Math.SQRT2, 0);
  expect(judgement.aliasScore).toBeGreaterThan(0.95);
  expect(judgement.warnings.join()).toMatch(/13 px away/);
  expect(template!.alias!.distancePx).toBe(judgement.aliasPx);
});

test('clipping that spoils a part of the patch is a warning; the fraction is the fraction drawn', () => {
  const texture = makeTexture(FINE, 4, 100);
  const image = drawImage(texture, SIZE, { x: MIDDLE, y: MIDDLE });
  const half = 20;
  for (let y = MIDDLE - half; y <= MIDDLE + half; y++) {
    for (let x = MIDDLE - half; x <= MIDDLE + half; x++) if (x > MIDDLE + 10) image.data[y * SIZE + x] = 255;
  }
  const judgement = judgeSpot(image, MIDDLE, MIDDLE, { sizePx: 41 });
  expect(judgement.ok).toBe(true);
  expect(judgement.saturatedFraction).toBeCloseTo(10 / 41, 2);
  expect(judgement.warnings.join()).toMatch(/24 % of the spot is clipped/);
});

test('clipping of limited-range video, white at 235 and black at 16, is seen as well', () => {
  const image = picture((x, y) => ((Math.floor(x / 9) + Math.floor(y / 9)) % 3 === 0 ? 120 : 235), 0);
  expect(judgeSpot(image, MIDDLE, MIDDLE, { sizePx: 41 }).saturatedFraction).toBeGreaterThan(0.3);
});

test('identity: the fine detail of a Gaussian blob has its standard deviation', () => {
  for (const sigma of [3, 5]) {
    const image = picture(
      (x, y) => 60 + 150 * Math.exp(-((x - MIDDLE) ** 2 + (y - MIDDLE) ** 2) / (2 * sigma ** 2)),
      0,
    );
    // [1 2 1] widens the blob a little: its variance is 1/2.
    expect(judgeSpot(image, MIDDLE, MIDDLE, { sizePx: 61 }).detailPx).toBeCloseTo(
      Math.hypot(sigma, Math.SQRT1_2),
      1,
    );
  }
});

test('a size that is even or out of range is our own mistake', () => {
  const image = drawImage(makeTexture(FINE, 2, 100), SIZE, { x: MIDDLE, y: MIDDLE });
  for (const sizePx of [40, 13, 123])
    expect(() => judgeSpot(image, 100, 100, { sizePx })).toThrow(/odd number/);
});
