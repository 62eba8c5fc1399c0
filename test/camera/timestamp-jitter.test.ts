import { describe, expect, test } from 'vitest';
import {
  jitterEffect,
  quantisationEffect,
  stampCorrection,
  stampIrregularity,
} from '../../src/camera/timestamp-jitter.ts';
import { seededNormal } from '../plan/seeded-random.ts';
import { fitSine } from './fit-sine.ts';

describe('errors of the time stamps (derived)', () => {
  test('2 ms at 10 Hz: amplitude 0.992135406; residual A w s / sqrt 2 = 0.088857659, exactly 0.088508', () => {
    const { amplitude, residualRms } = jitterEffect(10, 0.002);
    expect(amplitude).toBeCloseTo(0.992135406, 9);
    expect(residualRms).toBeCloseTo(0.088508, 6);
    const w = 2 * Math.PI * 10;
    expect((w * 2e-6) / Math.SQRT2).toBeCloseTo(0.088857659 / 1000, 12);
    expect(jitterEffect(10, 2e-6).residualRms / 0.088857659e-3).toBeCloseTo(1, 7);
  });

  test('a fit of 20000 jittered samples loses that amplitude and shows that residual (Monte Carlo, 2e-3)', () => {
    const normal = seededNormal(3);
    const timesS = Float64Array.from({ length: 20000 }, (_, i) => i / 60);
    const x = timesS.map((t) => Math.sin(2 * Math.PI * 10 * (t + 0.002 * normal()) + 0.3));
    const fit = fitSine(timesS, x, 10);
    const { amplitude, residualRms } = jitterEffect(10, 0.002);
    expect(Math.abs(fit.amplitude - amplitude)).toBeLessThan(2e-3);
    expect(Math.abs(fit.residualRms - residualRms)).toBeLessThan(2e-3);
  });

  test('stamps rounded to 1 ms at 10 Hz: amplitude 0.999835515', () => {
    expect(quantisationEffect(10, 0.001)).toBeCloseTo(0.999835515, 9);
    expect(quantisationEffect(10, 0)).toBe(1);
  });

  test('a fit of stamps rounded to 10 ms, frames falling evenly over the tick, shows the sinc (simulation, 1e-4)', () => {
    const trueS = Float64Array.from({ length: 20000 }, (_, i) => i / 59.94);
    const stamped = trueS.map((t) => Math.round(t / 0.01) * 0.01);
    const x = trueS.map((t) => Math.sin(2 * Math.PI * 9.7 * t));
    expect(Math.abs(fitSine(stamped, x, 9.7).amplitude - quantisationEffect(9.7, 0.01))).toBeLessThan(1e-4);
  });

  test('the correction gives the lost amplitude back; rounding is doubt, not correction', () => {
    const jitter = stampCorrection(10, 0.002, 0);
    expect(jitter.factor * 0.992135406).toBeCloseTo(1, 8);
    expect(jitter.warning?.code).toBe('stamps-irregular');
    const rounding = stampCorrection(10, 0, 0.001);
    expect(rounding.factor).toBe(1);
    expect(rounding.u).toBeCloseTo((1 - 0.999835515) / Math.sqrt(3), 8);
    expect(rounding.warning).toBeNull();
    expect(stampCorrection(10, 0, 0.01).warning?.code).toBe('stamps-coarse');
    expect(stampCorrection(10, 0, 0)).toEqual({ factor: 1, u: 0, warning: null });
    expect(() => stampCorrection(10, -1, 0)).toThrow(/0 or more/);
  });
});

describe('irregularity of stamps', () => {
  test('an even clock in ticks of 1/90000 s with three frames missing', () => {
    const frames = Array.from({ length: 203 }, (_, i) => i).filter((i) => ![50, 120, 121].includes(i));
    const timesS = Float64Array.from(frames, (i) => 1e6 + Math.round((i / 29.97) * 90000) / 90000);
    const found = stampIrregularity(timesS);
    expect(found?.missingFrames).toBe(3);
    expect(found?.scatterS).toBeLessThan(0.5 / 90000);
    expect(found?.largestGapS).toBeCloseTo(3 / 29.97, 4);
    expect(found?.medianIntervalS).toBeCloseTo(1 / 29.97, 4);
  });

  test('jitter of 2 ms is found within 10 % (seeded)', () => {
    const normal = seededNormal(8);
    const timesS = Float64Array.from({ length: 400 }, (_, i) => i / 30 + 0.002 * normal());
    const scatterS = stampIrregularity(timesS)?.scatterS ?? 0;
    expect(scatterS / 0.002).toBeGreaterThan(0.9);
    expect(scatterS / 0.002).toBeLessThan(1.1);
  });

  test('two frames have no regularity to speak of', () => {
    expect(stampIrregularity(Float64Array.of(0, 1))).toBeNull();
  });
});
