import { describe, expect, test } from 'vitest';
import { checkFrequency } from '../../src/camera/slow-motion.ts';

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
