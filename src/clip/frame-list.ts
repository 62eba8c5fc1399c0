import type { ClipContainer } from './clip-info.ts';
import { decoderThreadOptions } from './decoder-threads.ts';
import { everyFrameOptions } from './every-frame-options.ts';
import { ffmpegArguments } from './ffmpeg-arguments.ts';
import type { Ffmpeg } from './find-ffmpeg.ts';
import { LineTail } from './line-tail.ts';
import { type FfmpegResult, type RunOptions, runFfmpeg } from './run-ffmpeg.ts';

/** One packet or frame of the video stream, as ffmpeg's framecrc output lists it. */
interface ListedFrame {
  readonly pts: number | null;
  readonly isKey: boolean;
  /** Decoded but not displayed: an edit list cuts it off. */
  readonly isDiscarded: boolean;
}

/** Timestamps of a pass, in order of decoding. */
interface RawList {
  readonly frames: ListedFrame[];
  timeBase: [number, number] | null;
}

/** The frames a clip displays. */
export interface FrameList {
  /** Timestamps in ticks as stored, ascending. */
  readonly pts: Float64Array;
  /** 1 for frames that decode without any other. Same length. */
  readonly keyFrames: Uint8Array;
  /** Most frames shown before, yet decoded after, one frame. */
  readonly reorderDepth: number;
  /** One tick, s, as [numerator, denominator]. */
  readonly timeBase: readonly [number, number];
}

/** The clip as far as it is known when its frames are listed. */
export interface ListedClip {
  readonly path: string;
  readonly container: ClipContainer;
}

/** A listing pass: the frames where it gave any, the run's end, and what was said on the way. */
export interface ListingPass {
  readonly list: FrameList | null;
  /** Whether each packet is certain to give one picture; otherwise only decoding tells the frames. */
  readonly certain: boolean;
  /** One tick of the stream's clock, s, as [numerator, denominator]; null where the pass did not get so far. */
  readonly timeBase: readonly [number, number] | null;
  readonly result: FfmpegResult;
  /** All lines ffmpeg printed, level marks removed. */
  readonly lines: readonly string[];
  /** Lines marked as warnings or errors. */
  readonly complaints: readonly string[];
}

const DISCARD_FLAG = 4;
const KEY_FLAG = 1;
/** Lines of talk kept; a listing has some dozens, a damaged file floods. */
const MAX_LINES = 400;
/** Written where a packet has no timestamp. */
const NO_TIMESTAMP = -(2 ** 63);

/**
 * Lists the frames from the packets, without decoding: they are copied to a checksum list, edit lists applied by
 * the very demuxer that decoding will use. Prints the stream listing too, which `readListing` reads.
 */
export function listPackets(clip: ListedClip, ffmpeg: Ffmpeg, options: RunOptions): Promise<ListingPass> {
  const outputOptions = ['-c:v', 'copy', '-copyinkf', '-copypriorss', '1', '-f', 'framecrc'];
  return listingPass(clip, ffmpeg, { inputOptions: ['-copyts'], outputOptions }, options);
}

/** Lists the frames by decoding all of them: for codecs and containers in which a packet need not be a picture. */
export function listDecodedFrames(
  clip: ListedClip,
  ffmpeg: Ffmpeg,
  timeBase: readonly [number, number],
  options: RunOptions,
): Promise<ListingPass> {
  const parts = {
    inputOptions: ['-noautorotate', '-copyts', ...decoderThreadOptions()],
    filters: ['crop=2:2:0:0'],
    outputOptions: [...everyFrameOptions(ffmpeg, timeBase), '-c:v', 'rawvideo', '-f', 'framecrc'],
  };
  return listingPass(clip, ffmpeg, parts, options);
}

async function listingPass(
  clip: ListedClip,
  ffmpeg: Ffmpeg,
  parts: { inputOptions: string[]; filters?: string[]; outputOptions: string[] },
  options: RunOptions,
): Promise<ListingPass> {
  const raw: RawList = { frames: [], timeBase: null };
  const rows = new LineTail(1, (line) => readRow(line, raw));
  const lines: string[] = [];
  const complaints: string[] = [];
  const args = ffmpegArguments({ ...clip, ...parts, logLevel: 'info' });
  const result = await runFfmpeg(ffmpeg.path, args, {
    ...options,
    onOutput: (chunk) => rows.push(chunk),
    onLine: (line) => {
      const bare = line.replace(/^(\[[^\]]*\] ?)*/, '');
      if (lines.length < MAX_LINES) lines.push(bare);
      if (/\[(warning|error|fatal|panic)\]/.test(line) && complaints.length < MAX_LINES)
        complaints.push(bare);
    },
  });
  rows.end();
  return { ...displayedFrames(raw), timeBase: raw.timeBase, result, lines, complaints };
}

/** Reads one row: "#tb 0: 1/15360" or "stream, dts, pts, duration, size, checksum[, F=0xflags]...". */
function readRow(row: string, into: RawList): void {
  const base = /^#tb 0: (\d+)\/(\d+)/.exec(row);
  if (base !== null) into.timeBase = [Number(base[1]), Number(base[2])];
  if (row.startsWith('#')) return;
  const pts = Number(row.split(',')[2]);
  const flags = /F=0x([0-9a-f]+)/i.exec(row)?.[1];
  const bits = flags === undefined ? KEY_FLAG : Number.parseInt(flags, 16);
  into.frames.push({
    pts: Number.isNaN(pts) || pts <= NO_TIMESTAMP ? null : pts,
    isKey: (bits & KEY_FLAG) !== 0,
    isDiscarded: (bits & DISCARD_FLAG) !== 0,
  });
}

/** What is displayed of the packets, in order of presentation. */
function displayedFrames({ frames, timeBase }: RawList): { list: FrameList | null; certain: boolean } {
  const firstKey = frames.findIndex((frame) => frame.isKey);
  if (timeBase === null || firstKey < 0) return { list: null, certain: false };
  const decodable = frames.slice(firstKey); // what comes before the first key frame is dropped by decoders
  const shown = decodable.filter((frame) => !frame.isDiscarded && frame.pts !== null);
  if (shown.length === 0) return { list: null, certain: false };
  const decodingOrder = new Map(shown.map((frame, i) => [frame, i]));
  shown.sort((a, b) => (a.pts ?? 0) - (b.pts ?? 0));
  const reorderDepth = shown.reduce(
    (most, frame, i) => Math.max(most, i - (decodingOrder.get(frame) ?? i)),
    0,
  );
  const keyPts = decodable[0]?.pts ?? 0;
  const untimed = decodable.some((frame) => frame.pts === null);
  const leading = shown.some((frame) => (frame.pts ?? 0) < keyPts); // may refer to pictures before the beginning
  return {
    list: {
      pts: Float64Array.from(shown, (frame) => frame.pts ?? 0),
      keyFrames: Uint8Array.from(shown, (frame) => (frame.isKey ? 1 : 0)),
      reorderDepth,
      timeBase,
    },
    certain: !untimed && !leading,
  };
}
