import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { phaseAtZeroRad } from '../../src/sine/sine-fit.ts';
import { fitSineAtFrequency } from '../../src/sine/three-parameter.ts';

const jacquelin = JSON.parse(readFileSync(new URL('../data/jacquelin.json', import.meta.url), 'utf8'));
const sinsin = JSON.parse(readFileSync(new URL('../data/sinsin.json', import.meta.url), 'utf8'));

describe('sine fit at a known frequency', () => {
  test('Jacquelin 2009, p. 23 and 32: printed offset, sine and cosine at omega 2.02074, unevenly spaced', () => {
    const { x, y } = jacquelin.ex1;
    const omega = 2.02074;
    const fit = fitSineAtFrequency(Float64Array.from(x), Float64Array.from(y), omega / (2 * Math.PI))!;
    const phase = phaseAtZeroRad(fit);
    expect(fit.amplitude * Math.cos(phase)).toBeCloseTo(-0.577491, 5);
    expect(-fit.amplitude * Math.sin(phase)).toBeCloseTo(1.2752, 5);
    expect(fit.offset).toBeCloseTo(-0.405617, 5);
    // the same least squares to more digits, by numpy.linalg.lstsq
    expect(fit.amplitude * Math.cos(phase)).toBeCloseTo(-0.5774907676, 9);
    expect(-fit.amplitude * Math.sin(phase)).toBeCloseTo(1.2752048784, 9);
    expect(fit.offset).toBeCloseTo(-0.4056170036, 9);
  });

  test.each([
    ['y1', 10, 5, 0.1],
    ['y2', 20, 3, 0.1],
    ['y5', 20, 3, 0.1],
    ['y6', 20, 3, 0.3],
  ])('NIST SINSIN.DAT %s: offset %d, amplitude %d at %d Hz', (column, offset, amplitude, frequencyHz) => {
    const fit = fitSineAtFrequency(
      Float64Array.from(sinsin.t),
      Float64Array.from(sinsin[column]),
      frequencyHz,
    )!;
    expect(Math.abs(fit.offset - offset)).toBeLessThan(5e-5);
    expect(Math.abs(fit.amplitude - amplitude)).toBeLessThan(5e-5);
    expect(fit.residualSd).toBeLessThan(5e-5);
  });

  const times = new Float64Array(90).map((_, i) => 2 + i / 30 + 0.004 * Math.sin(i * i));
  const motion = times.map((t) => 3 * Math.cos(2 * Math.PI * 2.3 * t + 0.4) + 5 + 0.7 * (t - 3.5));

  test('identity: uneven times, offset and slope are recovered exactly', () => {
    const fit = fitSineAtFrequency(times, motion, 2.3, { baselineTerms: 2 })!;
    expect(fit.amplitude).toBeCloseTo(3, 10);
    expect(Math.cos(phaseAtZeroRad(fit) - 0.4)).toBeCloseTo(1, 12);
    expect(fit.baseline[1]! / fit.halfSpanS).toBeCloseTo(0.7, 10);
    expect(fit.frequencyU).toBeNull();
  });

  test('units: motion in micrometres gives a thousand times the amplitude and its uncertainty', () => {
    const rough = motion.map((x, i) => x + 0.01 * Math.sin(i ** 3));
    const mm = fitSineAtFrequency(times, rough, 2.3)!;
    const um = fitSineAtFrequency(
      times,
      rough.map((x) => 1000 * x),
      2.3,
    )!;
    expect(um.amplitude / mm.amplitude).toBeCloseTo(1000, 7);
    expect(um.amplitudeU / mm.amplitudeU).toBeCloseTo(1000, 5);
    expect(um.phaseRad).toBeCloseTo(mm.phaseRad, 12);
    expect(um.phaseU).toBeCloseTo(mm.phaseU, 10);
  });

  test('gaps: frames without a value change nothing but the count', () => {
    const holed = motion.map((x, i) => (i % 7 === 3 ? Number.NaN : x));
    const fit = fitSineAtFrequency(times, holed, 2.3, { baselineTerms: 2 })!;
    expect(fit.amplitude).toBeCloseTo(3, 10);
    expect(fit.frames).toBe(motion.filter((_, i) => i % 7 !== 3).length);
  });

  test('a drive above half the frame rate is measured from its alias', () => {
    const at30 = new Float64Array(120).map((_, i) => i / 30);
    const fast = at30.map((t) => 1.5 * Math.cos(2 * Math.PI * 41 * t - 0.3));
    const fit = fitSineAtFrequency(at30, fast, 41)!;
    expect(fit.amplitude).toBeCloseTo(1.5, 10);
    expect(Math.cos(phaseAtZeroRad(fit) + 0.3)).toBeCloseTo(1, 10);
  });

  test('cannot know: a frequency at the frame rate, too few frames, a bad frequency or still motion give null', () => {
    const at30 = new Float64Array(60).map((_, i) => i / 30);
    const values = at30.map((t) => Math.cos(6 * t));
    expect(fitSineAtFrequency(at30, values, 30)).toBeNull();
    expect(fitSineAtFrequency(at30.slice(0, 3), values.slice(0, 3), 2)).toBeNull();
    expect(fitSineAtFrequency(at30, values, 0)).toBeNull();
    expect(fitSineAtFrequency(at30, values, -2)).toBeNull();
    expect(fitSineAtFrequency(at30, values, Number.NaN)).toBeNull();
    expect(fitSineAtFrequency(at30, new Float64Array(60).fill(0), 2)).toBeNull();
    expect(fitSineAtFrequency(at30, new Float64Array(60).fill(Number.NaN), 2)).toBeNull();
  });
});
