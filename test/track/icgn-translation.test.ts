import { beforeAll, describe, expect, test } from 'vitest';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { RegistrationUncertainty } from '../../src/track/registration-uncertainty.ts';
import { drawImage, FINE, makeTexture, SOFT, WEAK } from './draw-texture.ts';
import { makeScene, referenceTemplate, runTrials, type Scene } from './registration-trials.ts';
import { seededRandom } from './seeded-random.ts';

const PATCH_PX = 41;

describe('noise reaches little more than the Cramer-Rao bound (Robinson and Milanfar 2004)', () => {
  const scenes = new Map<string, Scene>();
  beforeAll(() => {
    for (const [name, kind] of Object.entries({ FINE, SOFT, WEAK })) {
      scenes.set(name, makeScene(makeTexture(kind, 7, 36), PATCH_PX, { count: 48 }));
    }
  });
  test.each([
    ['FINE', 1],
    ['FINE', 2],
    ['FINE', 4],
    ['FINE', 8],
    ['SOFT', 2],
    ['SOFT', 4],
    ['WEAK', 1],
    ['WEAK', 2],
  ])(
    '%s texture, %d DN of noise, all sub-pixel phases: RMS at most 1.15 times the bound',
    (name, noiseDn) => {
      const scene = scenes.get(name)!;
      const template = referenceTemplate(scene, noiseDn, 99);
      const registrar = new TranslationRegistrar(template);
      const uncertainty = new RegistrationUncertainty(template, 2);
      const trials = runTrials(
        scene,
        noiseDn,
        10,
        (image, x, y) => registrar.register(image, x, y),
        (registration) => uncertainty.ofRegistration(registration),
      );
      expect(trials.rmsToBound).toBeLessThan(1.15);
      // A bound: 960 errors scatter it by 2.3 %.
      expect(trials.rmsToBound).toBeGreaterThan(0.93);
      // The stated uncertainty is the spread that is seen.
      expect(trials.uncertaintyToRms).toBeGreaterThan(0.9);
      expect(trials.uncertaintyToRms).toBeLessThan(1.1);
    },
  );
});

test('without noise the mean error by sub-pixel phase stays within 0.001 px (no peak locking)', () => {
  const texture = makeTexture(FINE, 5, 36);
  const size = PATCH_PX + 20;
  const centre = (size - 1) / 2;
  const registrar = new TranslationRegistrar(
    cutTemplate(drawImage(texture, size, { x: centre, y: centre }), centre, centre, { widthPx: PATCH_PX }),
  );
  const bins = new Float64Array(10);
  for (let bin = 0; bin < 10; bin++) {
    for (let k = 0; k < 16; k++) {
      // The other axis runs through all phases too, and whole pixels vary, to average the rounding.
      const x = centre + (bin + 0.5) / 10 + (k % 4) - 2;
      const y = centre + ((k * 0.618) % 1) * 3 - 1.5;
      bins[bin]! += (registrar.register(drawImage(texture, size, { x, y }), x + 0.2, y - 0.2).x - x) / 16;
    }
  }
  const halfRange = (Math.max(...bins) - Math.min(...bins)) / 2;
  expect(halfRange).toBeLessThan(0.001);
});

test('light between 80 and 120 % is held: RMS at most 1.15 times the bound for the light it has', () => {
  const scene = makeScene(makeTexture(FINE, 7, 36), PATCH_PX, { count: 48, gain: 0.2 });
  const registrar = new TranslationRegistrar(referenceTemplate(scene, 2, 99));
  const trials = runTrials(scene, 2, 10, (image, x, y) => registrar.register(image, x, y));
  // Gradients scale with the gain, so the bound for this mixture is that of the mean of 1 / gain squared.
  const mixture = Math.sqrt(scene.poses.reduce((sum, { gain }) => sum + gain ** -2, 0) / scene.poses.length);
  expect(trials.rmsToBound / mixture).toBeLessThan(1.15);
  expect(trials.lowestScore).toBeGreaterThan(0.97);
});

test('from up to 4 px away it always arrives', () => {
  const texture = makeTexture(FINE, 9, 36);
  const size = PATCH_PX + 24;
  const centre = (size - 1) / 2;
  const registrar = new TranslationRegistrar(
    cutTemplate(drawImage(texture, size, { x: centre, y: centre, noiseDn: 2 }, 3), centre, centre, {
      widthPx: PATCH_PX,
    }),
  );
  const random = seededRandom(12);
  for (let k = 0; k < 60; k++) {
    const [x, y] = [centre + random.uniform(), centre + random.uniform()];
    const angle = 2 * Math.PI * random.uniform();
    const away = 4 * Math.sqrt(random.uniform());
    const found = registrar.register(
      drawImage(texture, size, { x, y, noiseDn: 2 }, 50 + k),
      x + away * Math.cos(angle),
      y + away * Math.sin(angle),
    );
    expect(found.converged).toBe(true);
    expect(Math.hypot(found.x - x, found.y - y)).toBeLessThan(0.03);
  }
});

test('a point marked between pixels is followed as that point: shifting the mark shifts the answer', () => {
  const texture = makeTexture(FINE, 9, 36);
  const image = drawImage(texture, 65, { x: 32, y: 32 });
  const moved = drawImage(texture, 65, { x: 33.25, y: 31.6 });
  const whole = new TranslationRegistrar(cutTemplate(image, 32, 32, { widthPx: 31 })).register(moved, 33, 32);
  const between = new TranslationRegistrar(cutTemplate(image, 32.4, 31.7, { widthPx: 31 })).register(
    moved,
    33.4,
    31.7,
  );
  expect(between.x - whole.x).toBeCloseTo(0.4, 3);
  expect(between.y - whole.y).toBeCloseTo(-0.3, 3);
});

test('rectangular patches register as square ones do', () => {
  const texture = makeTexture(SOFT, 4, 36);
  const template = cutTemplate(drawImage(texture, 65, { x: 32, y: 32 }), 32, 32, {
    widthPx: 45,
    heightPx: 21,
  });
  const found = new TranslationRegistrar(template).register(
    drawImage(texture, 65, { x: 32.7, y: 31.2 }),
    32,
    32,
  );
  expect(found.x).toBeCloseTo(32.7, 2);
  expect(found.y).toBeCloseTo(31.2, 2);
});

test('10-bit frames give what 8-bit frames give, and register against 8-bit templates', () => {
  const texture = makeTexture(FINE, 9, 36);
  const eight = cutTemplate(drawImage(texture, 65, { x: 32, y: 32 }), 32, 32, { widthPx: 41 });
  const tenBit = drawImage(texture, 65, { x: 32.3, y: 32.8 }, 1, 1023);
  const found = new TranslationRegistrar(eight).register(tenBit, 32, 33);
  expect(found.x).toBeCloseTo(32.3, 2);
  expect(found.y).toBeCloseTo(32.8, 2);
  expect(found.gain).toBeCloseTo(1, 2);
});

test('it does not claim a place in a picture without the template, and refuses one without texture', () => {
  const texture = makeTexture(FINE, 9, 36);
  const template = cutTemplate(drawImage(texture, 65, { x: 32, y: 32 }), 32, 32, { widthPx: 41 });
  const flat = { data: new Uint8Array(65 * 65).fill(90), width: 65, height: 65, maxValue: 255 };
  expect(new TranslationRegistrar(template).register(flat, 32, 32).converged).toBe(false);
  expect(new TranslationRegistrar(template).register(flat, 500, 32).converged).toBe(false);
  expect(() => new TranslationRegistrar(cutTemplate(flat, 32, 32, { widthPx: 21 }))).toThrow(/texture/);
});
