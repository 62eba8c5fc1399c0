import { describe, expect, test } from 'vitest';
import { stackedLumaFilters } from '../../src/clip/decode-filters.ts';
import { lumaAccess } from '../../src/clip/pixel-format.ts';

describe('brightness is taken as it is wherever there is a plane of it', () => {
  test.each([
    ['yuv420p', 8, ['extractplanes=y']],
    ['yuvj420p', 8, ['extractplanes=y']],
    ['yuv422p10le', 10, ['extractplanes=y']],
    ['yuv444p12le', 12, ['extractplanes=y']],
    ['yuva444p10le', 10, ['extractplanes=y']],
    ['yuva444p12le', 12, ['format=yuv444p12le', 'extractplanes=y']],
    ['gray', 8, []],
    ['gray10le', 10, []],
    ['gray16le', 16, []],
    ['nv12', 8, ['format=yuv420p', 'extractplanes=y']],
    ['p010le', 10, ['format=yuv420p10le', 'extractplanes=y']],
    ['uyvy422', 8, ['format=yuv422p', 'extractplanes=y']],
  ])('%s: %i bit', (format, bitDepth, filters) => {
    expect(lumaAccess(format)).toEqual({ bitDepth, filters, beforeCrop: false, exact: true });
  });

  test.each(['yuv411p', 'yuv410p', 'yuvj411p'])(
    '%s: chroma too coarse to crop at even corners first',
    (format) => {
      expect(lumaAccess(format)).toMatchObject({ beforeCrop: true, exact: true });
    },
  );
});

test.each([
  ['rgb24', 'gray', 8],
  ['gbrp', 'gray', 8],
  ['pal8', 'gray', 8],
  ['bgra', 'gray', 8],
  ['gbrp10le', 'gray16le', 16],
  ['rgb48le', 'gray16le', 16],
])('%s has no brightness plane: %s is computed', (format, computed, bitDepth) => {
  expect(lumaAccess(format)).toEqual({
    bitDepth,
    filters: [`format=${computed}`],
    beforeCrop: false,
    exact: false,
  });
});

describe('the filter chain', () => {
  const picture = { pixelFormat: 'yuv420p', codedWidth: 320, codedHeight: 240 };
  const region = { x: 10, y: 20, width: 40, height: 30 };
  test('one region: cut, then brightness', () => {
    expect(stackedLumaFilters(picture, [region])).toEqual(['crop=40:30:10:20', 'extractplanes=y']);
  });

  test('the whole picture is not cut', () => {
    expect(stackedLumaFilters(picture, [{ x: 0, y: 0, width: 320, height: 240 }])).toEqual([
      'extractplanes=y',
    ]);
  });

  test('several regions: one chain that splits and stacks', () => {
    expect(stackedLumaFilters(picture, [region, { ...region, x: 100 }])).toEqual([
      'split=2[w0][w1];[w0]crop=40:30:10:20,extractplanes=y[c0];[w1]crop=40:30:100:20,extractplanes=y[c1];[c0][c1]vstack=inputs=2',
    ]);
  });

  test('coarse chroma: brightness before the split', () => {
    expect(stackedLumaFilters({ ...picture, pixelFormat: 'yuv411p' }, [region, region])[0]).toMatch(
      /^extractplanes=y,split=2\[w0\]\[w1\];\[w0\]crop=40:30:10:20\[c0\]/,
    );
  });

  test('no region is a mistake of ours', () => {
    expect(() => stackedLumaFilters(picture, [])).toThrow(/At least one region/);
  });
});
