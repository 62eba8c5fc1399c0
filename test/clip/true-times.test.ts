import { describe, expect, test } from 'vitest';
import { frameTiming } from '../../src/clip/frame-timing.ts';
import { type StretchedClip, trueTimes } from '../../src/clip/true-times.ts';
import { InputError } from '../../src/errors.ts';

/** A clip captured at a true rate and stored stretched by a factor, as a camera writes it. */
function stored(trueFps: number, stretch: number, captureFps: number | null): StretchedClip {
  const ticks = Float64Array.from({ length: 480 }, (_, k) => Math.round((k * stretch * 90_000) / trueFps));
  const { regularity } = frameTiming(ticks, [1, 90_000]);
  return { path: '/clips/a.mp4', timesS: ticks.map((t) => t / 90_000), captureFps, regularity };
}

describe('a rate the file declares', () => {
  test.each([
    [240, 240, 8],
    [239.7, 240, 8], // the true rate of the sensor differs from the nominal one: the stretch does not
    [120.2, 120, 4],
    [958, 960, 32],
  ])(
    'true %f frames/s, declared %i, stretched %i times: true time comes back',
    (trueFps, declared, stretch) => {
      const result = trueTimes(stored(trueFps, stretch, declared));
      expect(result.stretch).toBe(stretch);
      expect(result.timesS[479]).toBeCloseTo(479 / trueFps, 5);
      expect(result.warnings).toHaveLength(1);
      expect(result.warnings[0]).toContain('slow motion');
    },
  );

  test.each([
    ['an ordinary clip that names its rate', 29.97, 1, 30],
    ['a fast clip stored in true time', 239.8, 1, 240],
    ['a clip that names none', 30, 1, null],
  ])('%s is left as it is', (_what, trueFps, stretch, declared) => {
    const clip = stored(trueFps, stretch, declared);
    expect(trueTimes(clip)).toEqual({ timesS: clip.timesS, stretch: 1, warnings: [] });
  });

  test('a stretch that is no whole number is used, with a remark', () => {
    const result = trueTimes(stored(240, 9.6, 240));
    expect(result.stretch).toBeCloseTo(9.6, 4);
    expect(result.warnings[1]).toContain('give the true capture rate');
  });

  test('a time lapse is refused', () => {
    expect(() => trueTimes(stored(1, 1 / 30, 1))).toThrow(/a time lapse cannot be measured/);
  });
});

describe('a rate that is given counts as it stands', () => {
  test('237.5 at 30 frames/s', () => {
    const result = trueTimes(stored(237.5, 237.5 / 30, 240), 237.5);
    expect(result.timesS[479]).toBeCloseTo(479 / 237.5, 6);
    expect(result.warnings).toEqual([]);
  });

  test('240 for a file at 29.97: exactly 240, with a hint at the eightfold 239.76', () => {
    const result = trueTimes(stored(30_000 / 1001, 1, null), 240);
    expect(479 / (result.timesS[479] ?? 0)).toBeCloseTo(240, 2);
    expect(result.warnings[0]).toContain('239.76');
  });

  test('identity: the rate of the file itself changes nothing', () => {
    const clip = stored(60, 1, null);
    expect(trueTimes(clip, 60).stretch).toBeCloseTo(1, 9);
  });

  test.each([29, 5])('%f below the 60 of the file is refused by a sentence', (given) => {
    expect(() => trueTimes(stored(60, 1, null), given)).toThrow(InputError);
    expect(() => trueTimes(stored(60, 1, null), given)).toThrow(
      `captured at ${given} frames/s, but it plays at 60`,
    );
  });

  test.each([0, -240, Number.NaN, Number.POSITIVE_INFINITY])('%f is no rate', (given) => {
    expect(() => trueTimes(stored(60, 1, null), given)).toThrow(/not a positive number/);
  });
});
