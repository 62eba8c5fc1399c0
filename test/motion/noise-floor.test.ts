import { describe, expect, test } from 'vitest';
import { noiseFloor } from '../../src/motion/noise-floor.ts';
import { fitSineAtFrequency } from '../../src/sine/three-parameter.ts';
import { autoregressive, gaussian } from '../sine/seeded-noise.ts';
import { frames } from './driven-oscillator.ts';

describe('noise floor', () => {
  test('white noise of 0.02 over 600 frames: standard uncertainty sigma sqrt(2/N), as Kay 1993 has it', () => {
    const normal = gaussian(1);
    const timesS = frames(600);
    let mean = 0;
    for (let run = 0; run < 40; run++) {
      const still = { timesS, displacementMm: timesS.map(() => 0.02 * normal()) };
      mean += noiseFloor(still, 7, 600)!.amplitudeU / 40;
    }
    expect(Math.abs(mean / (0.02 * Math.sqrt(2 / 600)) - 1)).toBeLessThan(0.1);
  });

  test('decision and detection: 5 of 100 still records exceed the one, 95 of 100 small motions of the other do', () => {
    const normal = gaussian(2);
    const timesS = frames(240);
    const runs = 300;
    let [alarms, seen] = [0, 0];
    for (let run = 0; run < runs; run++) {
      const noise = () => autoregressive(normal, 240, 0.6).map((x) => 0.02 * x);
      const floor = noiseFloor({ timesS, displacementMm: noise() }, 6, 240)!;
      const amplitudeOf = (values: Float64Array) =>
        fitSineAtFrequency(timesS, values, 6, { baselineTerms: 2, noise: 'white' })!.amplitude;
      if (amplitudeOf(noise()) > floor.decision) alarms++;
      const small = noise().map((x, i) => x + floor.detectable * Math.cos(12 * Math.PI * timesS[i]! + run));
      if (amplitudeOf(small) > floor.decision) seen++;
    }
    // three binomial standard deviations
    expect(alarms / runs).toBeGreaterThan(0.01);
    expect(alarms / runs).toBeLessThan(0.09);
    expect(seen / runs).toBeGreaterThan(0.91);
  });

  test('four times the frames halve the floor; shaking at exactly the frequency is no noise', () => {
    const normal = gaussian(3);
    const timesS = frames(600);
    const still = { timesS, displacementMm: timesS.map(() => 0.02 * normal()) };
    const floor = noiseFloor(still, 7, 600)!;
    expect(noiseFloor(still, 7, 2400)!.detectable / floor.detectable).toBeCloseTo(0.5, 9);
    const shaken = {
      timesS,
      displacementMm: still.displacementMm.map((x, i) => x + Math.cos(14 * Math.PI * timesS[i]!)),
    };
    expect(noiseFloor(shaken, 7, 600)!.amplitudeU / floor.amplitudeU).toBeCloseTo(1, 3);
  });

  test('cannot know: too short a still record, or no frames, gives null', () => {
    const timesS = frames(4);
    expect(noiseFloor({ timesS, displacementMm: timesS }, 7, 100)).toBeNull();
    expect(noiseFloor({ timesS: frames(200), displacementMm: frames(200) }, 7, 0)).toBeNull();
  });
});
