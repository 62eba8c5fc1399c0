import { resolve } from 'node:path';
import { CancelledError, InputError } from '../errors.ts';
import type { ClipInfo } from './clip-info.ts';
import { clipName, endedBadly } from './clip-messages.ts';
import { clipWarnings } from './clip-warnings.ts';
import { displayedSize } from './coordinates.ts';
import { type Orientation, orientationOfAngle, readOrientation } from './display-matrix.ts';
import { type Ffmpeg, findFfmpeg } from './find-ffmpeg.ts';
import {
  type FrameList,
  type ListedClip,
  type ListingPass,
  listDecodedFrames,
  listPackets,
} from './frame-list.ts';
import { frameTiming } from './frame-timing.ts';
import { lumaAccess } from './pixel-format.ts';
import type { RunOptions } from './run-ffmpeg.ts';
import { sniffContainer } from './sniff-container.ts';
import { type InputListing, readListing, type StreamListing } from './stream-listing.ts';

/** How to probe; everything is optional. */
export interface ProbeOptions {
  /** Stops the probing; the call then rejects with CancelledError. */
  readonly signal?: AbortSignal;
  /** Which ffmpeg to use; found anew where absent. */
  readonly ffmpeg?: Ffmpeg;
  /** Give up when ffmpeg has been silent for this long, s; 30 where absent. */
  readonly stallS?: number;
}

/** Largest side of a picture, px: beyond it decoders and memory give out. */
export const MAX_SIDE_PX = 16_384;
/** Codecs in which each packet gives exactly one picture. */
const PACKET_IS_PICTURE = new Set([
  'h264',
  'hevc',
  'vp9',
  'av1',
  'mjpeg',
  'prores',
  'ffv1',
  'dnxhd',
  'png',
  'rawvideo',
]);
/** Tag in which phones write the rate of capture (the Android camera's), frames per second. */
const CAPTURE_RATE_TAG = 'com.android.capture.fps';

/**
 * Finds out what a clip is: picture, orientation, and the exact time of every displayed frame. Nothing is decoded,
 * except in the few formats whose packets do not tell the frames. Throws InputError for whatever is not a clip or
 * is damaged beyond use, CancelledError when cancelled.
 */
export async function probeClip(path: string, options: ProbeOptions = {}): Promise<ClipInfo> {
  const ffmpeg = options.ffmpeg ?? (await findFfmpeg());
  const { container, fileBytes } = await sniffContainer(path);
  const clip = { path: resolve(path), container };
  const run: RunOptions = {
    ...(options.signal ? { signal: options.signal } : {}),
    ...(options.stallS ? { stallS: options.stallS } : {}),
  };

  const packets = await listPackets(clip, ffmpeg, run);
  if (packets.result.reason === 'cancelled') throw new CancelledError();
  const listing = readListing(packets.lines);
  const video = usableVideo(clip, listing, packets);
  const list = await framesOf(clip, ffmpeg, run, video, packets);
  const orientation = await orientationOf(clip.path, video);

  const originTicks = list.pts[0] ?? 0;
  const ticks = list.pts.map((pts) => pts - originTicks);
  const [numerator, denominator] = list.timeBase;
  const timesS = ticks.map((tick) => (tick * numerator) / denominator);
  const timing = frameTiming(ticks, list.timeBase);
  const { codec, pixelFormat, codedWidth, codedHeight, pixelAspect, nominalFps, colour } = video;
  const shown = orientation ?? { rotationDeg: 0, mirrored: false };
  const facts = {
    ...{
      path: clip.path,
      fileBytes,
      container,
      codec,
      pixelFormat,
      bitDepth: lumaAccess(pixelFormat).bitDepth,
    },
    ...{ codedWidth, codedHeight, pixelAspect, ...shown },
    ...displayedSize({ codedWidth, codedHeight, pixelAspect, ...shown }),
    nominalFps,
    measuredFps: timing.medianIntervalS === null ? null : 1 / timing.medianIntervalS,
    frameCount: timesS.length,
    ...{ timesS, ticks, keyFrames: list.keyFrames, reorderDepth: list.reorderDepth },
    ...{ timeBase: list.timeBase, originTicks },
    durationS: (timesS.at(-1) ?? 0) + (timing.medianIntervalS ?? 0),
    ...{ gaps: timing.gaps, duplicates: timing.duplicates, regularity: timing.regularity },
    captureFps: positive(listing.tags.get(CAPTURE_RATE_TAG)),
    colour,
  };
  return { ...facts, warnings: clipWarnings(facts, listing, orientation !== null, packets.complaints) };
}

