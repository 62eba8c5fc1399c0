import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { decodeRegions, decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import type { DecodeOptions, DecodeResult } from '../../src/clip/decoded-frame.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { cutRealFfmpegAfter, fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import {
  type ClipRecipe,
  FFV1,
  ffmpeg,
  H264,
  H264_B,
  hasEncoder,
  makeClip,
  runToMake,
} from '../helpers/make-clip.ts';
import {
  boxRange,
  DISPLAY_MATRIX,
  editStart,
  movieTicksPerS,
  withDisplayMatrix,
  withEdit,
} from '../helpers/movie-boxes.ts';
import { readNumber, sample, texture } from '../helpers/numbered-frames.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

/** What a pass over whole frames saw: the number in each picture with the index and time it came under. */
interface Seen {
  readonly numbers: number[];
  readonly indices: number[];
  readonly timesS: number[];
  readonly result: DecodeResult;
}

async function see(clip: ClipInfo, options: DecodeOptions = {}): Promise<Seen> {
  const seen = { numbers: [] as number[], indices: [] as number[], timesS: [] as number[] };
  const result = await decodeWholeFrames(
    clip,
    ({ index, timeS, regions: [whole] }) => {
      if (whole !== undefined) seen.numbers.push(readNumber(whole));
      seen.indices.push(index);
      seen.timesS.push(timeS);
    },
    { ffmpeg, ...options },
  );
  return { ...seen, result };
}

const upTo = (end: number, first = 0): number[] => Array.from({ length: end - first }, (_, i) => first + i);

describe('all frames and exact ticks', () => {
  // Uneven on purpose: jitter of up to a third of the interval, and a hole after frame 20.
  const ticksPerS = 90_000;
  const tick = (n: number): number => n * 3003 + ((n * n * 577) % 1000) + (n > 20 ? 12_000 : 0);
  const pts = { expression: 'N*3003+mod(N*N*577\\,1000)+gt(N\\,20)*12000', ticksPerS };
  test.for<[string, Pick<ClipRecipe, 'name' | 'encoder'>]>([
    ['H.264 in MP4', { name: 'vfr.mp4', encoder: H264 }],
    ['H.264 with a pyramid of B-frames in MP4', { name: 'vfr-b.mp4', encoder: H264_B }],
    ['H.264 with B-frames in MOV', { name: 'vfr-b.mov', encoder: H264_B }],
    ['H.264 with B-frames in MPEG-TS', { name: 'vfr-b.ts', encoder: H264_B }],
  ])(
    'variable frame rate, %s: every frame under its own number and its own tick',
    async ([, recipe], context) => {
      const path = makeClip(folder, { ...recipe, frames: 40, pts });
      const alone = await runFfmpeg(ffmpeg.path, ['-nostdin', '-i', path, '-f', 'null', '-']);
      if (alone.signal !== null)
        context.skip(`this build of ffmpeg crashes on such a file by itself (${alone.signal})`);
      const clip = await probe(path);
      const seen = await see(clip);
      expect(seen.numbers).toEqual(upTo(40));
      expect(seen.indices).toEqual(upTo(40));
      expect(seen.timesS).toEqual(upTo(40).map((n) => tick(n) / ticksPerS));
      expect([...clip.timesS]).toEqual(seen.timesS);
      expect(seen.result).toMatchObject({
        delivered: 40,
        lostFrames: [],
        doubtfulFrames: [],
        complaints: [],
      });
      expect(clip.regularity.variable).toBe(true);
    },
  );

  test('Matroska rounds to milliseconds when written; what it holds comes back exactly', async () => {
    const clip = await probe(makeClip(folder, { name: 'vfr.mkv', frames: 40, encoder: H264_B, pts }));
    const seen = await see(clip);
    expect(seen.numbers).toEqual(upTo(40));
    expect(seen.timesS).toEqual(upTo(40).map((n) => Math.round(tick(n) / 90) / 1000));
  });

  test('AVI', async () => {
    const clip = await probe(
      makeClip(folder, { name: 'plain.avi', frames: 12, encoder: ['-c:v', 'mjpeg', '-q:v', '3'] }),
    );
    const seen = await see(clip);
    expect(seen.numbers).toEqual(upTo(12));
    expect(seen.timesS).toEqual(upTo(12).map((n) => n / 30));
  });
});

