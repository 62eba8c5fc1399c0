import { expect, test } from 'vitest';
import { filmingWarnings, isRefused } from '../../src/camera/filming-warnings.ts';

const filming = {
  frameRateHz: 60,
  durationS: 5,
  exposureS: null,
  exposureUS: null,
  stampJitterS: null,
  stampQuantumS: null,
  compression: 'none',
} as const;

test.each([
  [2, false, []],
  [17.5, false, ['few-frames']],
  [20, false, ['few-frames', 'harmonic-folded']],
  [35, false, ['alias-folded']],
  [40, false, ['alias-folded', 'harmonic-folded']],
  [60.1, true, ['alias-refused']],
] as const)('%d Hz at 60 frames/s: refused %s, %o', (frequencyHz, refused, codes) => {
  expect(isRefused(frequencyHz, filming)).toBe(refused);
  expect(filmingWarnings(frequencyHz, filming).map((w) => w.code)).toEqual(codes);
});
