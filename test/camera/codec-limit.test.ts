import { describe, expect, test } from 'vitest';
import { type Compression, codecLimit, compressionOf } from '../../src/camera/codec-limit.ts';
import measured from '../data/codec_error.json' with { type: 'json' };

const alone = { residualRmsPx: null, stillAmplitudePx: null };

/** Error of each clip's amplitude over the standard uncertainty given to it. */
function errorsOverU(compression: Compression): number[] {
  return measured.rows
    .filter((row) => row.compression === compression)
    .map((row) => {
      const { uPx } = codecLimit(row.seenPx, compression, { ...alone, residualRmsPx: row.residualPx });
      return (row.seenPx - row.truePx) / uPx;
    });
}

describe('calibration: clips of known motion through real encoders (test/data/codec_error.py)', () => {
  test.each(['inter', 'intra'] as const)(
    '%s: errors are as large as stated, neither hidden nor cried up',
    (compression) => {
      const errors = errorsOverU(compression);
      const rms = Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length);
      expect(errors.length).toBeGreaterThanOrEqual(35);
      expect(rms).toBeGreaterThan(0.6);
      expect(rms).toBeLessThan(1.3);
      expect(errors.filter((e) => Math.abs(e) <= 2).length / errors.length).toBeGreaterThan(0.9);
    },
  );

  test('the dead zone is real: some clip hides nine tenths of a motion of 0.1 px, none a tenth of 0.5 px coded frame by frame', () => {
    const share = (compression: string, truePx: number): number[] =>
      measured.rows
        .filter((row) => row.compression === compression && row.truePx === truePx)
        .map((row) => row.seenPx / row.truePx);
    expect(Math.min(...share('inter', 0.1))).toBeLessThan(0.15);
    expect(Math.min(...share('intra', 0.5))).toBeGreaterThan(0.9);
  });
});

describe('codec-limited dwells', () => {
  test('under half a pixel between frames, under a twentieth frame by frame, never where nothing is compressed', () => {
    const limited = (px: number, compression: Compression) => codecLimit(px, compression, alone).limited;
    expect([limited(0.49, 'inter'), limited(0.5, 'inter')]).toEqual([true, false]);
    expect([limited(0.04, 'intra'), limited(0.06, 'intra')]).toEqual([true, false]);
    expect(limited(0, 'none')).toBe(false);
    expect(codecLimit(0.2, 'inter', alone).warning?.code).toBe('codec-limited');
    expect(codecLimit(0.2, 'inter', alone).warning?.sentence).toMatch(
      /^Codec-limited: the motion is only 0.20 px/,
    );
  });

  test('a codec that shows no motion shows no residual either, and is still not believed', () => {
    expect(codecLimit(0, 'inter', { ...alone, residualRmsPx: 0 }).uPx).toBeGreaterThanOrEqual(0.05);
    expect(codecLimit(0.001, 'none', { ...alone, residualRmsPx: 0.01 }).uPx).toBe(0);
  });

  test('the doubt falls as the motion grows, without a jump', () => {
    let before = codecLimit(0, 'inter', alone).uPx;
    for (let px = 0.005; px < 30; px += 0.005) {
      const { uPx } = codecLimit(px, 'inter', alone);
      expect(uPx).toBeLessThanOrEqual(before);
      expect(before - uPx).toBeLessThan(0.002);
      before = uPx;
    }
  });
});

describe('the control: a still patch that moves', () => {
  test('a dwell not three times as large is below the floor, and that is what is told', () => {
    const found = codecLimit(0.8, 'inter', { ...alone, stillAmplitudePx: 0.3 });
    expect(found.warning?.code).toBe('below-floor');
    expect(found.warning?.sentence).toContain('moves by 0.30 px');
    expect(codecLimit(0.8, 'inter', { ...alone, stillAmplitudePx: 0.2 }).warning).toBeNull();
    expect(codecLimit(0.02, 'none', { ...alone, stillAmplitudePx: 0.01 }).warning?.code).toBe('below-floor');
  });
});

test.each([
  ['h264', 'inter'],
  ['hevc', 'inter'],
  ['vp9', 'inter'],
  ['av1', 'inter'],
  ['mpeg4', 'inter'],
  ['mjpeg', 'intra'],
  ['prores', 'intra'],
  ['dnxhd', 'intra'],
  ['rawvideo', 'none'],
  ['ffv1', 'none'],
  ['HEVC', 'inter'],
  ['something new', 'inter'],
] as const)('%s is coded %s', (codec, compression) => {
  expect(compressionOf(codec)).toBe(compression);
});
