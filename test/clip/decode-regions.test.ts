import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { decodeRegions, decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { ffmpeg, H264_B, makeClip } from '../helpers/make-clip.ts';
import { seeNumbers, upTo } from '../helpers/see-numbers.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const probe = (path: string): Promise<ClipInfo> => probeClip(path, { ffmpeg });

describe('a part of the clip', () => {
  let clip: ClipInfo;
  beforeAll(async () => {
    clip = await probe(makeClip(folder, { name: 'part.mp4', frames: 40, encoder: H264_B }));
  });

  test('from a time on, in the middle of a group', async () => {
    const seen = await seeNumbers(clip, { fromS: 25 / 30 });
    expect(seen.numbers).toEqual(upTo(40, 25));
    expect(seen.timesS[0]).toBe(25 / 30);
    expect(seen.result).toMatchObject({ delivered: 15, lostFrames: [] });
  });

  test('at most so many', async () => {
    const seen = await seeNumbers(clip, { fromS: 0.4, maxFrames: 5 });
    expect(seen.numbers).toEqual(upTo(17, 12));
    expect(seen.result).toMatchObject({ delivered: 5, lostFrames: [] });
  });

  test('key frames only', async () => {
    const seen = await seeNumbers(clip, { onlyKeyFrames: true });
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
    expect((await seeNumbers(clip, { fromS: 99 })).result).toMatchObject({ delivered: 0, lostFrames: [] });
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