/** The video stream, or an InputError saying why there is none to use. */
function usableVideo(
  { path, container }: ListedClip,
  listing: InputListing,
  pass: ListingPass,
): StreamListing {
  const name = clipName(path);
  const { video } = listing;
  if (video === null) {
    const says = (phrase: RegExp): boolean => pass.lines.some((line) => phrase.test(line));
    const noStreams = listing.videoStreams + listing.audioStreams === 0 && says(/matches no streams/);
    if (says(/moov atom not found/) || (noStreams && container === 'mov')) {
      throw new InputError(
        `${name}: the index of the clip is missing or broken, as when a recording or a copy is cut off; copy it anew from the camera.`,
      );
    }
    if (listing.videoStreams > 0) {
      throw new InputError(
        `${name}: ffmpeg does not know how its pictures are coded; convert it to H.264 first.`,
      );
    }
    if (listing.audioStreams > 0)
      throw new InputError(`${name}: holds sound only, no video; give a video clip.`);
    if (pass.result.reason !== 'finished') throw new InputError(endedBadly(path, pass.result, 0));
    throw new InputError(`${name}: holds no video; give a video clip.`);
  }
  if (Math.max(video.codedWidth, video.codedHeight) > MAX_SIDE_PX) {
    throw new InputError(
      `${name}: the picture is ${video.codedWidth} x ${video.codedHeight} px; at most ${MAX_SIDE_PX} px a side can be measured, scale it down.`,
    );
  }
  if (pass.result.reason !== 'finished' && pass.list === null) {
    throw new InputError(endedBadly(path, pass.result, 0));
  }
  return video;
}

/** The displayed frames: from the packets where they are certain, from a decoding pass otherwise. */
async function framesOf(
  clip: ListedClip,
  ffmpeg: Ffmpeg,
  run: RunOptions,
  video: StreamListing,
  packets: ListingPass,
): Promise<FrameList> {
  const endedItself = packets.result.reason === 'finished' || packets.result.reason === 'failed';
  if (!endedItself) throw new InputError(endedBadly(clip.path, packets.result, 0));
  if (
    packets.list !== null &&
    packets.certain &&
    clip.container !== 'avi' &&
    PACKET_IS_PICTURE.has(video.codec)
  ) {
    return packets.list;
  }
  if (packets.timeBase === null) throw new InputError(endedBadly(clip.path, packets.result, 0));
  const decoded = await listDecodedFrames(clip, ffmpeg, packets.timeBase, run);
  if (decoded.result.reason === 'cancelled') throw new CancelledError();
  if (decoded.list === null) throw new InputError(endedBadly(clip.path, decoded.result, 0));
  const reorderDepth = packets.list?.reorderDepth ?? 0;
  return { ...decoded.list, keyFrames: keysByTime(decoded.list, packets.list), reorderDepth };
}

/** Key frames of decoded frames: those at whose time a key packet stands; at least the first. */
function keysByTime(decoded: FrameList, packets: FrameList | null): Uint8Array {
  const keyPts = new Set(packets?.pts.filter((_, i) => packets.keyFrames[i] === 1) ?? []);
  const keys = Uint8Array.from(decoded.pts, (pts) => (keyPts.has(pts) ? 1 : 0));
  keys[0] = 1;
  return keys;
}

/** How the picture is turned; null for a turn that is not by right angles. */
async function orientationOf(path: string, video: StreamListing): Promise<Orientation | null> {
  if (video.matrixAngleDeg === null) return { rotationDeg: 0, mirrored: false };
  const byAngle = orientationOfAngle(video.matrixAngleDeg);
  return byAngle === null ? null : ((await readOrientation(path)) ?? byAngle);
}

function positive(text: string | undefined): number | null {
  const value = Number(text);
  return Number.isFinite(value) && value > 0 ? value : null;
}
