import type { ClipInfo } from './clip-info.ts';
import { decoderThreadOptions } from './decoder-threads.ts';
import { everyFrameOptions } from './every-frame-options.ts';
import type { FfmpegPass } from './ffmpeg-arguments.ts';
import type { Ffmpeg } from './find-ffmpeg.ts';

/** A run of frames in order of presentation: from index `first` up to, not including, `end`. */
export interface FrameRange {
  readonly first: number;
  readonly end: number;
}

/** The frames from a time on, at most so many; `first` equals `end` where there are none. */
export function frameRange(clip: ClipInfo, fromS = 0, maxFrames = Number.POSITIVE_INFINITY): FrameRange {
  const halfTickS = (0.5 * clip.timeBase[0]) / clip.timeBase[1];
  let first = 0;
  while (first < clip.frameCount && (clip.timesS[first] ?? 0) < fromS - halfTickS) first++;
  return { first, end: Math.min(clip.frameCount, first + Math.max(0, maxFrames)) };
}

/**
 * Options before the input that start reading at the last key frame at or before a frame; none for one near the
 * beginning. The demuxer may land earlier still, which costs time but not truth: frames are told by their timestamp.
 */
export function seekOptions(clip: ClipInfo, frame: number): string[] {
  let key = frame;
  while (key > 0 && clip.keyFrames[key] !== 1) key--;
  if (key === 0) return [];
  const ticks = clip.originTicks + (clip.ticks[key] ?? 0) + 0.5; // half a tick later: rounding must not miss it
  const timeS = (ticks * clip.timeBase[0]) / clip.timeBase[1];
  return ['-seek_timestamp', '1', '-noaccurate_seek', '-ss', timeS.toFixed(6)];
}

/**
 * Filters that count time in the file's own ticks from the clip's first frame, and let only a range of frames pass.
 * The time base is pinned, because every number here is in ticks of it.
 */
export function timeFilters(clip: ClipInfo, range: FrameRange): string[] {
  const bounds: string[] = [];
  if (range.first > 0) bounds.push(`start_pts=${clip.ticks[range.first]}`);
  const endTicks = clip.ticks[range.end];
  if (endTicks !== undefined) bounds.push(`end_pts=${endTicks}`);
  return [
    `settb=${clip.timeBase[0]}/${clip.timeBase[1]}`,
    `setpts=PTS-(${clip.originTicks})`,
    ...(bounds.length > 0 ? [`trim=${bounds.join(':')}`] : []),
  ];
}

/** What a decoding pass is made of besides the clip and its range. */
export interface PassParts {
  /** Filters of the picture itself, after those of time. */
  readonly filters: readonly string[];
  /** Encoder of the output and its options. */
  readonly encoder: readonly string[];
  readonly onlyKeyFrames: boolean;
  /** Start reading near the first frame of the range rather than at the beginning of the file. */
  readonly seek: boolean;
  /** Leave out pictures in which the decoder met an error, instead of patching them up from their neighbours. */
  readonly strict: boolean;
}

/** The pass that decodes a range of frames, unturned, to a NUT stream that carries their exact timestamps. */
export function decodingPass(
  clip: ClipInfo,
  ffmpeg: Ffmpeg,
  range: FrameRange,
  parts: PassParts,
): FfmpegPass {
  return {
    path: clip.path,
    container: clip.container,
    inputOptions: [
      '-noautorotate',
      '-copyts',
      ...decoderThreadOptions(),
      ...(parts.strict ? ['-err_detect:v', 'explode'] : []),
      ...(parts.onlyKeyFrames ? ['-skip_frame', 'nokey'] : []),
      ...(parts.seek ? seekOptions(clip, range.first) : []),
    ],
    filters: [...timeFilters(clip, range), ...parts.filters],
    outputOptions: [...everyFrameOptions(ffmpeg, clip.timeBase), ...parts.encoder, ...['-f', 'nut']],
  };
}

/** Converts a timestamp of the NUT stream to ticks of the clip; throws Error where that is not a whole number. */
export function clipTicks(pts: number, nutBase: readonly [number, number], clip: ClipInfo): number {
  const ticks = (pts * nutBase[0] * clip.timeBase[1]) / (nutBase[1] * clip.timeBase[0]);
  const whole = Math.round(ticks);
  if (Math.abs(ticks - whole) > 1e-3)
    throw new Error(`A frame of ${clip.path} lost its exact timestamp on the way.`);
  return whole;
}
