import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { fitSine } from '../../src/sine/four-parameter.ts';
import { phaseAtZeroRad, type SineFit } from '../../src/sine/sine-fit.ts';
import { gaussian } from './seeded-noise.ts';

const read = (name: string) =>
  JSON.parse(readFileSync(new URL(`../data/${name}.json`, import.meta.url), 'utf8'));
const jacquelin = read('jacquelin');
const lew = read('lew');

const omega = (fit: SineFit) => 2 * Math.PI * fit.frequencyHz;
const cosine = (fit: SineFit) => fit.amplitude * Math.cos(phaseAtZeroRad(fit));
const sine = (fit: SineFit) => -fit.amplitude * Math.sin(phaseAtZeroRad(fit));

/** Standard uncertainty of the cosine and sine coefficients at t = 0, from the covariance of the polar parameters. */
function coefficientU(fit: SineFit): [number, number] {
  const phase = phaseAtZeroRad(fit);
  const turn = -2 * Math.PI * fit.referenceTimeS;
  const spread = (g: readonly number[]) =>
    Math.sqrt(
      g.reduce((sum, a, p) => sum + g.reduce((s, b, q) => s + a * b * fit.covariance[p * 4 + q]!, 0), 0),
    );
  const quadrature = fit.amplitude * Math.sin(phase);
  const along = fit.amplitude * Math.cos(phase);
  return [
    spread([Math.cos(phase), -quadrature, 0, -quadrature * turn]),
    spread([-Math.sin(phase), -along, 0, -along * turn]),
  ];
}

