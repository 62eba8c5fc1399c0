import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  foldFrequency,
  harmonicOnFundamental,
  harmonicWarning,
  judgeAlias,
  unfoldFrequency,
  unfoldPhase,
  unknownFrequencyWarning,
} from '../../src/camera/aliasing.ts';
import { fasterRateHz, PHONE_FRAME_RATES_HZ } from '../../src/camera/frame-rates.ts';
import { fitSine } from './fit-sine.ts';

describe('folding', () => {
  test.each([
    [35, 25, true],
    [61, 1, false],
    [47.5, 12.5, true],
    [12, 12, false],
  ])('%d Hz at 60 frames/s appears at %d Hz (abs(f - fs round(f / fs)))', (f, aliasHz, flipped) => {
    expect(foldFrequency(f, 60)).toMatchObject({ aliasHz, flipped });
  });

  test('round trip: unfolding the alias of any frequency gives it back', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.1, max: 500, noNaN: true }),
        fc.double({ min: 24, max: 240, noNaN: true }),
        (f, fs) => {
          const fold = foldFrequency(f, fs);
          expect(fold.aliasHz).toBeLessThanOrEqual(fs / 2 + 1e-9);
          expect(unfoldFrequency(fold.aliasHz, fold, fs)).toBeCloseTo(f, 9);
        },
      ),
      { seed: 12, numRuns: 200 },
    );
  });

  test('sampled motion has the amplitude of the true one at the alias, and its lag with the sign of the fold', () => {
    const timesS = Float64Array.from({ length: 300 }, (_, i) => i / 60);
    for (const f of [35, 61.3, 47.5, 82, 7]) {
      const x = timesS.map((t) => 3 * Math.cos(2 * Math.PI * f * t - 0.9));
      const fold = foldFrequency(f, 60);
      const atAlias = fitSine(timesS, x, fold.aliasHz);
      expect(atAlias.amplitude).toBeCloseTo(3, 9);
      expect(unfoldPhase(atAlias.lagRad, fold)).toBeCloseTo(0.9, 9);
      expect(fitSine(timesS, x, f).lagRad).toBeCloseTo(0.9, 9);
    }
  });
});

describe('judging a dwell of known frequency', () => {
  test('below half the frame rate directly, above it folded', () => {
    expect(judgeAlias(12, 60, 5)).toMatchObject({ kind: 'direct', warning: null });
    const folded = judgeAlias(35, 60, 5);
    expect(folded.kind).toBe('folded');
    expect(folded.warning?.sentence).toContain('25 Hz');
    expect(folded.warning?.sentence).toContain('180 frames/s');
  });

  test.each([60, 59.9, 60.2, 120.1, 30, 30.1, 90, 29.8])(
    '%d Hz at 60 frames/s is refused, with a rate to use instead',
    (f) => {
      const { kind, warning } = judgeAlias(f, 60, 10);
      expect(kind).toBe('refused');
      expect(warning?.code).toBe('alias-refused');
      const rate = Number(/film at (\d+) frames/.exec(warning?.sentence ?? '')?.[1]);
      expect(judgeAlias(f, rate, 10).kind).not.toBe('refused');
    },
  );

  test('a longer film holds an alias nearer to standstill: 61 Hz needs two seconds of it', () => {
    expect(judgeAlias(61, 60, 1.5).kind).toBe('refused');
    expect(judgeAlias(61, 60, 3).kind).toBe('folded');
  });

  test('a slow direct motion is never called an alias, however short the film', () => {
    expect(judgeAlias(0.5, 60, 1).kind).toBe('direct');
    expect(judgeAlias(2, 30, 0.5).kind).toBe('direct');
  });

  test('why near multiples are refused: at exactly half the rate a fit at the drive frequency is not determined', () => {
    const timesS = Float64Array.from({ length: 300 }, (_, i) => i / 60);
    expect(() =>
      fitSine(
        timesS,
        timesS.map((t) => Math.cos(2 * Math.PI * 30 * t)),
        30,
      ),
    ).toThrow(/not determined/);
  });
});

describe('harmonics that fold onto the fundamental', () => {
  test('the second at a third of the frame rate, the third at a quarter, none elsewhere', () => {
    expect(harmonicOnFundamental(20, 60, 5)).toBe(2);
    expect(harmonicOnFundamental(15, 60, 5)).toBe(3);
    expect(harmonicOnFundamental(40, 60, 5)).toBe(2);
    expect(harmonicOnFundamental(17.5, 60, 5)).toBeNull();
    expect(harmonicOnFundamental(0.4, 60, 1)).toBeNull();
    expect(harmonicWarning(2, 20, 60).sentence).toContain('second harmonic of 20 Hz');
  });

  test('what it does: 3 % of second harmonic at 20 Hz moves the amplitude by up to 3 %', () => {
    const timesS = Float64Array.from({ length: 300 }, (_, i) => i / 60);
    const x = timesS.map((t) => Math.cos(2 * Math.PI * 20 * t) + 0.03 * Math.cos(2 * Math.PI * 40 * t));
    const design = timesS.reduce((sum, t, i) => sum + (2 / 300) * x[i]! * Math.cos(2 * Math.PI * 20 * t), 0);
    expect(design).toBeCloseTo(1.03, 9);
  });
});

test('without a set frequency the program says that it cannot be told', () => {
  const { code, sentence } = unknownFrequencyWarning(4.2, 60);
  expect(code).toBe('alias-unknown');
  expect(sentence).toContain('cannot be told from 55.8 Hz');
});

test('the frame rate advised shows the motion directly where a phone can, and never at a standstill', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.5, max: 900, noNaN: true }), (f) => {
      const rate = fasterRateHz(f);
      expect(PHONE_FRAME_RATES_HZ).toContain(rate);
      if (f <= 960 / 5) expect(rate).toBeGreaterThanOrEqual(5 * f);
      else expect(judgeAlias(f, rate, 10).kind).not.toBe('refused');
    }),
    { seed: 14, numRuns: 300 },
  );
});
