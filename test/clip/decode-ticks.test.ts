import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { type ClipRecipe, ffmpeg, H264, H264_B, makeClip } from '../helpers/make-clip.ts';
import { editStart, movieTicksPerS, withEdit } from '../helpers/movie-boxes.ts';
import { seeNumbers, upTo } from '../helpers/see-numbers.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

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
      const seen = await seeNumbers(clip);
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
    const seen = await seeNumbers(clip);
    expect(seen.numbers).toEqual(upTo(40));
    expect(seen.timesS).toEqual(upTo(40).map((n) => Math.round(tick(n) / 90) / 1000));
  });

  test('AVI', async () => {
    const clip = await probe(
      makeClip(folder, { name: 'plain.avi', frames: 12, encoder: ['-c:v', 'mjpeg', '-q:v', '3'] }),
    );
    const seen = await seeNumbers(clip);
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
    const edited = join(folder, `edited ${what}.mp4`);
    withEdit(
      plain,
      edited,
      editStart(plain) + 7 * tickPerFrame,
      Math.floor((20 * movieTicksPerS(plain)) / 30),
    );
    const clip = await probe(edited);
    const seen = await seeNumbers(clip);
    expect(seen.numbers).toEqual(upTo(27, 7));
    expect(seen.timesS).toEqual(upTo(20).map((n) => n / 30));
    expect([...clip.timesS]).toEqual(seen.timesS);
    expect(seen.result.lostFrames).toEqual([]);
    const later = await seeNumbers(clip, { fromS: 0.5 });
    expect(later.numbers).toEqual(upTo(27, 22));
  });
});
