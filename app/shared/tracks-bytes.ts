/**
 * The motion record of a clip as the page draws it, and its packing into bytes, which both hosts carry alike (JSON
 * knows no gaps). Layout, little-endian: "DWTR", u32 version, u32 header length, header as JSON padded with spaces to
 * a multiple of 8 bytes, then Float64 series of one entry a frame: frame index, time, displacement, and for each marker
 * x, y, score, state.
 */
export interface MotionTrack {
  readonly clip: string;
  /** Index of each frame in the clip. */
  readonly frame: Float64Array;
  /** s of true time. */
  readonly timeS: Float64Array;
  /** Along the motion axis, mm; NaN in a gap. */
  readonly displacementMm: Float64Array;
  readonly markers: readonly MarkerPath[];
}

/** One marker through the clip; NaN where it was lost. */
export interface MarkerPath {
  readonly id: string;
  readonly role: string;
  /** Why it could not be followed; null where it could. */
  readonly error: string | null;
  readonly xPx: Float64Array;
  readonly yPx: Float64Array;
  readonly score: Float64Array;
  /** 0 seen, 1 doubtful, 2 lost. */
  readonly state: Float64Array;
}

const MAGIC = 0x52545744; // "DWTR"
const VERSION = 1;
const HEAD_BYTES = 16;

interface Header {
  readonly clip: string;
  readonly frames: number;
  readonly markers: readonly { id: string; role: string; error: string | null }[];
}

function seriesOf(track: MotionTrack): Float64Array[] {
  return [
    track.frame,
    track.timeS,
    track.displacementMm,
    ...track.markers.flatMap((each) => [each.xPx, each.yPx, each.score, each.state]),
  ];
}

/** Packs a motion record. Throws Error where its series differ in length. */
export function packTrack(track: MotionTrack): Uint8Array {
  const frames = track.timeS.length;
  const series = seriesOf(track);
  if (series.some((each) => each.length !== frames))
    throw new Error('the series of a track differ in length');
  const header: Header = {
    clip: track.clip,
    frames,
    markers: track.markers.map(({ id, role, error }) => ({ id, role, error })),
  };
  const text = new TextEncoder().encode(JSON.stringify(header));
  const padded = Math.ceil(text.length / 8) * 8;
  const bytes = new Uint8Array(HEAD_BYTES + padded + series.length * frames * 8).fill(0x20, HEAD_BYTES);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, MAGIC, true);
  view.setUint32(4, VERSION, true);
  view.setUint32(8, padded, true);
  bytes.set(text, HEAD_BYTES);
  let at = HEAD_BYTES + padded;
  for (const each of series) {
    bytes.set(new Uint8Array(each.buffer, each.byteOffset, each.byteLength), at);
    at += each.byteLength;
  }
  return bytes;
}

/** Unpacks a motion record. Throws Error where the bytes are none. */
export function unpackTrack(bytes: Uint8Array): MotionTrack {
  const copy = bytes.slice(); // aligned, whatever carried it
  const view = new DataView(copy.buffer);
  if (copy.length < HEAD_BYTES || view.getUint32(0, true) !== MAGIC)
    throw new Error('these bytes hold no track');
  if (view.getUint32(4, true) !== VERSION) throw new Error('a track of another version');
  const padded = view.getUint32(8, true);
  const text = new TextDecoder().decode(copy.subarray(HEAD_BYTES, HEAD_BYTES + padded));
  const header = JSON.parse(text) as Header;
  let at = HEAD_BYTES + padded;
  const expected = at + (3 + 4 * header.markers.length) * header.frames * 8;
  if (copy.length !== expected) throw new Error('a track that is cut short');
  const next = (): Float64Array => {
    const series = new Float64Array(copy.buffer, at, header.frames);
    at += series.byteLength;
    return series;
  };
  return {
    clip: header.clip,
    frame: next(),
    timeS: next(),
    displacementMm: next(),
    markers: header.markers.map((each) => ({
      ...each,
      xPx: next(),
      yPx: next(),
      score: next(),
      state: next(),
    })),
  };
}
