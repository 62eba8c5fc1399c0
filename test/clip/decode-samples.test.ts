import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { decodeRegions, decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { FFV1, ffmpeg, hasEncoder, makeClip, runToMake } from '../helpers/make-clip.ts';
import { DISPLAY_MATRIX, withDisplayMatrix } from '../helpers/movie-boxes.ts';
import { sample, texture } from '../helpers/numbered-frames.ts';
import { seeNumbers, upTo } from '../helpers/see-numbers.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

describe('brightness comes out as it went in', () => {
  const lossless: [string, string, readonly string[]][] = [
    ['8 bit 4:2:0', 'yuv420p', FFV1],
    ['8 bit 4:2:2', 'yuv422p', FFV1],
    ['8 bit 4:4:4', 'yuv444p', FFV1],
    ['8 bit monochrome', 'gray', FFV1],
    ['10 bit 4:2:0', 'yuv420p10le', FFV1],
    ['10 bit 4:2:2', 'yuv422p10le', FFV1],
    ['12 bit 4:4:4', 'yuv444p12le', FFV1],
    ['8 bit H.264', 'yuv420p', ['-c:v', 'libx264', '-qp', '0', '-bf', '2', '-preset', 'ultrafast']],
    [
      '10 bit HEVC',
      'yuv420p10le',
      ['-c:v', 'libx265', '-x265-params', 'lossless=1:log-level=error', '-preset', 'ultrafast'],
    ],
  ];
  const regions = [
    { x: 4, y: 6, width: 16, height: 10 },
    { x: 40, y: 30, width: 16, height: 10 },
    { x: 80, y: 54, width: 16, height: 10 },
  ];
  test.each(lossless)('%s (%s), three regions', async (what, pixelFormat, encoder) => {
    const path = makeClip(folder, {
      name: `${what.replaceAll(':', '')}.mkv`,
      frames: 4,
      pixelFormat,
      encoder,
      paint: texture,
    });
    const clip = await probe(path);
    const bitDepth = Number(/(10|12)le/.exec(pixelFormat)?.[1] ?? 8);
    expect([clip.pixelFormat, clip.bitDepth]).toEqual([pixelFormat, bitDepth]);
    let frames = 0;
    await decodeRegions(
      clip,
      regions,
      ({ index, regions: images }) => {
        frames++;
        for (const [i, { data, width, height, maxValue }] of images.entries()) {
          const { x: left = 0, y: top = 0 } = regions[i] ?? {};
          expect([width, height, maxValue]).toEqual([16, 10, 2 ** bitDepth - 1]);
          expect(data).toBeInstanceOf(bitDepth === 8 ? Uint8Array : Uint16Array);
          const painted = Array.from(
            { length: 160 },
            (_, k) => [left + (k % 16), top + Math.floor(k / 16)] as const,
          );
          expect([...data]).toEqual(painted.map(([x, y]) => sample(texture, x, y, index, bitDepth)));
        }
      },
      { ffmpeg },
    );
    expect(frames).toBe(4);
  });

  test('an odd size, whole and in part', async () => {
    const path = makeClip(folder, {
      name: 'odd.mkv',
      frames: 2,
      width: 37,
      height: 21,
      encoder: FFV1,
      paint: texture,
    });
    const clip = await probe(path);
    const corner = { x: 22, y: 12, width: 14, height: 8 };
    await decodeWholeFrames(
      clip,
      ({ index, regions: [whole] }) => {
        expect([whole?.width, whole?.height]).toEqual([37, 21]);
        expect(whole?.data[20 * 37 + 36]).toBe(sample(texture, 36, 20, index, 8));
      },
      { ffmpeg },
    );
    const { delivered } = await decodeRegions(
      clip,
      [corner],
      ({ index, regions: [part] }) => {
        expect(part?.data[7 * 14 + 13]).toBe(sample(texture, 35, 19, index, 8));
      },
      { ffmpeg },
    );
    expect(delivered).toBe(2);
  });

  test('a turned clip is decoded unturned: regions are in stored pixels', async () => {
    const encoder = ['-c:v', 'libx264', '-qp', '0', '-preset', 'ultrafast'];
    const plain = makeClip(folder, { name: 'upright.mp4', frames: 2, encoder, paint: texture });
    withDisplayMatrix(plain, join(folder, 'turned.mp4'), DISPLAY_MATRIX['90']);
    const clip = await probe(join(folder, 'turned.mp4'));
    expect(clip.rotationDeg).toBe(90);
    const region = { x: 60, y: 40, width: 20, height: 10 };
    const { delivered } = await decodeRegions(
      clip,
      [region],
      ({ index, regions: [part] }) => {
        expect(part?.data[9 * 20 + 19]).toBe(sample(texture, 79, 49, index, 8));
      },
      { ffmpeg },
    );
    expect(delivered).toBe(2);
  });

  test('full range stays full range: nothing is stretched or clipped (Motion JPEG)', async () => {
    const paint = (x: number): number => (x < 48 ? 0 : 1);
    const encoder = ['-c:v', 'mjpeg', '-q:v', '1', '-qmin', '1'];
    const path = makeClip(folder, { name: 'full.mov', frames: 2, pixelFormat: 'yuvj420p', encoder, paint });
    const clip = await probe(path);
    expect(clip.colour.range).toBe('full');
    await decodeWholeFrames(
      clip,
      ({ regions: [whole] }) => {
        expect([whole?.data[10], whole?.data[80]]).toEqual([0, 255]);
      },
      { ffmpeg },
    );
  });

  test('RGB has no brightness plane: green shines brighter than blue (BT.601: 0.587 and 0.114)', async () => {
    runToMake([
      ...['-f', 'lavfi', '-i', 'color=c=0x00ff00:s=32x16:d=0.1,pad=64:16:0:0:color=0x0000ff'],
      ...['-pix_fmt', 'bgr0', '-c:v', 'ffv1', join(folder, 'rgb.mkv')],
    ]);
    const clip = await probe(join(folder, 'rgb.mkv'));
    expect(clip.warnings.join()).toContain('brightness is computed');
    const { delivered } = await decodeWholeFrames(
      clip,
      ({ regions: [whole] }) => {
        expect(Math.abs((whole?.data[5] ?? 0) / 255 - 0.587)).toBeLessThan(0.03);
        expect(Math.abs((whole?.data[50] ?? 0) / 255 - 0.114)).toBeLessThan(0.03);
      },
      { ffmpeg },
    );
    expect(delivered).toBeGreaterThan(1);
  });
});

describe('codecs, as far as the ffmpeg at hand can make them', () => {
  const codecs: [string, string, string, readonly string[], string][] = [
    [
      'hevc',
      'libx265',
      'c.mp4',
      ['-preset', 'ultrafast', '-x265-params', 'log-level=error', '-tag:v', 'hvc1'],
      'yuv420p',
    ],
    ['h264 10 bit', 'libx264', 'c10.mp4', ['-preset', 'ultrafast'], 'yuv420p10le'],
    ['vp9', 'libvpx-vp9', 'c.webm', ['-deadline', 'realtime', '-cpu-used', '8', '-b:v', '1M'], 'yuv420p'],
    [
      'vp8',
      'libvpx',
      'c8.webm',
      ['-deadline', 'realtime', '-cpu-used', '8', '-b:v', '1M', '-auto-alt-ref', '1'],
      'yuv420p',
    ],
    ['av1', 'libaom-av1', 'c.mkv', ['-strict', '-2', '-cpu-used', '8', '-crf', '40', '-b:v', '0'], 'yuv420p'],
    ['prores', 'prores_ks', 'c.mov', [], 'yuv422p10le'],
    ['mpeg4', 'mpeg4', 'c4.mp4', ['-bf', '2', '-q:v', '3'], 'yuv420p'],
  ];
  const frames = 8;
  for (const [codec, encoder, name, options, pixelFormat] of codecs) {
    test.skipIf(!hasEncoder(encoder))(`${codec} (skipped where ffmpeg lacks ${encoder})`, async (context) => {
      const width = 128;
      const recipe = { name, frames, width, pixelFormat, encoder: ['-c:v', encoder, ...options] };
      let path: string;
      try {
        path = makeClip(folder, recipe);
      } catch (error) {
        // Some builds list an encoder that cannot do this format; the message tells which.
        return context.skip(`this ffmpeg cannot encode it: ${String(error).slice(0, 200)}`);
      }
      const clip = await probe(path);
      expect(clip.codec).toBe(codec.split(' ')[0]);
      const seen = await seeNumbers(clip);
      expect(seen.numbers).toEqual(upTo(frames));
      expect(seen.indices).toEqual(upTo(frames));
      expect(seen.result.lostFrames).toEqual([]);
    });
  }
});
