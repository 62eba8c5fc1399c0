import { join } from 'node:path';
import { createCanvas, loadImage } from '@napi-rs/canvas';
import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { toDisplayed } from '../../src/clip/coordinates.ts';
import {
  type FrameImage,
  type FrameImageOptions,
  frameImage,
  imageSize,
} from '../../src/clip/frame-image.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import { FFV1, ffmpeg, H264_B, HEIGHT, makeClip, WIDTH } from '../helpers/make-clip.ts';
import { DISPLAY_MATRIX, withDisplayMatrix } from '../helpers/movie-boxes.ts';
import { readNumber } from '../helpers/numbered-frames.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

/** Decodes a picture with a library that is not ffmpeg, to its red channel (the clips are gray). */
async function pixels(image: FrameImage): Promise<{ data: Uint8Array; width: number; height: number }> {
  const loaded = await loadImage(Buffer.from(image.bytes));
  const canvas = createCanvas(loaded.width, loaded.height);
  const context = canvas.getContext('2d');
  context.drawImage(loaded, 0, 0);
  const { data } = context.getImageData(0, 0, loaded.width, loaded.height);
  const red = Uint8Array.from({ length: loaded.width * loaded.height }, (_, i) => data[4 * i] ?? 0);
  return { data: red, width: loaded.width, height: loaded.height };
}

async function numberIn(image: FrameImage): Promise<number> {
  return readNumber({ ...(await pixels(image)), maxValue: 255 });
}

describe('exactly the frame asked for, with B-frames at a variable rate', () => {
  const tick = (n: number): number => n * 3003 + ((n * n * 577) % 1000);
  let clip: ClipInfo;
  beforeAll(async () => {
    const pts = { expression: 'N*3003+mod(N*N*577\\,1000)', ticksPerS: 90_000 };
    clip = await probe(makeClip(folder, { name: 'numbers.mp4', frames: 40, encoder: H264_B, pts }));
  });

  test.each([0, 1, 9, 10, 11, 18, 39])('frame %i by its index', async (index) => {
    const image = await frameImage(clip, { index }, { ffmpeg });
    expect(await numberIn(image)).toBe(index);
    expect(image).toMatchObject({
      index,
      timeS: tick(index) / 90_000,
      width: WIDTH,
      height: HEIGHT,
      mediaType: 'image/jpeg',
    });
  });

  test.each([
    ['at its own time', tick(17) / 90_000, 17],
    ['until the next one comes', (tick(18) - 1) / 90_000, 17],
    ['before the first', -5, 0],
    ['after the last', 99, 39],
  ])('the frame on show %s', async (_what, timeS, index) => {
    const image = await frameImage(clip, { timeS }, { ffmpeg, format: 'png' });
    expect(await numberIn(image)).toBe(index);
    expect(image).toMatchObject({ index, mediaType: 'image/png' });
  });

  test.each([-1, 40, 0.5, Number.NaN])('there is no frame %f', async (index) => {
    await expect(frameImage(clip, { index }, { ffmpeg })).rejects.toThrow(
      new InputError(`numbers.mp4 has no frame ${index}; it has frames 0 to 39.`),
    );
  });

  test('cancel, and an ffmpeg that stalls', async () => {
    await expect(frameImage(clip, { index: 3 }, { ffmpeg, signal: AbortSignal.abort() })).rejects.toThrow(
      CancelledError,
    );
    const silent = { ...ffmpeg, path: fakeFfmpeg('stalls') };
    await expect(frameImage(clip, { index: 3 }, { ffmpeg: silent, stallS: 0.2 })).rejects.toThrow(
      /fell silent/,
    );
  });
});

