import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { endedBadly } from '../../src/clip/clip-messages.ts';
import { clipTicks, decodingPass } from '../../src/clip/decode-plan.ts';
import { ffmpegArguments } from '../../src/clip/ffmpeg-arguments.ts';
import type { Ffmpeg } from '../../src/clip/find-ffmpeg.ts';
import { FrameMatcher } from '../../src/clip/frame-matcher.ts';
import { NutReader } from '../../src/clip/nut-reader.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import type { FramePicture } from './engine.ts';

const JPEG_QUALITY = '3'; // of 2 to 31: no visible blocks at full size

/** Which frames to show, and how large. */
export interface FrameRunOptions {
  readonly first: number;
  readonly count: number;
  /** Frames are made no wider than this, and never larger than they are. */
  readonly widthPx: number;
  /** Only frames that decode without others: a quick look over the clip. */
  readonly onlyKeyFrames: boolean;
  readonly signal: AbortSignal;
}

/**
 * Decodes a run of frames as they are displayed: upright, with square pixels, as JPEG, each under its exact index.
 * @returns how many came
 * @throws InputError where none can be decoded, CancelledError when stopped
 */
export async function frameRun(
  clip: ClipInfo,
  ffmpeg: Ffmpeg,
  options: FrameRunOptions,
  onPicture: (picture: FramePicture) => void,
): Promise<number> {
  const range = { first: options.first, end: Math.min(clip.frameCount, options.first + options.count) };
  const matcher = new FrameMatcher(clip, range.first, options.onlyKeyFrames);
  let delivered = 0;
  const reader = new NutReader(({ pts, timeBase, payload }) => {
    const frame = matcher.match(clipTicks(pts, timeBase, clip));
    if (frame === null || frame >= range.end) return;
    delivered++;
    onPicture({ frame, jpeg: payload.slice() });
  });
  const pass = decodingPass(clip, ffmpeg, range, {
    filters: displayFilters(clip, options.widthPx),
    encoder: ['-c:v', 'mjpeg', '-q:v', JPEG_QUALITY, '-frames:v', String(range.end - range.first)],
    onlyKeyFrames: options.onlyKeyFrames,
    seek: range.first > 0,
    strict: false,
  });
  const result = await runFfmpeg(ffmpeg.path, ffmpegArguments(pass), {
    signal: options.signal,
    onOutput: (chunk) => reader.push(chunk),
  });
  if (result.reason === 'cancelled') throw new CancelledError();
  if (delivered === 0 && range.end > range.first) throw new InputError(endedBadly(clip.path, result, 0));
  return delivered;
}

/** Filters that turn a stored picture into the displayed one, scaled down to a width. */
export function displayFilters(clip: ClipInfo, widthPx: number): string[] {
  const turn = { 0: [], 90: ['transpose=clock'], 180: ['hflip', 'vflip'], 270: ['transpose=cclock'] };
  const width = Math.min(widthPx, clip.displayedWidth);
  const height = Math.max(1, Math.round((clip.displayedHeight * width) / clip.displayedWidth));
  return [
    ...turn[clip.rotationDeg],
    ...(clip.mirrored ? ['hflip'] : []),
    `scale=${width}:${height}:flags=bilinear`,
    'setsar=1',
    'format=yuvj420p',
  ];
}
