import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import type { DecodeOptions } from '../../src/clip/decoded-frame.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { cutRealFfmpegAfter, fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import { ffmpeg, H264, H264_B, makeClip } from '../helpers/make-clip.ts';
import { boxRange } from '../helpers/movie-boxes.ts';
import { texture } from '../helpers/numbered-frames.ts';
import { seeNumbers, upTo } from '../helpers/see-numbers.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

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
    const seen = await seeNumbers(clip);
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
    process.env['RECORDING'] = join(folder, 'victim.nut');
    return { ffmpeg: { ...ffmpeg, path: fakeFfmpeg(how) } };
  };
  beforeAll(async () => {
    clip = await probe(makeClip(folder, { name: 'victim.mp4', frames: 30, encoder: H264 }));
    expect((await seeNumbers(clip, fake('records'))).numbers).toEqual(upTo(30));
  });

  test('frames cut short: those that are whole count, the others are lost', async () => {
    const { result } = await seeNumbers(clip, fake('short-frames'));
    expect(result.delivered).toBe(5);
    expect(result.lostFrames).toEqual(upTo(30, 5));
    expect(result.complaints).toContain('The decoded pictures end in the middle of one.');
  });

  test.each([
    [
      'killed-mid-way',
      /^victim\.mp4: ffmpeg was killed by SIGKILL after 5 frames; measure the clip again\.$/,
    ],
    ['exits-1', /^victim\.mp4: ffmpeg ended with status 1 \("clip\.mp4: nothing good in here"\)/],
    ['floods-stderr', /^victim\.mp4: no frame of the clip could be decoded \("again and again"\)/],
    ['talks-nonsense', /not a NUT stream/],
  ] as const)('%s', async (how, says) => {
    await expect(seeNumbers(clip, fake(how))).rejects.toThrow(says);
  });

  test('stalls-mid-way', async () => {
    const decoding = seeNumbers(clip, { ...fake('stalls-mid-way'), stallS: 1 });
    await expect(decoding).rejects.toThrow(/^victim\.mp4: ffmpeg fell silent after 5 frames and was stopped/);
  });

  test('one that is gone', async () => {
    const gone = { ffmpeg: { ...ffmpeg, path: '/no/such/ffmpeg' } };
    await expect(seeNumbers(clip, gone)).rejects.toThrow(InputError);
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
