import { expect, test } from 'vitest';
import { smearWarning } from '../../src/camera/marker-smear.ts';

test('a marker that crosses 12 px in one exposure is smeared (speed times time)', () => {
  expect(smearWarning(1200, 0.01)).toMatchObject({
    code: 'marker-smeared',
    sentence: expect.stringContaining('12 px'),
  });
  expect(smearWarning(700, 0.01)).toBeNull();
});

test('without a known exposure nothing is claimed', () => {
  expect(smearWarning(1e6, null)).toBeNull();
});
