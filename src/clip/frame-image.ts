import { CancelledError, InputError } from '../errors.ts';
import type { ClipInfo } from './clip-info.ts';
import { clipName, endedBadly } from './clip-messages.ts';
import { clipTicks, decodingPass } from './decode-plan.ts';
import { ffmpegArguments } from './ffmpeg-arguments.ts';
import { type Ffmpeg, findFfmpeg } from './find-ffmpeg.ts';
import { NutReader } from './nut-reader.ts';
import { runFfmpeg } from './run-ffmpeg.ts';

/** Which frame: by its index, or the one on show at a time, s of file time from the first frame. */
export type FrameChoice = { readonly index: number } | { readonly timeS: number };

/** How to make the picture; everything is optional. */
export interface FrameImageOptions {
  readonly signal?: AbortSignal;
  /** Which ffmpeg to use; found anew where absent. */
  readonly ffmpeg?: Ffmpeg;
  /** 'jpeg' (where absent) is small and quick to show, 'png' is without loss. */
  readonly format?: 'jpeg' | 'png';
  /** Scale down to at most this width, px; the displayed size where absent. Never scaled up. */
  readonly maxWidth?: number;
  /** Scale down to at most this height, px. */
  readonly maxHeight?: number;
  /** Give up when ffmpeg has been silent for this long, s; 30 where absent. */
  readonly stallS?: number;
}

/** One frame as displayed: upright, with square pixels. */
export interface FrameImage {
  /** The picture as a JPEG or PNG file. */
  readonly bytes: Uint8Array;
  readonly mediaType: 'image/jpeg' | 'image/png';
  /** Columns of the picture, px. */
  readonly width: number;
  /** Rows of the picture, px. */
  readonly height: number;
  /** Index of the frame it shows. */
  readonly index: number;
  /** Time of that frame, s of file time from the first frame. */
  readonly timeS: number;
}

/**
 * Makes a picture of exactly one frame: reading starts at the key frame before it, and its timestamp is checked.
 * Throws InputError where the clip has no such frame or it does not decode, CancelledError when cancelled.
 */
export async function frameImage(
  clip: ClipInfo,
  choice: FrameChoice,
  options: FrameImageOptions = {},
): Promise<FrameImage> {
  const index = chosenIndex(clip, choice);
  const ffmpeg = options.ffmpeg ?? (await findFfmpeg());
  const sought = index > 0 ? await picture(clip, index, options, ffmpeg, true) : null;
  const bytes = sought ?? (await picture(clip, index, options, ffmpeg, false));
  if (bytes === null) {
    throw new InputError(
      `${clipName(clip.path)}: frame ${index} is damaged and does not decode; choose another frame.`,
    );
  }
  const format = options.format ?? 'jpeg';
  const { width, height } = imageSize(clip, options);
  return { bytes, mediaType: `image/${format}`, width, height, index, timeS: clip.timesS[index] ?? 0 };
}

/** Size of the picture `frameImage` makes: the displayed size, scaled down to the limits, at least 1 px a side. */
export function imageSize(
  clip: Pick<ClipInfo, 'displayedWidth' | 'displayedHeight'>,
  limits: Pick<FrameImageOptions, 'maxWidth' | 'maxHeight'>,
): { width: number; height: number } {
  const { displayedWidth, displayedHeight } = clip;
  const { maxWidth = displayedWidth, maxHeight = displayedHeight } = limits;
  const scale = Math.min(1, maxWidth / displayedWidth, maxHeight / displayedHeight);
  return {
    width: Math.max(1, Math.round(displayedWidth * scale)),
    height: Math.max(1, Math.round(displayedHeight * scale)),
  };
}

function chosenIndex(clip: ClipInfo, choice: FrameChoice): number {
  if ('index' in choice) {
    if (Number.isInteger(choice.index) && choice.index >= 0 && choice.index < clip.frameCount)
      return choice.index;
    throw new InputError(
      `${clipName(clip.path)} has no frame ${choice.index}; it has frames 0 to ${clip.frameCount - 1}.`,
    );
  }
  const halfTickS = (0.5 * clip.timeBase[0]) / clip.timeBase[1];
  let index = 0;
  while (index + 1 < clip.frameCount && (clip.timesS[index + 1] ?? 0) <= choice.timeS + halfTickS) index++;
  return index;
}

/** The encoded picture; null where another frame came in its place. */
async function picture(
  clip: ClipInfo,
  index: number,
  options: FrameImageOptions,
  ffmpeg: Ffmpeg,
  seek: boolean,
): Promise<Uint8Array | null> {
  const wanted = clip.ticks[index] ?? 0;
  let bytes: Uint8Array | null = null;
  let cameFirst: number | null = null;
  const reader = new NutReader(({ pts, timeBase, payload }) => {
    if (cameFirst !== null) return;
    cameFirst = clipTicks(pts, timeBase, clip);
    if (cameFirst === wanted) bytes = payload.slice();
  });
  const isPng = options.format === 'png';
  const encoder = isPng ? ['-c:v', 'png'] : ['-c:v', 'mjpeg', '-q:v', '3'];
  const parts = {
    filters: displayFilters(clip, options, isPng),
    encoder: [...encoder, '-frames:v', '1'],
    onlyKeyFrames: false,
    strict: false, // to look at, a patched picture is better than none
    seek,
  };
  const range = { first: index, end: clip.frameCount };
  const result = await runFfmpeg(ffmpeg.path, ffmpegArguments(decodingPass(clip, ffmpeg, range, parts)), {
    ...(options.signal ? { signal: options.signal } : {}),
    ...(options.stallS ? { stallS: options.stallS } : {}),
    onOutput: (chunk) => reader.push(chunk),
  });
  if (result.reason === 'cancelled') throw new CancelledError();
  const endedItself = result.reason === 'finished' || result.reason === 'failed';
  if (bytes === null && !endedItself) throw new InputError(endedBadly(clip.path, result, 0));
  return bytes;
}

/** From the stored picture to the displayed one: scale first, there are fewer pixels to turn afterwards. */
function displayFilters(clip: ClipInfo, options: FrameImageOptions, isPng: boolean): string[] {
  const { width, height } = imageSize(clip, options);
  const upright = clip.rotationDeg % 180 === 0;
  const size = upright ? `${width}:${height}` : `${height}:${width}`;
  // JPEG files are full range with the BT.601 matrix whatever the clip has.
  const colour = isPng ? '' : ':out_color_matrix=bt601:out_range=pc';
  const turns = { 0: [], 90: ['transpose=clock'], 180: ['hflip', 'vflip'], 270: ['transpose=cclock'] };
  return [
    `scale=${size}:flags=area${colour}`,
    isPng ? 'format=rgb24' : 'format=yuvj420p',
    ...turns[clip.rotationDeg],
    ...(clip.mirrored ? ['hflip'] : []),
    'setsar=1',
  ];
}