describe('as displayed', () => {
  // One bright blob off centre tells every turn and mirror image apart.
  const blob = { x: 70, y: 12 };
  const paint = (x: number, y: number): number =>
    0.2 + 0.7 * Math.exp(-((x - blob.x) ** 2 + (y - blob.y) ** 2) / (2 * 4 ** 2));
  let plain: string;
  beforeAll(() => {
    const encoder = ['-c:v', 'libx264', '-qp', '1', '-preset', 'ultrafast'];
    plain = makeClip(folder, { name: 'blob.mp4', frames: 2, encoder, paint });
  });

  /** Centre of the light above the background, px. */
  async function centre(image: FrameImage): Promise<{ x: number; y: number }> {
    const { data, width } = await pixels(image);
    const floor = 0.35 * 255;
    let sum = 0;
    let sumX = 0;
    let sumY = 0;
    for (const [i, value] of data.entries()) {
      const light = Math.max(0, value - floor);
      sum += light;
      sumX += light * (i % width);
      sumY += light * Math.floor(i / width);
    }
    return { x: sumX / sum, y: sumY / sum };
  }

  test.each(['90', '180', '270', 'mirrored'] as const)(
    '%s: the blob is where toDisplayed says',
    async (how) => {
      const path = join(folder, `blob-${how}.mp4`);
      withDisplayMatrix(plain, path, DISPLAY_MATRIX[how]);
      const clip = await probe(path);
      const image = await frameImage(clip, { index: 1 }, { ffmpeg, format: 'png' });
      const seen = await centre(image);
      const expected = toDisplayed(blob, clip);
      expect([image.width, image.height]).toEqual([clip.displayedWidth, clip.displayedHeight]);
      expect(Math.abs(seen.x - expected.x)).toBeLessThan(0.1);
      expect(Math.abs(seen.y - expected.y)).toBeLessThan(0.1);
    },
  );

  test('pixel aspect 4:3, turned, scaled to half: the blob is where toDisplayed says, halved', async () => {
    const wide = makeClip(folder, {
      name: 'wide.mp4',
      frames: 2,
      encoder: ['-c:v', 'libx264', '-qp', '1'],
      paint,
      output: ['-aspect', '2:1'],
    });
    const path = join(folder, 'wide-turned.mp4');
    withDisplayMatrix(wide, path, DISPLAY_MATRIX['270']);
    const clip = await probe(path);
    const image = await frameImage(clip, { index: 0 }, { ffmpeg, format: 'png', maxHeight: 64 });
    expect([image.width, image.height]).toEqual([32, 64]);
    const seen = await centre(image);
    const expected = toDisplayed(blob, clip);
    expect(Math.abs(seen.x - ((expected.x + 0.5) / 2 - 0.5))).toBeLessThan(0.2);
    expect(Math.abs(seen.y - ((expected.y + 0.5) / 2 - 0.5))).toBeLessThan(0.2);
  });

  test('10 bit comes out in 8, in the right brightness', async () => {
    const path = makeClip(folder, {
      name: 'ten.mkv',
      frames: 2,
      pixelFormat: 'yuv420p10le',
      encoder: FFV1,
      paint: () => 0.5,
    });
    const clip = await probe(path);
    const { data } = await pixels(await frameImage(clip, { index: 1 }, { ffmpeg }));
    // Half of full scale in limited range: (0.5 * 1023 - 64) / (940 - 64) of white.
    const expected = ((0.5 * 1020 - 64) / 876) * 255;
    expect(Math.abs((data[WIDTH * 20 + 40] ?? 0) - expected)).toBeLessThan(4);
  });
});

describe('the size of the picture', () => {
  const clip = { displayedWidth: 1920, displayedHeight: 1080 };
  test.each<[Pick<FrameImageOptions, 'maxWidth' | 'maxHeight'>, number, number]>([
    [{}, 1920, 1080],
    [{ maxWidth: 960 }, 960, 540],
    [{ maxWidth: 960, maxHeight: 270 }, 480, 270],
    [{ maxWidth: 4000 }, 1920, 1080],
    [{ maxHeight: 1 }, 2, 1],
  ])('%j', (limits, width, height) => {
    expect(imageSize(clip, limits)).toEqual({ width, height });
  });
});
