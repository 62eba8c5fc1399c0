import { CancelledError, InputError } from '../errors.ts';
import type { LumaImage } from '../track/luma-image.ts';
import type { ClipInfo } from './clip-info.ts';
import { clipName, endedBadly, plainWords } from './clip-messages.ts';
import { stackedLumaFilters } from './decode-filters.ts';
import { clipTicks, decodingPass, type FrameRange, frameRange } from './decode-plan.ts';
import type { DecodeOptions, DecodeResult, OnFrame } from './decoded-frame.ts';
import { doubtfulFrames } from './doubtful-frames.ts';
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
  if (range.first >= range.end) {
    return { delivered: 0, lostFrames: [], doubtfulFrames: [], regions: fitted, complaints: [] };
  }
  const ffmpeg = options.ffmpeg ?? (await findFfmpeg());
  for (const attempt of attempts(range)) {
    const result = await onePass({ clip, regions: fitted, range, onFrame, options, ffmpeg }, attempt);
    if (result !== 'begins too late') return result;
  }
  throw new Error('The last attempt takes what it gets.');
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

/** One way to go about a pass. A pass that does not begin with the frame expected may be given up for the next. */
interface Attempt {
  readonly seek: boolean;
  readonly strict: boolean;
  readonly isLast: boolean;
}

/**
 * Seeking may land behind the frame wanted: then read from the beginning. A strict decoder may refuse every picture
 * for a harmless peculiarity of a camera, the first one too: then take pictures as they come.
 */
function attempts(range: FrameRange): Attempt[] {
  const sought = range.first > 0 ? [{ seek: true, strict: true, isLast: false }] : [];
  return [
    ...sought,
    { seek: false, strict: true, isLast: false },
    { seek: false, strict: false, isLast: true },
  ];
}

/** What stays the same over the attempts. */
interface Job {
  readonly clip: ClipInfo;
  readonly regions: readonly Region[];
  readonly range: FrameRange;
  readonly onFrame: OnFrame;
  readonly options: DecodeOptions;
  readonly ffmpeg: Ffmpeg;
}

async function onePass(job: Job, attempt: Attempt): Promise<DecodeResult | 'begins too late'> {
  const { clip, regions, range, onFrame, options, ffmpeg } = job;
  const onlyKeyFrames = options.onlyKeyFrames ?? false;
  const matcher = new FrameMatcher(clip, range.first, onlyKeyFrames);
  const unstack = frameUnstacker(clip, regions);
  let delivered = 0;
  let enough = false;
  let tooLate = false;
  const reader = new NutReader(({ pts, timeBase, payload }) => {
    if (enough || tooLate) return;
    const index = matcher.match(clipTicks(pts, timeBase, clip));
    if (index === null || index >= range.end) return;
    tooLate = !attempt.isLast && delivered === 0 && matcher.lost.length > 0;
    if (tooLate) return;
    const images = unstack(payload);
    delivered++;
    const frame = { index, timeS: clip.timesS[index] ?? 0, doubtful: matcher.afterDamage, regions: images };
    enough = onFrame(frame) === false;
  });

  const parts = {
    filters: stackedLumaFilters(clip, regions),
    encoder: ['-c:v', 'rawvideo'],
    ...{ onlyKeyFrames, seek: attempt.seek, strict: attempt.strict },
  };
  const result = await runFfmpeg(ffmpeg.path, ffmpegArguments(decodingPass(clip, ffmpeg, range, parts)), {
    ...(options.signal ? { signal: options.signal } : {}),
    ...(options.stallS ? { stallS: options.stallS } : {}),
    bulk: true,
    onOutput: (chunk) => {
      reader.push(chunk);
      return !(enough || tooLate);
    },
  });
  if (result.reason === 'cancelled') throw new CancelledError();
  const gaveNothing = delivered === 0;
  const endedItself = result.reason === 'finished' || result.reason === 'failed';
  if (tooLate || (gaveNothing && endedItself && !attempt.isLast)) return 'begins too late';
  if (gaveNothing || !(enough || endedItself)) throw new InputError(endedBadly(clip.path, result, delivered));
  if (!enough) matcher.finish(range.end);
  return {
    ...{ delivered, lostFrames: matcher.lost, doubtfulFrames: doubtfulFrames(clip, matcher.lost), regions },
    complaints: complaintsOf(result, matcher.unlisted, reader.midPacket && !enough),
  };
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

function complaintsOf(result: FfmpegResult, unlisted: number, cutShort: boolean): string[] {
  const complaints = result.lastLines.map(plainWords);
  if (result.reason === 'failed') complaints.push(`ffmpeg ended with status ${result.exitCode}.`);
  if (unlisted > 0)
    complaints.push(`${unlisted} decoded frames carry a timestamp the container does not list.`);
  if (cutShort) complaints.push('The decoded pictures end in the middle of one.');
  return complaints;
}
