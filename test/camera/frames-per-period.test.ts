import { expect, test } from 'vitest';
import { frameDensity } from '../../src/camera/frames-per-period.ts';

test('frames a period, and a word only where harmonics cannot be seen though the motion can', () => {
  expect(frameDensity(2, 60)).toEqual({ framesPerPeriod: 30, warning: null });
  expect(frameDensity(20, 60).warning?.code).toBe('few-frames');
  expect(frameDensity(20, 60).warning?.sentence).toContain('100 frames/s');
  expect(frameDensity(40, 60)).toEqual({ framesPerPeriod: 1.5, warning: null });
});