describe('sine fit with the frequency free', () => {
  test.each([1.8, 2.0, 2.2, null])(
    'Jacquelin 2009 data: least-squares optimum and standard errors (scipy, three starts and a grid), start %s rad/s',
    (start) => {
      const fit = fitSine(Float64Array.from(jacquelin.ex1.x), Float64Array.from(jacquelin.ex1.y), {
        noise: 'white',
        ...(start === null ? {} : { startHz: start / (2 * Math.PI) }),
      })!;
      expect(cosine(fit)).toBeCloseTo(-0.5716868743, 8);
      expect(sine(fit)).toBeCloseTo(1.2893383672, 8);
      expect(fit.offset).toBeCloseTo(-0.390697822, 8);
      expect(omega(fit)).toBeCloseTo(1.981305611, 8);
      expect(fit.amplitude).toBeCloseTo(1.4103968617, 8);
      expect(fit.residualSd).toBeCloseTo(0.1706546305, 8);
      expect(fit.degreesOfFreedom).toBe(11);
      const [uCosine, uSine] = coefficientU(fit);
      expect(uCosine).toBeCloseTo(0.0725564, 5);
      expect(uSine).toBeCloseTo(0.0640088, 5);
      expect(fit.offsetU).toBeCloseTo(0.0515996, 5);
      expect(2 * Math.PI * fit.frequencyU!).toBeCloseTo(0.0414412, 5);
    },
  );

  test.each([
    ['ex2_large_scatter', [0.53629617, 1.01269333, 0.74504348, 0.82367618, 0.59114889], 0.041474],
    ['ex2_small_scatter', [0.26355417, 1.29105846, 0.66077993, 0.81210354, 0.61354859], 0.011662],
  ] as const)('Jacquelin 2009, p. 51 %s: sine with a slope (optimum by scipy)', (name, expected, uOmega) => {
    const { x, y } = jacquelin[name];
    const fit = fitSine(Float64Array.from(x), Float64Array.from(y), { noise: 'white', baselineTerms: 2 })!;
    const slope = fit.baseline[1]! / fit.halfSpanS;
    const found = [fit.offset - slope * fit.referenceTimeS, sine(fit), cosine(fit), omega(fit), slope];
    found.forEach((value, k) => {
      expect(value).toBeCloseTo(expected[k]!, 6);
    });
    expect(2 * Math.PI * fit.frequencyU!).toBeCloseTo(uOmega, 5);
  });

  test('five samples at 10 Hz: printed example of a public sine-fit routine (MATLAB File Exchange 19902, Balda)', () => {
    const fit = fitSine(
      Float64Array.of(0, 0.1, 0.2, 0.3, 0.4),
      Float64Array.of(1.3633, -0.2428, -0.9705, 1.813, -1.9631),
    )!;
    expect(Math.abs(fit.frequencyHz - 4)).toBeLessThan(2e-5);
    expect(Math.abs(fit.amplitude - 2)).toBeLessThan(2e-5);
    expect(Math.abs(Math.atan2(cosine(fit), sine(fit)) - 0.75)).toBeLessThan(2e-5);
    expect(Math.abs(fit.offset + 2.2806e-5)).toBeLessThan(2e-5);
  });

  test('NIST e-Handbook beam deflections (LEW.DAT): least-squares optimum by scipy, not the printed fit', () => {
    const times = Float64Array.from(lew.y as number[], (_, i) => i + 1);
    const fit = fitSine(times, Float64Array.from(lew.y), { noise: 'white' })!;
    const close = (value: number, expected: number, relative: number) =>
      expect(Math.abs(value / expected - 1)).toBeLessThan(relative);
    close(fit.offset, -178.7681575, 1e-6);
    close(fit.amplitude, 343.2885654, 1e-6);
    close(fit.frequencyHz, 0.3018070361, 1e-9);
    // there the model is a sine: phase a quarter turn on
    close(Math.atan2(cosine(fit), sine(fit)), -1.3139220999, 1e-6);
    close(fit.residualSd, 134.0664009, 1e-6);
    close(fit.offsetU, 9.4803, 1e-5);
    close(fit.amplitudeU, 13.4078, 1e-5);
    close(fit.frequencyU!, 1.07641e-4, 1e-5);
    expect(fit.degreesOfFreedom).toBe(196);
    [-0.2496, -0.5294, 0.5773].forEach((value, lag) => {
      expect(fit.residualAutocorrelation[lag]).toBeCloseTo(value, 4);
    });
    // residuals that are anything but white: a second tone near the first makes the amplitude less sure
    expect(fitSine(times, Float64Array.from(lew.y))!.amplitudeU).toBeGreaterThan(1.3 * fit.amplitudeU);
  });

  test('capture range, derived: from 0.6 of 1/duration off it always arrives, in 8 iterations or fewer', () => {
    let most = 0;
    for (const cycles of [3.3, 7.7, 15.1, 33.7]) {
      for (let k = 0; k < 12; k++) {
        const phase = (2 * Math.PI * k) / 12;
        const times = new Float64Array(240).map((_, i) => i / 60);
        const frequencyHz = cycles / 4;
        const values = times.map((t) => Math.cos(2 * Math.PI * frequencyHz * t + phase));
        for (const off of [-0.6, 0.6]) {
          const fit = fitSine(times, values, { startHz: frequencyHz + off / 4 })!;
          expect(Math.abs(fit.frequencyHz / frequencyHz - 1)).toBeLessThan(1e-10);
          most = Math.max(most, fit.iterations);
        }
      }
    }
    expect(most).toBeLessThanOrEqual(8);
  });

  test('finds its own start over 2 to 80 periods, uneven frames, gaps and noise', () => {
    const normal = gaussian(41);
    for (const periods of [2.2, 3.4, 6.1, 20.3, 79.6]) {
      const count = Math.max(60, Math.round(periods * 6));
      const times = new Float64Array(count).map((_, i) => (i + 0.2 * Math.sin(7 * i)) / 60);
      const frequencyHz = (periods * 60) / count;
      const values = times.map((t, i) =>
        i % 11 === 5
          ? Number.NaN
          : 4 + 2 * Math.cos(2 * Math.PI * frequencyHz * t + periods) + 0.02 * normal(),
      );
      const fit = fitSine(times, values)!;
      expect(Math.abs(fit.frequencyHz - frequencyHz)).toBeLessThan(5 * fit.frequencyU!);
      expect(Math.abs(fit.amplitude - 2)).toBeLessThan(0.03);
    }
  });

  test('shift: a record filmed an hour later gives the same frequency, amplitude and spread', () => {
    const times = new Float64Array(200).map((_, i) => i / 50);
    const values = times.map((t, i) => Math.sin(2 * Math.PI * 3.21 * t) + 0.01 * Math.cos(i * i));
    const now = fitSine(times, values)!;
    const later = fitSine(
      times.map((t) => t + 3600),
      values,
    )!;
    expect(later.frequencyHz).toBeCloseTo(now.frequencyHz, 9);
    expect(later.amplitude).toBeCloseTo(now.amplitude, 9);
    expect(later.frequencyU! / now.frequencyU!).toBeCloseTo(1, 6);
  });

  test('cannot know: still, empty and short records give null, and so does a start far from any answer', () => {
    const times = new Float64Array(100).map((_, i) => i / 50);
    expect(fitSine(times, new Float64Array(100).fill(3))).toBeNull();
    expect(fitSine(times, new Float64Array(100).fill(Number.NaN))).toBeNull();
    expect(fitSine(times.slice(0, 4), times.slice(0, 4))).toBeNull();
    const wave = times.map((t) => Math.cos(2 * Math.PI * 5 * t));
    expect(fitSine(times, wave, { startHz: 12 })).toBeNull();
    expect(fitSine(times, wave, { startHz: 0 })).toBeNull();
  });
});
