import { describe, expect, test } from 'vitest';
import { readListing } from '../../src/clip/stream-listing.ts';

// Lines as printed by the versions named, for files of the same content.
const VERSION_4 = `
Input #0, mov,mp4,m4a,3gp,3g2,mj2, from 'file:/clips/rot.mp4':
  Metadata:
    minor_version   : 512
    com.android.capture.fps: 240
  Duration: 00:00:02.00, start: 0.000000, bitrate: 109 kb/s
    Stream #0:0(und): Video: h264 (High) (avc1 / 0x31637661), yuv420p, 322x242 [SAR 1:1 DAR 161:121], 102 kb/s, 30 fps, 30 tbr, 15360 tbn, 60 tbc (default)
    Metadata:
      rotate          : 270
      handler_name    : VideoHandler
    Side data:
      displaymatrix: rotation of 90.00 degrees
Output #0, framecrc, to 'pipe:1':
    Stream #0:0(und): Video: h264 (High) (avc1 / 0x31637661), yuv420p, 1x1 [SAR 1:1 DAR 161:121], q=2-31`;
const VERSION_5 = `
Input #0, mov,mp4,m4a,3gp,3g2,mj2, from 'file:/clips/rot.mp4':
  Metadata:
    minor_version   : 512
    com.android.capture.fps: 240
  Duration: 00:00:02.00, start: 0.000000, bitrate: 109 kb/s
  Stream #0:0[0x1](und): Video: h264 (High) (avc1 / 0x31637661), yuv420p(progressive), 322x242 [SAR 1:1 DAR 161:121], 102 kb/s, 30 fps, 30 tbr, 15360 tbn (default)
    Metadata:
      handler_name    : VideoHandler
    Side data:
      displaymatrix: rotation of 90.00 degrees`;
const VERSION_7 = VERSION_5.replace('    Side data:', '      Side data:').replace(
  'displaymatrix',
  'Display Matrix',
);

describe('the listing reads alike in every version', () => {
  test.each([
    ['4.1', VERSION_4],
    ['5.1', VERSION_5],
    ['7.x', VERSION_7],
  ])('%s', (_version, text) => {
    const listing = readListing(text.split('\n'));
    expect(listing.video).toEqual({
      codec: 'h264',
      pixelFormat: 'yuv420p',
      codedWidth: 322,
      codedHeight: 242,
      pixelAspect: 1,
      nominalFps: 30,
      colour: { range: null, spaces: null, hdr: null },
      interlaced: false,
      matrixAngleDeg: 90,
    });
    expect(listing.tags.get('com.android.capture.fps')).toBe('240');
    expect([listing.videoStreams, listing.audioStreams]).toEqual([1, 0]);
  });
});

const videoLine = (rest: string): ReturnType<typeof readListing> =>
  readListing([`  Stream #0:0: Video: ${rest}`]);

test('HDR from a phone: 10 bit, BT.2020 with hybrid log-gamma', () => {
  const { video } = videoLine(
    'hevc (Main 10) (hvc1 / 0x31637668), yuv420p10le(tv, bt2020nc/bt2020/arib-std-b67), 3840x2160, 45000 kb/s, 59.94 fps, 59.94 tbr, 600 tbn (default)',
  );
  expect(video?.colour).toEqual({ range: 'limited', spaces: 'bt2020nc/bt2020/arib-std-b67', hdr: 'HLG' });
  expect(video?.pixelFormat).toBe('yuv420p10le');
  expect(video?.nominalFps).toBe(60_000 / 1001);
});

test('full range, and the perceptual quantizer', () => {
  expect(videoLine('mjpeg, yuvj420p(pc, bt470bg/unknown/unknown), 96x64, 30 fps').video?.colour.range).toBe(
    'full',
  );
  const pq = videoLine('hevc, yuv420p10le(tv, bt2020nc/bt2020/smpte2084, progressive), 96x64, 24 fps').video;
  expect(pq?.colour.hdr).toBe('PQ');
});

test('the aspect of the container overrules that of the codec', () => {
  const { video } = videoLine(
    'h264 (High), yuv420p, 720x576 [SAR 16:15 DAR 4:3], SAR 64:45 DAR 16:9, 25 fps, 25 tbr',
  );
  expect(video?.pixelAspect).toBe(64 / 45);
});

test('an unknown aspect 0:1 counts as square', () => {
  expect(videoLine('rawvideo, gray, 96x64 [SAR 0:1 DAR 0:1], 25 fps').video?.pixelAspect).toBe(1);
});

test('interlaced pictures are told', () => {
  expect(videoLine('h264 (High), yuv420p(tv, bt709, top first), 720x576, 25 fps').video?.interlaced).toBe(
    true,
  );
});

test('a cover picture is no video stream, a second video stream is counted', () => {
  const cover = readListing([
    '  Stream #0:0: Audio: aac (LC), 44100 Hz, stereo, fltp',
    '  Stream #0:1: Video: mjpeg (Baseline), yuvj444p(pc), 600x600 [SAR 1:1 DAR 1:1], 90k tbr, 90k tbn (attached pic)',
  ]);
  expect(cover).toMatchObject({ video: null, videoStreams: 0, audioStreams: 1 });
  const line = '  Stream #0:0: Video: h264 (High), yuv420p, 96x64, 30 fps, 30 tbr';
  expect(readListing([line, line.replace('#0:0', '#0:1').replace('96x64', '32x32')])).toMatchObject({
    videoStreams: 2,
    video: { codedWidth: 96 },
  });
});

test('a stream whose pictures are unknown gives null', () => {
  expect(videoLine('none (xvc1 / 0x31637678), none, 96x64, 30 fps').video).toBeNull();
  expect(videoLine('h264 (avc1 / 0x31637661), none, 30 fps').video).toBeNull();
});
