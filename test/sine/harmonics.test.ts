import { describe, expect, test } from 'vitest';
import { aliasHz, harmonicRatios } from '../../src/sine/harmonics.ts';
import { gaussian } from './seeded-noise.ts';

const times = new Float64Array(300).map((_, i) => i / 60);
const turn = (k: number, t: number) => 2 * Math.PI * k * t;

describe('harmonics over the fundamental', () => {
  test('identity: a Fourier sum gives its own ratios, also over a broken number of periods', () => {
    const values = times.map(
      (t) =>
        4 * Math.cos(turn(3.13, t)) +
        0.4 * Math.sin(2 * turn(3.13, t)) +
        0.08 * Math.cos(5 * turn(3.13, t) + 1),
    );
    const ratios = harmonicRatios(times, values, 3.13).map(({ value }) => value!);
    [0.1, 0, 0, 0.02].forEach((ratio, k) => {
      expect(ratios[k]).toBeCloseTo(ratio, 10);
    });
  });

  test('Fourier series of a square wave: third 1/3, fifth 1/5, even ones none (sampled finely)', () => {
    const fine = new Float64Array(4000).map((_, i) => i / 2000);
    const square = fine.map((t) => Math.sign(Math.sin(turn(3.5, t) + 1e-6)));
    const ratios = harmonicRatios(fine, square, 3.5).map(({ value }) => value!);
    [0, 1 / 3, 0, 1 / 5].forEach((ratio, k) => {
      expect(Math.abs(ratios[k]! - ratio)).toBeLessThan(0.005);
    });
  });

  test('uncertainty of a harmonic that is not there: its mean square is twice u^2, both parts counted', () => {
    const normal = gaussian(12);
    let [squares, stated] = [0, 0];
    for (let run = 0; run < 200; run++) {
      const values = times.map((t) => 2 * Math.cos(turn(4.2, t)) + 0.1 * normal());
      const second = harmonicRatios(times, values, 4.2)[0]!;
      squares += second.value! ** 2;
      stated += second.u! ** 2;
    }
    expect(Math.abs(squares / (2 * stated) - 1)).toBeLessThan(0.22);
  });

  test('harmonics that alias onto the fundamental, another or the mean are told as unknown, not invented', () => {
    // at 60 frames/s and 20 Hz: the second shows at 20, the third at 0, the fourth at 20, the fifth at 20
    const values = times.map((t) => Math.cos(turn(20, t)) + 0.3 * Math.cos(turn(40, t)));
    expect(harmonicRatios(times, values, 20).every(({ value }) => value === null)).toBe(true);
    expect(aliasHz(40, 60)).toBeCloseTo(20, 12);
    // at 13 Hz all four have a place of their own, above half the frame rate too
    const clear = times.map((t) => Math.cos(turn(13, t)) + 0.3 * Math.cos(turn(39, t)));
    expect(harmonicRatios(times, clear, 13)[1]!.value).toBeCloseTo(0.3, 10);
  });

  test('cannot know: short records and bad frequencies give four unknowns', () => {
    const short = harmonicRatios(times.slice(0, 10), times.slice(0, 10), 3);
    expect(short).toHaveLength(4);
    expect(short.every(({ value, u }) => value === null && u === null)).toBe(true);
    expect(harmonicRatios(times, times, 0).every(({ value }) => value === null)).toBe(true);
  });
});
