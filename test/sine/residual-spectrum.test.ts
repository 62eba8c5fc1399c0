import { describe, expect, test } from 'vitest';
import { autoregressiveOffsetFactor, autoregressiveVarianceFactor } from '../../src/sine/cramer-rao.ts';
import { localNoise } from '../../src/sine/residual-spectrum.ts';
import { fitSineAtFrequency } from '../../src/sine/three-parameter.ts';
import { whittleLevel } from '../../src/sine/whittle-level.ts';
import { autoregressive, gaussian, uniform } from './seeded-noise.ts';

describe('noise at the signal', () => {
  test.each([0.01, 0.05, 0.2])(
    'first-order noise of lag-1 correlation 0.5 at f/fs %d: the mean estimate is the closed form within 9 %%',
    (cyclesPerFrame) => {
      const normal = gaussian(100 + 1000 * cyclesPerFrame);
      const runs = 80;
      const timesS = new Float64Array(400).map((_, i) => i / 60);
      let [atSignal, atZero] = [0, 0];
      for (let run = 0; run < runs; run++) {
        const noise = autoregressive(normal, 400, 0.5);
        const values = timesS.map((t, i) => 20 * Math.cos(2 * Math.PI * 60 * cyclesPerFrame * t) + noise[i]!);
        const fit = fitSineAtFrequency(timesS, values, 60 * cyclesPerFrame)!;
        atSignal +=
          localNoise({ timesS, values }, fit.residuals, fit.fitted, fit.frequencyHz)!.variance / runs;
        atZero += localNoise({ timesS, values }, fit.residuals, fit.fitted, 0)!.variance / runs;
      }
      expect(Math.abs(atSignal / autoregressiveVarianceFactor(0.5, cyclesPerFrame) - 1)).toBeLessThan(0.09);
      expect(Math.abs(atZero / autoregressiveOffsetFactor(0.5) - 1)).toBeLessThan(0.12);
    },
  );

  test('what the fit took out is put back: white noise on 36 frames, four columns and a free frequency', () => {
    const normal = gaussian(5);
    const timesS = new Float64Array(36).map((_, i) => i / 12);
    const runs = 250;
    let mean = 0;
    for (let run = 0; run < runs; run++) {
      const values = timesS.map((t) => 30 * Math.cos(2 * Math.PI * 2 * t + run) + normal());
      const fit = fitSineAtFrequency(timesS, values, 2, { baselineTerms: 2 })!;
      mean += localNoise({ timesS, values }, fit.residuals, fit.fitted, 2)!.variance / runs;
    }
    // a raw residual variance would come out at 32/36 of the truth
    expect(mean).toBeGreaterThan(0.95);
    expect(mean).toBeLessThan(1.25);
  });

  test('cannot know: too few frames beside the fit give null', () => {
    const timesS = new Float64Array(8).map((_, i) => i / 10);
    const values = timesS.map((t) => Math.cos(2 * Math.PI * 2.5 * t) + 0.1 * Math.sin(99 * t));
    const fit = fitSineAtFrequency(timesS, values, 2.5, { noise: 'white' })!;
    expect(localNoise({ timesS, values }, fit.residuals, fit.fitted, 2.5)).toBeNull();
  });
});

describe('level of a log-linear spectrum', () => {
  test('an exact power law is read off exactly at x = 0, but for the ordinate spent on the slope', () => {
    const points = [-0.6, -0.4, -0.2, 0.2, 0.4, 0.6].map((x) => ({
      x,
      power: 3 * Math.exp(-0.1 * x),
      weight: 1,
    }));
    expect(whittleLevel(points).level / ((3 * 6) / 5)).toBeCloseTo(1, 2);
  });

  test('flat spectrum, x all zero: the mean, with two degrees of freedom an ordinate but for the slope prior', () => {
    const points = [1, 2, 3, 6].map((power) => ({ x: 0, power, weight: 1 }));
    const { level, effectiveDof } = whittleLevel(points);
    expect(level).toBeCloseTo(3, 9);
    expect(effectiveDof).toBeCloseTo(8, 9);
  });

  test('scaling all powers scales the level; no power at all is level zero', () => {
    const next = uniform(3);
    const points = Array.from({ length: 12 }, (_, k) => ({
      x: (k - 5.5) / 8,
      power: next(),
      weight: 1 - k / 24,
    }));
    const level = whittleLevel(points).level;
    expect(whittleLevel(points.map((p) => ({ ...p, power: 1e-9 * p.power }))).level / level).toBeCloseTo(
      1e-9,
      15,
    );
    expect(whittleLevel(points.map((p) => ({ ...p, power: 0 }))).level).toBe(0);
  });
});
