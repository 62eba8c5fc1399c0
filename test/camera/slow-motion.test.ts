import { describe, expect, test } from 'vitest';
import { checkFrequency, slowMotionFactor, undoSlowMotion } from '../../src/camera/slow-motion.ts';
import { InputError } from '../../src/errors.ts';

describe('slow motion undone', () => {
  test('240 frames/s stored at 30: one second of file is an eighth of a true second', () => {
    const factor = slowMotionFactor(240, 30);
    expect(factor).toBe(0.125);
    expect(Array.from(undoSlowMotion(Float64Array.of(0, 1 / 30, 2 / 30), factor))).toEqual([
      0,
      expect.closeTo(1 / 240, 15),
      expect.closeTo(2 / 240, 15),
    ]);
  });

  test('a clip captured and stored at one rate is left alone, its clock a little off included', () => {
    expect(slowMotionFactor(60, 60)).toBe(1);
    expect(slowMotionFactor(30, 30.02)).toBe(1);
  });

  test.each([
    [24, 30, /below the file's own 30/],
    [0, 30, /captureFps is 0/],
    [Number.NaN, 30, /captureFps is NaN/],
    [-240, 30, /captureFps is -240/],
  ])("captureFps %d for a file of %d frames/s is the user's to correct", (capture, file, message) => {
    expect(() => slowMotionFactor(capture, file)).toThrow(InputError);
    expect(() => slowMotionFactor(capture, file)).toThrow(message);
  });
});

describe('measured against set frequency', () => {
  test('equal within a per cent, or within three standard uncertainties, is agreed', () => {
    expect(checkFrequency(2.301, 0.0005, 2.3, 60)).toMatchObject({ kind: 'agrees', warning: null });
    expect(checkFrequency(2.4, 0.04, 2.3, 60).kind).toBe('agrees');
  });

  test.each([
    [2, 60, 120],
    [4, 60, 240],
    [8, 30, 240],
    [10, 24, 240],
    [5, 24, 120],
    [2.5, 24, 60],
    [16, 30, 480],
    [9.6, 25, 240],
  ])('a clip stretched %d times at %d frames/s: captureFps %d is named', (ratio, frameRateHz, captureFps) => {
    const check = checkFrequency(1.7, 0.001, 1.7 * ratio * 1.002, frameRateHz);
    expect(check).toMatchObject({ kind: 'time-scale', ratio, captureFps });
    expect(check.warning?.code).toBe('slow-motion-likely');
    expect(check.warning?.sentence).toContain(`captureFps ${captureFps}`);
  });

  test('captureFps stated four times too high shows as four times the frequency', () => {
    const check = checkFrequency(8, 0.001, 2, 240);
    expect(check).toMatchObject({ kind: 'time-scale', ratio: 0.25, captureFps: 60 });
    expect(check.warning?.sentence).toContain('too high');
  });

  test('an alias is an alias, not slow motion: 35 Hz seen at 25 Hz, 61 Hz at 1 Hz', () => {
    expect(checkFrequency(25, 0.001, 35, 60)).toMatchObject({ kind: 'alias', warning: null });
    expect(checkFrequency(1, 0.001, 61, 60)).toMatchObject({ kind: 'alias', warning: null });
  });

  test('anything else is a mismatch to look into', () => {
    const check = checkFrequency(2.3, 0.001, 2.5, 60);
    expect(check).toMatchObject({ kind: 'mismatch', captureFps: null });
    expect(check.warning?.sentence).toContain('2.300 Hz but 2.5 Hz was set');
  });
});