describe('an edit list (ISO/IEC 14496-12) shows only its part, from time 0', () => {
  test.each<[string, readonly string[]]>([
    ['without B-frames', H264],
    ['with B-frames', H264_B],
  ])('%s: 20 frames from frame 7, in the middle of a group', async (what, encoder) => {
    const plain = makeClip(folder, { name: `edit ${what}.mp4`, frames: 40, encoder });
    const tickPerFrame = 15_360 / 30;
    const edited = at(`edited ${what}.mp4`);
    withEdit(
      plain,
      edited,
      editStart(plain) + 7 * tickPerFrame,
      Math.floor((20 * movieTicksPerS(plain)) / 30),
    );
    const clip = await probe(edited);
    const seen = await see(clip);
    expect(seen.numbers).toEqual(upTo(27, 7));
    expect(seen.timesS).toEqual(upTo(20).map((n) => n / 30));
    expect([...clip.timesS]).toEqual(seen.timesS);
    expect(seen.result.lostFrames).toEqual([]);
    const later = await see(clip, { fromS: 0.5 });
    expect(later.numbers).toEqual(upTo(27, 22));
  });
});

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
    withDisplayMatrix(plain, at('turned.mp4'), DISPLAY_MATRIX['90']);
    const clip = await probe(at('turned.mp4'));
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
      ...['-pix_fmt', 'bgr0', '-c:v', 'ffv1', at('rgb.mkv')],
    ]);
    const clip = await probe(at('rgb.mkv'));
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
      const seen = await see(clip);
      expect(seen.numbers).toEqual(upTo(frames));
      expect(seen.indices).toEqual(upTo(frames));
      expect(seen.result.lostFrames).toEqual([]);
    });
  }
});

describe('a part of the clip', () => {
  let clip: ClipInfo;
  beforeAll(async () => {
    clip = await probe(makeClip(folder, { name: 'part.mp4', frames: 40, encoder: H264_B }));
  });

  test('from a time on, in the middle of a group', async () => {
    const seen = await see(clip, { fromS: 25 / 30 });
    expect(seen.numbers).toEqual(upTo(40, 25));
    expect(seen.timesS[0]).toBe(25 / 30);
    expect(seen.result).toMatchObject({ delivered: 15, lostFrames: [] });
  });

  test('at most so many', async () => {
    const seen = await see(clip, { fromS: 0.4, maxFrames: 5 });
    expect(seen.numbers).toEqual(upTo(17, 12));
    expect(seen.result).toMatchObject({ delivered: 5, lostFrames: [] });
  });

  test('key frames only', async () => {
    const seen = await see(clip, { onlyKeyFrames: true });
    expect(seen.numbers).toEqual([0, 10, 20, 30]);
    expect(seen.indices).toEqual([0, 10, 20, 30]);
    expect(seen.result.lostFrames).toEqual([]);
  });

  test('until the receiver has enough', async () => {
    const numbers: number[] = [];
    const result = await decodeWholeFrames(clip, ({ index }) => numbers.push(index) < 3, { ffmpeg });
    expect(numbers).toEqual([0, 1, 2]);
    expect(result).toMatchObject({ delivered: 3, lostFrames: [] });
  });

  test('nothing, where there is nothing', async () => {
    expect((await see(clip, { fromS: 99 })).result).toMatchObject({ delivered: 0, lostFrames: [] });
  });

  test('the buffer is the same for every frame: memory does not grow with the clip', async () => {
    const buffers = new Set<ArrayBufferLike>();
    await decodeWholeFrames(clip, ({ regions: [whole] }) => whole && buffers.add(whole.data.buffer), {
      ffmpeg,
    });
    expect(buffers.size).toBe(1);
  });

  test('regions of different sizes are a mistake of ours', async () => {
    const regions = [
      { x: 0, y: 0, width: 10, height: 10 },
      { x: 0, y: 0, width: 12, height: 10 },
    ];
    await expect(decodeRegions(clip, regions, () => {}, { ffmpeg })).rejects.toThrow(
      /must have the same size/,
    );
  });
});

