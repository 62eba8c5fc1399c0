import { expect, test } from 'vitest';
import { TemplateAverager } from '../../src/track/averaged-template.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import { RegistrationUncertainty } from '../../src/track/registration-uncertainty.ts';
import { FINE, makeTexture, SOFT, WEAK } from './draw-texture.ts';
import { makeScene, referenceTemplate, runTrials, trialImage } from './registration-trials.ts';

const KINDS = { FINE, SOFT, WEAK };

test.each([
  ['FINE', 1, 1.1],
  ['FINE', 2, 1.06],
  ['FINE', 8, 1.06],
  ['SOFT', 4, 1.06],
  ['WEAK', 2, 1.06],
  ['WEAK', 4, 1.06],
] as const)(
  'second pass with the average of 96 frames, %s texture, %d DN of noise: RMS at most %d times the Cramer-Rao bound',
  (name, noiseDn, most) => {
    const scene = makeScene(makeTexture(KINDS[name], 7, 36), 41, { count: 48 });
    const template = referenceTemplate(scene, noiseDn, 99);
    const first = new TranslationRegistrar(template);
    const averager = new TemplateAverager(template);
    for (let pose = 0; pose < 48; pose++) {
      for (let trial = 0; trial < 2; trial++) {
        const image = trialImage(scene, pose, noiseDn, trial);
        const { x, y } = first.register(image, scene.poses[pose]!.x, scene.poses[pose]!.y);
        averager.add(image, 0, 0, x, y);
      }
    }
    expect(averager.count).toBe(96);
    const averaged = averager.finish()!;
    const second = new TranslationRegistrar(averaged);
    const uncertainty = new RegistrationUncertainty(averaged, 2);
    const trials = runTrials(
      scene,
      noiseDn,
      10,
      (image, x, y) => second.register(image, x, y),
      (registration) => uncertainty.ofRegistration(registration),
    );
    expect(trials.rmsToBound).toBeLessThan(most);
    expect(trials.uncertaintyToRms).toBeGreaterThan(0.9);
    expect(trials.uncertaintyToRms).toBeLessThan(1.1);
  },
);

test('an average of nothing is nothing', () => {
  const scene = makeScene(makeTexture(FINE, 7, 36), 41, { count: 1 });
  expect(new TemplateAverager(referenceTemplate(scene, 2, 1)).finish()).toBeNull();
});
