import { describe, expect, test } from 'vitest';
import { demodulate, periodsPerBlock } from '../../src/motion/demodulate.ts';
import { steadiness, strays } from '../../src/motion/steadiness.ts';
import { gaussian } from '../sine/seeded-noise.ts';
import { frames } from './driven-oscillator.ts';

const at = (frequencyHz: number, t: number, phase = 0) => Math.cos(2 * Math.PI * frequencyHz * t + phase);

describe('complex demodulation', () => {
  test('identity: a steady sine has the same complex amplitude in every block, offset and gaps notwithstanding', () => {
    const timesS = frames(400).filter((_, i) => i % 9 !== 4);
    const values = timesS.map((t) => 7 + 3 * at(2.5, t, 0.6));
    const series = demodulate({ timesS, values }, 2.5)!;
    const reference = 2 * Math.PI * 2.5 * series.referenceTimeS + 0.6;
    series.timesS.forEach((_, j) => {
      expect(series.real[j]).toBeCloseTo(3 * Math.cos(reference), 9);
      expect(series.imaginary[j]).toBeCloseTo(3 * Math.sin(reference), 9);
    });
  });

  test('a frequency 0.1 Hz off turns the phase by 36 degrees a second', () => {
    const timesS = frames(300);
    const series = demodulate({ timesS, values: timesS.map((t) => at(5.1, t)) }, 5)!;
    const phase = (j: number) => Math.atan2(series.imaginary[j]!, series.real[j]!);
    const [first, later] = [2, 12];
    const turned = phase(later) - phase(first);
    const expected = 2 * Math.PI * 0.1 * (series.timesS[later]! - series.timesS[first]!);
    expect(Math.sin(turned - expected)).toBeCloseTo(0, 2);
  });

  test('blocks hold whole periods with frames enough: one at 2 Hz, several at 25 Hz', () => {
    const samples = { timesS: frames(600), values: frames(600) };
    expect(periodsPerBlock(samples, 2)).toBe(1);
    expect(periodsPerBlock(samples, 25)).toBeGreaterThanOrEqual(4);
  });

  test('cannot know: blocks with most frames lost are left out; fewer than two blocks give null', () => {
    const timesS = frames(300).filter((t) => t < 1 || t > 2);
    const series = demodulate({ timesS, values: timesS.map((t) => at(5, t)) }, 5)!;
    expect(series.timesS.every((t) => t < 1 || t > 2)).toBe(true);
    expect(demodulate({ timesS: frames(10), values: frames(10) }, 5)).toBeNull();
    expect(demodulate({ timesS: frames(300), values: frames(300) }, 0)).toBeNull();
  });
});

describe('steadiness', () => {
  test('an amplitude that grows by 5 % from end to end changes by 0.05, and its middle third does not stray', () => {
    const normal = gaussian(3);
    const timesS = frames(600);
    const values = timesS.map((t) => (10 + 0.05 * t) * at(5, t) + 0.02 * normal());
    const found = steadiness({ timesS, values }, 5, 10.25)!;
    expect(found.change).toBeCloseTo(0.0488, 3);
    expect(Math.abs(found.change - 0.0488)).toBeLessThan(4 * found.changeU);
    expect(strays(found, 0.01)).toBe(true);
    expect(strays(found, 0.05)).toBe(false);
  });

  test('uncertainty of the change: its scatter over 150 steady records is the one stated, within 20 %', () => {
    const normal = gaussian(4);
    const timesS = frames(300);
    let [squares, stated] = [0, 0];
    for (let run = 0; run < 150; run++) {
      const found = steadiness(
        { timesS, values: timesS.map((t) => 5 * at(5, t, run) + 0.1 * normal()) },
        5,
        5,
      )!;
      squares += found.change ** 2;
      stated += found.changeU ** 2;
      expect(strays(found, 0)).toBe(false);
    }
    expect(Math.abs(Math.sqrt(squares / stated) - 1)).toBeLessThan(0.2);
  });

  test('swelling three times shows as sign changes; too few blocks give null', () => {
    const timesS = frames(600);
    const found = steadiness({ timesS, values: timesS.map((t) => (1 + 0.2 * at(0.3, t)) * at(5, t)) }, 5, 1)!;
    expect(found.signChanges).toBeGreaterThanOrEqual(5);
    expect(steadiness({ timesS: frames(30), values: frames(30) }, 5, 1)).toBeNull();
    expect(strays(null, 0.01)).toBe(false);
  });
});
