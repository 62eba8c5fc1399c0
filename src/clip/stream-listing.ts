import type { ClipColour } from './clip-info.ts';

/** What ffmpeg's listing of an input says of its first real video stream. */
export interface StreamListing {
  readonly codec: string;
  readonly pixelFormat: string;
  readonly codedWidth: number;
  readonly codedHeight: number;
  /** Width of a pixel over its height. */
  readonly pixelAspect: number;
  readonly nominalFps: number | null;
  readonly colour: ClipColour;
  readonly interlaced: boolean;
  /** Counter-clockwise angle of the display matrix, degrees, as ffmpeg states it; null where there is no matrix. */
  readonly matrixAngleDeg: number | null;
}

/** Everything read from the listing. */
export interface InputListing {
  /** Null where there is no video stream besides cover pictures, or its pictures are unknown to the decoder. */
  readonly video: StreamListing | null;
  readonly videoStreams: number;
  readonly audioStreams: number;
  /** Time in the file at which it says its longest stream ends, s; null where it does not say. */
  readonly endS: number | null;
  /** Tags of file and streams; the first of a name counts. */
  readonly tags: ReadonlyMap<string, string>;
}

const STREAM_LINE = /^\s*Stream #0:\d+(?:\[0x[0-9a-f]+\])?(?:\([^)]*\))?: (\w+): (.*)$/;
const TAG_LINE = /^\s+([^\s:][^:]*?)\s*: (.*)$/;
const DURATION_LINE = /^\s*Duration: (\d+):(\d+):([\d.]+)(?:, start: (-?[\d.]+))?/;
const MATRIX_LINE = /display ?matrix: rotation of (-?[\d.]+) degrees/i;
/** Rates the listing rounds to two digits, and what they stand for. */
const NTSC_RATES = new Map(
  [23.98, 29.97, 47.95, 59.94, 119.88, 239.76].map((fps) => [fps, (Math.ceil(fps) * 1000) / 1001]),
);

/**
 * Reads the listing ffmpeg prints of an input (one line an entry, without level marks). The form has been the same
 * from version 4 to 7 but for small variations, which the tests hold down.
 */
export function readListing(lines: readonly string[]): InputListing {
  const tags = new Map<string, string>();
  let video: StreamListing | null = null;
  let videoStreams = 0;
  let audioStreams = 0;
  let endS: number | null = null;
  let inFirstVideo = false;
  for (const line of lines) {
    if (/^Output #0/.test(line)) break;
    const [, kind, rest] = STREAM_LINE.exec(line) ?? [];
    if (kind !== undefined && rest !== undefined) {
      inFirstVideo = false;
      if (kind === 'Audio') audioStreams++;
      if (kind === 'Video' && !/\((attached pic|still image|timed thumbnails)\)/.test(rest)) {
        inFirstVideo = videoStreams === 0;
        videoStreams++;
        if (inFirstVideo) video = readVideoLine(rest);
      }
      continue;
    }
    const duration = DURATION_LINE.exec(line);
    if (duration !== null) {
      const [, hours, minutes, seconds, start = '0'] = duration;
      endS = Number(start) + Number(hours) * 3600 + Number(minutes) * 60 + Number(seconds);
      continue;
    }
    const angle = MATRIX_LINE.exec(line)?.[1];
    if (angle !== undefined) {
      if (inFirstVideo && video !== null) video = { ...video, matrixAngleDeg: Number(angle) };
      continue;
    }
    const [, name, value] = TAG_LINE.exec(line) ?? [];
    if (name !== undefined && value !== undefined && !tags.has(name)) tags.set(name, value);
  }
  return { video, videoStreams, audioStreams, endS, tags };
}

/** Reads "h264 (High) (avc1 / 0x31637661), yuv420p(tv, bt709), 1920x1080 [SAR 1:1 DAR 16:9], 30 fps, ...". */
function readVideoLine(text: string): StreamListing | null {
  const [codecField = '', formatField = '', ...others] = splitFields(text);
  const codec = /^\w+/.exec(codecField)?.[0];
  const pixelFormat = /^\w+/.exec(formatField)?.[0];
  const rest = others.join(', ');
  const size = /(?:^|, )(\d+)x(\d+)/.exec(rest);
  if (codec === undefined || codec === 'none' || pixelFormat === undefined || size === null) return null;
  // A ratio of the container stands as a field of its own and overrules the one of the codec in brackets.
  const aspect = /(?:^|, )SAR (\d+):(\d+)/.exec(rest) ?? /\[SAR (\d+):(\d+)/.exec(rest);
  const rate = /(?:^|, )([\d.]+)(k?) fps/.exec(rest) ?? /(?:^|, )([\d.]+)(k?) tbr/.exec(rest);
  const notes = splitFields(/\((.*)\)/.exec(formatField)?.[1] ?? '');
  return {
    codec,
    pixelFormat,
    codedWidth: Number(size[1]),
    codedHeight: Number(size[2]),
    pixelAspect: ratio(aspect?.[1], aspect?.[2]) ?? 1,
    nominalFps: rate === null ? null : exactRate(Number(rate[1]) * (rate[2] === 'k' ? 1000 : 1)),
    colour: readColour(pixelFormat, notes),
    interlaced: notes.some((note) => /(top|bottom)( coded)? first/.test(note)),
    matrixAngleDeg: null,
  };
}

/** Splits at commas that are not within brackets. */
function splitFields(text: string): string[] {
  const fields: string[] = [];
  let depth = 0;
  let field = '';
  for (const c of text) {
    if (c === '(' || c === '[') depth++;
    if (c === ')' || c === ']') depth--;
    if (c === ',' && depth === 0) {
      fields.push(field.trim());
      field = '';
    } else {
      field += c;
    }
  }
  return [...fields, field.trim()];
}

function readColour(pixelFormat: string, notes: readonly string[]): ClipColour {
  const full = notes.includes('pc') || pixelFormat.startsWith('yuvj');
  const spaces = notes.find((note) =>
    /^(bt|smpte|fcc|gbr|gray|ycgco|unknown\/|iec|arib|film|ictcp|log)/.test(note),
  );
  const transfer = spaces?.split('/').at(-1) ?? '';
  return {
    range: full ? 'full' : notes.includes('tv') ? 'limited' : null,
    spaces: spaces ?? null,
    hdr: transfer === 'arib-std-b67' ? 'HLG' : transfer === 'smpte2084' ? 'PQ' : null,
  };
}

function ratio(numerator?: string, denominator?: string): number | null {
  const value = Number(numerator) / Number(denominator);
  return Number.isFinite(value) && value > 0 ? value : null;
}

function exactRate(fps: number): number | null {
  return fps > 0 ? (NTSC_RATES.get(fps) ?? fps) : null;
}