describe('damage costs its frames and not the rest', () => {
  const frames = 40;
  test('Motion JPEG: the damaged frame is lost, all others are as they were', async () => {
    const path = makeClip(folder, {
      name: 'hurt.mov',
      frames,
      encoder: ['-c:v', 'mjpeg', '-q:v', '3', '-huffman', 'default'],
    });
    const file = readFileSync(path);
    const starts: number[] = [];
    for (let i = file.indexOf('ffd8ff', 0, 'hex'); i >= 0; i = file.indexOf('ffd8ff', i + 1, 'hex'))
      starts.push(i);
    expect(starts).toHaveLength(frames);
    const clip = await probe(path);
    // Behind the headers of picture 17: an impossible run of coefficients.
    const scan = file.indexOf('ffda', starts[17], 'hex');
    file.fill(0xfe, scan + 20, (starts[18] ?? 0) - 16);
    writeFileSync(path, file);
    const seen = await see(clip);
    expect(seen.result.lostFrames).toEqual([17]);
    expect(seen.result.doubtfulFrames).toEqual([]);
    expect(seen.numbers).toEqual(upTo(frames).filter((n) => n !== 17));
    expect(seen.result.complaints.length).toBeGreaterThan(0);
  });

  test('H.264: what is not as it was is lost or listed as doubtful; from the next key frame on all is well', async () => {
    const path = makeClip(folder, {
      name: 'hurt.mp4',
      frames,
      width: 320,
      height: 240,
      encoder: H264_B,
      paint: texture,
    });
    const clip = await probe(path);
    const whole = new Map<number, string>();
    const keep = (into: Map<number, string>) => (index: number, data: ArrayLike<number>) =>
      into.set(index, Buffer.from(Uint8Array.from(data)).toString('latin1'));
    await decodeWholeFrames(clip, ({ index, regions: [r] }) => r && keep(whole)(index, r.data), { ffmpeg });
    const file = readFileSync(path);
    const { start, end } = boxRange(path, 'mdat');
    file.fill(0x5a, Math.round(start + 0.4 * (end - start)), Math.round(start + 0.42 * (end - start)));
    writeFileSync(path, file);

    const hurt = new Map<number, string>();
    const result = await decodeWholeFrames(
      clip,
      ({ index, regions: [r] }) => r && keep(hurt)(index, r.data),
      { ffmpeg },
    );
    expect(result.lostFrames.length).toBeGreaterThan(0);
    expect(result.delivered + result.lostFrames.length).toBe(frames);
    const changed = [...hurt].filter(([index, data]) => data !== whole.get(index)).map(([index]) => index);
    expect(result.doubtfulFrames).toEqual(expect.arrayContaining(changed));
    expect(result.doubtfulFrames.length).toBeLessThan(frames / 2);
  });
});

describe('an ffmpeg that misbehaves', () => {
  let clip: ClipInfo;
  const FRAME_BYTES = 96 * 64;
  const fake = (how: Parameters<typeof fakeFfmpeg>[0]): DecodeOptions => {
    cutRealFfmpegAfter(5.5 * FRAME_BYTES);
    return { ffmpeg: { ...ffmpeg, path: fakeFfmpeg(how) }, stallS: 2 };
  };
  beforeAll(async () => {
    clip = await probe(makeClip(folder, { name: 'victim.mp4', frames: 30, encoder: H264 }));
  });

  test('frames cut short: those that are whole count, the others are lost', async () => {
    const { result } = await see(clip, fake('short-frames'));
    expect(result.delivered).toBe(5);
    expect(result.lostFrames).toEqual(upTo(30, 5));
    expect(result.complaints).toContain('The decoded pictures end in the middle of one.');
  });

  test.each([
    [
      'killed-mid-way',
      /^victim\.mp4: ffmpeg was killed by SIGKILL after 5 frames; measure the clip again\.$/,
    ],
    ['stalls-mid-way', /^victim\.mp4: ffmpeg fell silent after 5 frames and was stopped/],
    ['exits-1', /^victim\.mp4: ffmpeg ended with status 1 \("clip\.mp4: nothing good in here"\)/],
    ['floods-stderr', /^victim\.mp4: no frame of the clip could be decoded \("again and again"\)/],
    ['talks-nonsense', /not a NUT stream/],
  ] as const)('%s', async (how, says) => {
    await expect(see(clip, fake(how))).rejects.toThrow(says);
  });

  test('one that is gone', async () => {
    const gone = { ffmpeg: { ...ffmpeg, path: '/no/such/ffmpeg' } };
    await expect(see(clip, gone)).rejects.toThrow(InputError);
  });

  test('cancel while it is silent', async () => {
    const controller = new AbortController();
    const decoding = decodeWholeFrames(clip, ({ index }) => (index === 4 ? controller.abort() : undefined), {
      ...fake('stalls-mid-way'),
      signal: controller.signal,
    });
    await expect(decoding).rejects.toThrow(CancelledError);
  });

  test('an error of the receiver stops it and comes out', async () => {
    const decoding = decodeWholeFrames(
      clip,
      () => {
        throw new RangeError('mine');
      },
      fake('stalls-mid-way'),
    );
    await expect(decoding).rejects.toThrow(new RangeError('mine'));
  });
});
