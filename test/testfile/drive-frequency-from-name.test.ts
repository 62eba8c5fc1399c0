import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { driveFrequencyFromName } from '../../src/testfile/drive-frequency-from-name.ts';

describe('names as people write them', () => {
  it.each([
    ['1.62Hz.mp4', 1.62],
    ['1p62_hz.mov', 1.62],
    ['f=1,62 Hz.mp4', 1.62],
    ['2p400_hz.mov', 2.4],
    ['IMG_0034_2Hz.MOV', 2],
    ['dwell-12.5hz-take2.mp4', 12.5],
    ['carriage 7 HZ (2).mp4', 7],
    ['0.0125kHz.avi', 12.5],
    ['f=3.25.mp4', 3.25],
    ['freq = 4,5.m4v', 4.5],
    ['/home/me/5Hz/1.62Hz.mp4', 1.62],
    ['C:\\clips\\1,62Hz.mp4', 1.62],
    ['1.5Hz_again_1.50Hz.mp4', 1.5],
    ['1.62Hz', 1.62],
  ])('%s is %d Hz', (name, hz) => {
    expect(driveFrequencyFromName(name)).toBeCloseTo(hz, 12);
  });
});

describe('names that do not tell one frequency', () => {
  it.each([
    'IMG_20240131_120501.mp4',
    '5Hz/IMG_0001.mp4',
    '1-5Hz sweep.mp4',
    '1 to 5 Hz.mp4',
    '1.0Hz_2.0Hz.mp4',
    '0Hz.mp4',
    '1.2.3Hz.mp4',
    'hz.mp4',
    '2024013112Hz.mp4',
    '60fps.mp4',
    'half=3.mp4',
    '',
  ])('%s', (name) => {
    expect(driveFrequencyFromName(name)).toBeNull();
  });
});

it('identity: any frequency written into a name in any of the three decimal signs is read back', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 99_999 }),
      fc.constantFrom('.', ',', 'p'),
      fc.constantFrom('Hz', '_hz', ' HZ', '-Hz'),
      (milli, sign, unit) => {
        const text = (milli / 1000).toFixed(3);
        expect(driveFrequencyFromName(`${text.replace('.', sign)}${unit}.mp4`)).toBe(Number(text));
      },
    ),
    { seed: 7 },
  );
});

it('identity: any text is answered with null or a positive number', () => {
  fc.assert(
    fc.property(fc.string(), (name) => {
      const hz = driveFrequencyFromName(name);
      expect(hz === null || (hz > 0 && Number.isFinite(hz))).toBe(true);
    }),
    { seed: 7 },
  );
});
