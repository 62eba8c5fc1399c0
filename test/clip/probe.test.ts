import { copyFileSync, readFileSync, truncateSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { probeClip } from '../../src/clip/probe.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import { FFV1, ffmpeg, H264, H264_B, HEIGHT, makeClip, runToMake, WIDTH } from '../helpers/make-clip.ts';
import { boxRange, DISPLAY_MATRIX, withDisplayMatrix, withFloatTag } from '../helpers/movie-boxes.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const probe = (path: string): ReturnType<typeof probeClip> => probeClip(path, { ffmpeg });
let plain: string;
beforeAll(() => {
  plain = makeClip(folder, { name: 'plain.mp4', frames: 24, encoder: H264_B });
});

test('an ordinary clip', async () => {
  const clip = await probe(plain);
  expect(clip).toMatchObject({
    ...{ path: plain, container: 'mov', codec: 'h264', pixelFormat: 'yuv420p', bitDepth: 8 },
    ...{ codedWidth: WIDTH, codedHeight: HEIGHT, displayedWidth: WIDTH, displayedHeight: HEIGHT },
    ...{ rotationDeg: 0, mirrored: false, pixelAspect: 1 },
    ...{ frameCount: 24, nominalFps: 30, durationS: 0.8, captureFps: null },
    ...{ gaps: [], duplicates: [], warnings: [] },
  });
  expect(clip.measuredFps).toBeCloseTo(30, 9);
  expect([...clip.timesS]).toEqual(Array.from({ length: 24 }, (_, n) => (n * 512) / 15_360));
  expect([...clip.keyFrames].map((key, n) => (key ? n : -1)).filter((n) => n >= 0)).toEqual([0, 10, 20]);
  expect(clip.reorderDepth).toBeGreaterThan(0);
});

describe('orientation', () => {
  test.each([
    ['90', 90, false],
    ['180', 180, false],
    ['270', 270, false],
    ['mirrored', 0, true],
  ] as const)('display matrix %s (ISO/IEC 14496-12)', async (name, rotationDeg, mirrored) => {
    const path = at(`turned-${name}.mp4`);
    withDisplayMatrix(plain, path, DISPLAY_MATRIX[name]);
    const upright = rotationDeg % 180 === 0;
    expect(await probe(path)).toMatchObject({
      ...{ rotationDeg, mirrored, codedWidth: WIDTH, codedHeight: HEIGHT },
      displayedWidth: upright ? WIDTH : HEIGHT,
      displayedHeight: upright ? HEIGHT : WIDTH,
    });
  });

  test('a turn by no right angle is told, the picture stays as stored', async () => {
    const path = at('turned-30.mp4');
    withDisplayMatrix(plain, path, [Math.sqrt(0.75), 0.5, -0.5, Math.sqrt(0.75)]);
    const clip = await probe(path);
    expect(clip).toMatchObject({ rotationDeg: 0, displayedWidth: WIDTH });
    expect(clip.warnings).toEqual(['The clip is marked as turned by no right angle; it is shown as stored.']);
  });
});

test('pixel aspect 4:3 widens the displayed picture', async () => {
  const path = makeClip(folder, { name: 'wide.mp4', frames: 3, encoder: H264, output: ['-aspect', '2:1'] });
  expect(await probe(path)).toMatchObject({
    pixelAspect: 4 / 3,
    codedWidth: 96,
    displayedWidth: 128,
    displayedHeight: 64,
  });
});

describe('slow motion', () => {
  const KEY = 'com.android.capture.fps';
  test('the capture rate as a 32-bit float under its key, as phones write it', async () => {
    withFloatTag(plain, at('float.mp4'), KEY, 240);
    expect((await probe(at('float.mp4'))).captureFps).toBe(240);
  });

  test('the capture rate as text', async () => {
    const output = ['-movflags', 'use_metadata_tags', '-metadata', `${KEY}=119.88`];
    const path = makeClip(folder, { name: 'text-tag.mp4', frames: 3, encoder: H264, output });
    expect((await probe(path)).captureFps).toBe(119.88);
  });
});

test('gaps, with where they are', async () => {
  const pts = { expression: '(N+gt(N\\,6)*3)*1000', ticksPerS: 30_000 };
  const path = makeClip(folder, { name: 'gap.mp4', frames: 20, encoder: H264, pts });
  const clip = await probe(path);
  expect(clip.gaps).toEqual([{ afterFrame: 6, intervalS: 4 / 30, missingFrames: 3 }]);
  expect(clip.warnings).toEqual(['3 frames missing in 1 gap, the longest 133.3 ms at 0.20 s.']);
});

test('frames with the same time are told and keep their places', async () => {
  const pts = { expression: '(N-eq(N\\,5))*1000', ticksPerS: 30_000 };
  const path = makeClip(folder, { name: 'repeat.mkv', frames: 9, encoder: FFV1, pts });
  const clip = await probe(path);
  expect(clip.frameCount).toBe(9);
  expect(clip.duplicates).toEqual([5]);
  expect(clip.warnings).toContain('Frames with the same time as the frame before: 1.');
});

test('one frame is a clip, with a warning', async () => {
  const clip = await probe(makeClip(folder, { name: 'one.mp4', frames: 1, encoder: H264 }));
  expect(clip).toMatchObject({ frameCount: 1, measuredFps: null });
  expect(clip.warnings).toEqual(['The clip has one frame only: no motion can be seen in it.']);
});

test.each(['-y.mp4', 'a:b.mp4', '"quoted\' $HOME `x`.mp4', '100%d.mp4', ' Größe 測定 .mp4', '#EXTM3U.mp4'])(
  'a file may be called %j',
  async (name) => {
    copyFileSync(plain, at(name));
    expect((await probe(at(name))).frameCount).toBe(24);
  },
);

describe('what cannot be measured is refused in one sentence', () => {
  const refused = async (path: string, says: string | RegExp): Promise<void> => {
    const probing = probe(path);
    await expect(probing).rejects.toThrow(InputError);
    await expect(probing).rejects.toThrow(says);
  };

  test('missing', () => refused(at('none.mp4'), 'does not exist'));

  test('sound only', async () => {
    runToMake(['-f', 'lavfi', '-i', 'sine=d=0.2', '-c:a', 'aac', '-strict', '-2', at('sound.mp4')]);
    await refused(at('sound.mp4'), 'sound.mp4: holds sound only, no video');
  });

  test('cut off before its index was written', async () => {
    copyFileSync(plain, at('cut.mp4'));
    truncateSync(at('cut.mp4'), boxRange(plain, 'moov').start + 20);
    await refused(at('cut.mp4'), /^cut\.mp4: the index of the clip is missing or broken/);
  });

  test('its beginning lost', async () => {
    const file = readFileSync(plain);
    file.fill(0, 0, 64);
    writeFileSync(at('headless.mp4'), file);
    await refused(at('headless.mp4'), 'a file without the beginning of a video');
  });

  test('a beginning and nothing behind it', async () => {
    writeFileSync(at('stub.mp4'), readFileSync(plain).subarray(0, 40));
    await refused(at('stub.mp4'), /^stub\.mp4: /);
  });

  test('more than 16384 px a side', async () => {
    const path = makeClip(folder, { name: 'huge.mkv', frames: 1, width: 16_400, height: 2, encoder: FFV1 });
    await refused(path, 'the picture is 16400 x 2 px; at most 16384 px a side');
  });

  test('an ffmpeg that fails', async () => {
    const broken = { ...ffmpeg, path: fakeFfmpeg('exits-1') };
    await expect(probeClip(plain, { ffmpeg: broken })).rejects.toThrow(
      new InputError(
        'plain.mp4: ffmpeg ended with status 1 ("clip.mp4: nothing good in here"); the clip cannot be decoded.',
      ),
    );
  });

  test('an ffmpeg that falls silent', async () => {
    const silent = { ...ffmpeg, path: fakeFfmpeg('stalls') };
    await expect(probeClip(plain, { ffmpeg: silent, stallS: 0.2 })).rejects.toThrow(
      /^plain\.mp4: ffmpeg fell silent/,
    );
  });

  test('an ffmpeg that is gone', async () => {
    const gone = { ...ffmpeg, path: '/no/such/ffmpeg' };
    await expect(probeClip(plain, { ffmpeg: gone })).rejects.toThrow(/ffmpeg could not be started.*ENOENT/);
  });
});

test('a clip that lost its end is measured as far as it goes, with a warning', async () => {
  const path = makeClip(folder, {
    name: 'faststart.mp4',
    frames: 30,
    encoder: H264,
    output: ['-movflags', '+faststart'],
  });
  const { start, end } = boxRange(path, 'mdat');
  truncateSync(path, Math.round((start + end) / 2));
  const clip = await probe(path);
  expect(clip.frameCount).toBeGreaterThan(5);
  expect(clip.frameCount).toBeLessThan(30);
  expect(clip.warnings.join()).toMatch(/damaged or cut off/);
});

test('cancel', async () => {
  await expect(probeClip(plain, { ffmpeg, signal: AbortSignal.abort() })).rejects.toThrow(CancelledError);
});
