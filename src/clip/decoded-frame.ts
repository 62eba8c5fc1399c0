import type { LumaImage } from '../track/luma-image.ts';
import type { Ffmpeg } from './find-ffmpeg.ts';
import type { Region } from './region.ts';

/** One decoded frame, valid only during the call that receives it: its buffers are reused for the next. */
export interface DecodedFrame {
  /** Index of the frame in order of presentation, the same as in `ClipInfo.timesS`. */
  readonly index: number;
  /** Time of the frame, s of file time from the clip's first frame; equals `ClipInfo.timesS[index]`. */
  readonly timeS: number;
  /**
   * True from a lost frame up to the next key frame: the picture may be built on lost data. Frames handed over
   * before the loss showed can be affected too: `DecodeResult.doubtfulFrames` has them all.
   */
  readonly doubtful: boolean;
  /** Brightness of each region, in the order the regions were asked for. */
  readonly regions: readonly LumaImage[];
}

/** Receives the frames one by one, synchronously; returning `false` ends the decoding early. */
export type OnFrame = (frame: DecodedFrame) => unknown;

/** How to decode; everything is optional. */
export interface DecodeOptions {
  /** Stops the decoding; the call then rejects with CancelledError. */
  readonly signal?: AbortSignal;
  /** Which ffmpeg to use; found anew where absent. */
  readonly ffmpeg?: Ffmpeg;
  /** Decode key frames only: a cheap look over the clip. */
  readonly onlyKeyFrames?: boolean;
  /** Deliver at most this many frames. */
  readonly maxFrames?: number;
  /** Deliver frames from this time on, s of file time from the first frame. */
  readonly fromS?: number;
  /** Give up when ffmpeg has been silent for this long, s; 30 where absent. */
  readonly stallS?: number;
}

/** What a decoding pass amounted to. */
export interface DecodeResult {
  /** Frames handed over. */
  readonly delivered: number;
  /** Indices of frames that the clip holds within the range asked for but that did not decode. */
  readonly lostFrames: readonly number[];
  /**
   * Indices of frames that were handed over but may be built on lost ones: from shortly before each lost frame to
   * the next key frame. What was seen in them is not to be trusted. Damage that the decoder does not notice
   * (H.265 and VP9 data carry nothing to notice it by) is not in this list.
   */
  readonly doubtfulFrames: readonly number[];
  /** The rectangles really decoded (see `fitRegion`), in the order asked for. */
  readonly regions: readonly Region[];
  /** What the decoder complained about, in its own words, the last lines only. */
  readonly complaints: readonly string[];
}
