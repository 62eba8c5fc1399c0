import { expect, test } from 'vitest';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { AffineRegistrar } from '../../src/track/icgn-affine.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { RegistrationUncertainty } from '../../src/track/registration-uncertainty.ts';
import { drawImage, FINE, makeTexture, SOFT, WEAK } from './draw-texture.ts';
import { makeScene, referenceTemplate, runTrials } from './registration-trials.ts';

const KINDS = { FINE, SOFT, WEAK };
const DEGREE = Math.PI / 180;

test.each([
  ['FINE', 1],
  ['FINE', 2],
  ['FINE', 8],
  ['SOFT', 2],
  ['WEAK', 2],
] as const)(
  '%s texture turning by 4 degrees either way, %d DN of noise: RMS at most 1.2 times the Cramer-Rao bound',
  (name, noiseDn) => {
    const scene = makeScene(makeTexture(KINDS[name], 7, 40), 41, { count: 48, angleRad: 4 * DEGREE });
    const template = referenceTemplate(scene, noiseDn, 99);
    const registrar = new AffineRegistrar(template);
    const uncertainty = new RegistrationUncertainty(template, 6);
    const trials = runTrials(
      scene,
      noiseDn,
      10,
      (image, x, y) => registrar.register(image, x, y),
      (registration) => uncertainty.ofRegistration(registration),
    );
    expect(trials.rmsToBound).toBeLessThan(1.2);
    expect(trials.rmsToBound).toBeGreaterThan(0.93);
    expect(trials.uncertaintyToRms).toBeGreaterThan(0.88);
    expect(trials.uncertaintyToRms).toBeLessThan(1.12);
  },
);

test('it finds the angle and the place of a turned part, where a translation is off by tenths of a pixel', () => {
  const texture = makeTexture(FINE, 5, 40);
  const template = cutTemplate(drawImage(texture, 71, { x: 35, y: 35 }), 35, 35, { widthPx: 41 });
  const registrar = new AffineRegistrar(template);
  const turned = drawImage(texture, 71, { x: 35.3, y: 34.6, angleRad: 4 * DEGREE });
  const found = registrar.register(turned, 35, 35);
  const { xx, xy, yx, yy } = registrar.deformation;
  expect(Math.hypot(found.x - 35.3, found.y - 34.6)).toBeLessThan(0.003);
  expect(Math.atan2(yx - xy, 2 + xx + yy) / DEGREE).toBeCloseTo(4, 1);
  expect(found.score).toBeGreaterThan(0.995);
  const moved = new TranslationRegistrar(template).register(turned, 35, 35);
  expect(moved.score).toBeLessThan(found.score - 0.05);
  expect(Math.hypot(moved.x - 35.3, moved.y - 34.6)).toBeGreaterThan(0.05);
});

test('a point marked between pixels turns with the part', () => {
  const texture = makeTexture(FINE, 5, 40);
  const template = cutTemplate(drawImage(texture, 71, { x: 35, y: 35 }), 35.4, 34.8, { widthPx: 41 });
  const angle = 4 * DEGREE;
  const turned = drawImage(texture, 71, { x: 35.5, y: 35.5, angleRad: angle });
  const found = new AffineRegistrar(template).register(turned, 35.9, 35.3);
  expect(found.x).toBeCloseTo(35.5 + 0.4 * Math.cos(angle) + 0.2 * Math.sin(angle), 2);
  expect(found.y).toBeCloseTo(35.5 + 0.4 * Math.sin(angle) - 0.2 * Math.cos(angle), 2);
});

test('it gives up, without a claim, on a picture without the template', () => {
  const texture = makeTexture(FINE, 5, 40);
  const template = cutTemplate(drawImage(texture, 71, { x: 35, y: 35 }), 35, 35, { widthPx: 41 });
  const other = drawImage(makeTexture(FINE, 6, 40), 71, { x: 35, y: 35 });
  const found = new AffineRegistrar(template).register(other, 35, 35);
  expect(found.converged && found.score > 0.6).toBe(false);
});
