import { delimiter } from 'node:path';
import { describe, expect, test } from 'vitest';
import { everyFrameOptions } from '../../src/clip/every-frame-options.ts';
import { type FfmpegCandidate, ffmpegCandidates, findFfmpeg } from '../../src/clip/find-ffmpeg.ts';
import { InputError } from '../../src/errors.ts';
import { fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import { ffmpeg } from '../helpers/make-clip.ts';

const working = fakeFfmpeg('tells-old-version');

describe('the order of search', () => {
  test('is: variable, ffmpeg-static, PATH, @ffmpeg-installer/ffmpeg', () => {
    const order = ffmpegCandidates({ DWELLBOOK_FFMPEG: '/x' }).map((candidate) => candidate.origin);
    expect(order).toEqual(['DWELLBOOK_FFMPEG', 'ffmpeg-static', 'PATH', '@ffmpeg-installer/ffmpeg']);
  });

  test('an empty variable counts as none', () => {
    expect(ffmpegCandidates({ DWELLBOOK_FFMPEG: '' })[0]?.path).toBeNull();
  });

  test('the first that runs is taken, one that does not run is passed over', async () => {
    const candidates: FfmpegCandidate[] = [
      { origin: 'DWELLBOOK_FFMPEG', path: null },
      { origin: 'ffmpeg-static', path: '/no/binary/was/downloaded' },
      { origin: 'PATH', path: working },
      { origin: '@ffmpeg-installer/ffmpeg', path: ffmpeg.path },
    ];
    expect(await findFfmpeg(candidates)).toEqual({
      path: working,
      version: 'N-12345-gabcdef',
      formatLibrary: [58, 24],
      origin: 'PATH',
    });
  });
});

describe('what the variable names is never passed over silently', () => {
  test.each([
    ['a missing file', '/no/such/ffmpeg', 'ENOENT'],
    ['a file that is not executable', import.meta.filename, 'EACCES'],
    ['another program', fakeFfmpeg('talks-nonsense'), 'does not tell a version'],
    ['one that fails', fakeFfmpeg('exits-1'), 'nothing good in here'],
  ])('%s is refused with its name and the reason', async (_what, path, reason) => {
    const candidates: FfmpegCandidate[] = [
      { origin: 'DWELLBOOK_FFMPEG', path },
      { origin: 'PATH', path: working },
    ];
    const search = findFfmpeg(candidates);
    await expect(search).rejects.toThrow(InputError);
    await expect(search).rejects.toThrow(`DWELLBOOK_FFMPEG names ${path}`);
    await expect(search).rejects.toThrow(reason);
  });
});

test('without any ffmpeg the message says what to install', async () => {
  const search = findFfmpeg([
    { origin: 'ffmpeg-static', path: null },
    { origin: 'PATH', path: `/nowhere${delimiter}/ffmpeg` },
  ]);
  await expect(search).rejects.toThrow(InputError);
  await expect(search).rejects.toThrow(
    /install ffmpeg, or run "npm install ffmpeg-static", or set DWELLBOOK_FFMPEG/,
  );
});

test('options are called as the version at hand calls them (-fps_mode since 5.1)', () => {
  const at = (major: number, minor: number) =>
    everyFrameOptions({ ...ffmpeg, formatLibrary: [major, minor] }, [1, 90_000]);
  expect(at(58, 24)).toEqual(['-vsync', '0', '-enc_time_base', '1:90000']);
  expect(at(59, 16)).toEqual(['-vsync', '0', '-enc_time_base', '1:90000']);
  expect(at(59, 27)).toEqual(['-fps_mode', 'passthrough', '-enc_time_base', '1:90000']);
  expect(at(61, 1)).toEqual(['-fps_mode', 'passthrough', '-enc_time_base', '1:90000']);
});
