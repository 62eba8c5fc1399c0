import { CancelledError, InputError } from '../errors.ts';
import type { LumaImage } from '../track/luma-image.ts';
import type { ClipInfo } from './clip-info.ts';
import { clipName, endedBadly } from './clip-messages.ts';
import { stackedLumaFilters } from './decode-filters.ts';
import { clipTicks, decodingPass, type FrameRange, frameRange } from './decode-plan.ts';
import type { DecodeOptions, DecodeResult, OnFrame } from './decoded-frame.ts';
import { ffmpegArguments } from './ffmpeg-arguments.ts';
import { type Ffmpeg, findFfmpeg } from './find-ffmpeg.ts';
import { FrameMatcher } from './frame-matcher.ts';
import { NutReader } from './nut-reader.ts';
import { lumaAccess } from './pixel-format.ts';
import { fitRegion, type Region } from './region.ts';
import { type FfmpegResult, runFfmpeg } from './run-ffmpeg.ts';

/**
 * Decodes a clip once and hands the brightness of some regions of every frame to `onFrame`, in order of
 * presentation, each with its exact time. Regions are in stored pixels (see coordinates.ts for displayed ones), all
 * of one size after `fitRegion`. Memory holds one stacked frame, whatever the clip's length.
 *
 * A damaged place costs its frames, which are counted, and not the rest. Rejects with InputError when nothing of
 * the range decodes or ffmpeg dies or stalls, with CancelledError when cancelled, with what `onFrame` threw.
 */
export async function decodeRegions(
  clip: ClipInfo,
  regions: readonly Region[],
  onFrame: OnFrame,
  options: DecodeOptions = {},
): Promise<DecodeResult> {
  const fitted = regions.map((region) => fitRegion(region, clip));
  if (fitted.some((r) => r.width !== fitted[0]?.width || r.height !== fitted[0]?.height)) {
    throw new Error('All regions of one decoding pass must have the same size.');
  }
  const range = frameRange(clip, options.fromS, options.maxFrames);
  const ffmpeg = options.ffmpeg ?? (await findFfmpeg());
  const sought = await onePass(clip, fitted, range, onFrame, options, ffmpeg, range.first > 0);
  if (sought !== 'landed too late') return sought;
  const fromStart = await onePass(clip, fitted, range, onFrame, options, ffmpeg, false);
  if (fromStart === 'landed too late') throw new Error('A pass from the beginning cannot land too late.');
  return fromStart;
}

/** `decodeRegions` for one region that is the whole stored picture, odd sizes included. */
export function decodeWholeFrames(
  clip: ClipInfo,
  onFrame: OnFrame,
  options: DecodeOptions = {},
): Promise<DecodeResult> {
  const whole = { x: 0, y: 0, width: clip.codedWidth, height: clip.codedHeight };
  return decodeRegions(clip, [whole], onFrame, options);
}

async function onePass(
  clip: ClipInfo,
  regions: readonly Region[],
  range: FrameRange,
  onFrame: OnFrame,
  options: DecodeOptions,
  ffmpeg: Ffmpeg,
  seek: boolean,
): Promise<DecodeResult | 'landed too late'> {
  const onlyKeyFrames = options.onlyKeyFrames ?? false;
  const matcher = new FrameMatcher(clip, range.first, onlyKeyFrames);
  const unstack = frameUnstacker(clip, regions);
  let delivered = 0;
  let enough = false;
  let landedLate = false;
  const reader = new NutReader(({ pts, timeBase, payload }) => {
    if (enough || landedLate) return;
    const index = matcher.match(clipTicks(pts, timeBase, clip));
    if (index === null || index >= range.end) return;
    landedLate = seek && delivered === 0 && matcher.lost.length > 0;
    if (landedLate) return;
    const frame = {
      index,
      timeS: clip.timesS[index] ?? 0,
      doubtful: matcher.afterDamage,
      regions: unstack(payload),
    };
    delivered++;
    enough = onFrame(frame) === false;
  });

  const parts = {
    filters: stackedLumaFilters(clip, regions),
    encoder: ['-c:v', 'rawvideo'],
    onlyKeyFrames,
    seek,
  };
  const result = await runFfmpeg(ffmpeg.path, ffmpegArguments(decodingPass(clip, ffmpeg, range, parts)), {
    ...(options.signal ? { signal: options.signal } : {}),
    ...(options.stallS ? { stallS: options.stallS } : {}),
    onOutput: (chunk) => {
      reader.push(chunk);
      return !(enough || landedLate);
    },
  });
  if (landedLate) return 'landed too late';
  if (result.reason === 'cancelled') throw new CancelledError();
  if (!enough) {
    matcher.finish(range.end);
    refuseBadEnd(clip, result, delivered, range);
  }
  return { delivered, lostFrames: matcher.lost, regions, complaints: complaintsOf(result, matcher.unlisted) };
}

/** Lays images over the stacked picture, without copying; the same images are handed out each time. */
function frameUnstacker(
  clip: ClipInfo,
  regions: readonly Region[],
): (payload: Uint8Array) => readonly LumaImage[] {
  const { bitDepth } = lumaAccess(clip.pixelFormat);
  const { width, height } = regions[0] ?? { width: 0, height: 0 };
  const samples = width * height;
  const bytes = samples * regions.length * (bitDepth > 8 ? 2 : 1);
  const maxValue = 2 ** bitDepth - 1;
  return (payload) => {
    if (payload.length !== bytes) {
      throw new InputError(
        `${clipName(clip.path)}: the picture changes its size within the clip; cut the clip there.`,
      );
    }
    const all = bitDepth > 8 ? new Uint16Array(payload.buffer, payload.byteOffset, bytes / 2) : payload;
    return regions.map((_, i) => ({
      data: all.subarray(i * samples, (i + 1) * samples),
      width,
      height,
      maxValue,
    }));
  };
}

/** Only a pass that gave nothing, or did not end by itself, is a failure; damage within is counted, not refused. */
function refuseBadEnd(clip: ClipInfo, result: FfmpegResult, delivered: number, range: FrameRange): void {
  const nothing = delivered === 0 && range.end > range.first;
  const endedItself = result.reason === 'finished' || result.reason === 'failed';
  if (nothing || !endedItself) throw new InputError(endedBadly(clip.path, result, delivered));
}

function complaintsOf(result: FfmpegResult, unlisted: number): string[] {
  const complaints = [...result.lastLines];
  if (unlisted > 0)
    complaints.push(`${unlisted} decoded frames carry a timestamp the container does not list.`);
  return complaints;
}
