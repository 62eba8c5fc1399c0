import type { NutCursor } from './nut-cursor.ts';

/** Bits of a frame code, as the NUT specification names them. */
export const FrameFlag = {
  endOfRelevance: 2,
  codedPts: 8,
  streamId: 16,
  sizeMsb: 32,
  checksum: 64,
  reserved: 128,
  sideData: 256,
  headerIndex: 1024,
  matchTime: 2048,
  codedFlags: 4096,
  invalid: 8192,
} as const;

/** What the first byte of a frame stands for. */
export interface FrameCode {
  readonly flags: number;
  readonly ptsDelta: number;
  readonly sizeMultiplier: number;
  readonly sizeLsb: number;
  readonly reservedCount: number;
  readonly headerIndex: number;
}

/** The main header: time bases, frame codes, and the payload beginnings that frames may leave out. */
export interface NutMainHeader {
  readonly timeBases: readonly (readonly [numerator: number, denominator: number])[];
  /** One entry for each first byte, 256 in all. */
  readonly frameCodes: readonly FrameCode[];
  readonly elidedHeaders: readonly Uint8Array[];
}

/** What the header of the (only) stream says of its timestamps. */
export interface NutStreamHeader {
  readonly timeBaseIndex: number;
  /** Timestamps are given by their last so many bits where they do not change further up. */
  readonly ptsLsbBits: number;
}

/** First byte of every packet with a start code ('N'); never a frame code. */
export const START_CODE_BYTE = 0x4e;
const INVALID: FrameCode = {
  flags: FrameFlag.invalid,
  ptsDelta: 0,
  sizeMultiplier: 1,
  sizeLsb: 0,
  reservedCount: 0,
  headerIndex: 0,
};

/** Reads the main header's content (specification, "Main header"). */
export function readMainHeader(from: NutCursor): NutMainHeader {
  const version = from.unsigned();
  if (version > 3) from.unsigned(); // minor version
  from.unsigned(); // stream count
  from.unsigned(); // max distance
  const timeBases: [number, number][] = [];
  for (let left = from.unsigned(); left > 0; left--) timeBases.push([from.unsigned(), from.unsigned()]);
  const frameCodes = readFrameCodes(from);
  const elidedHeaders: Uint8Array[] = [new Uint8Array(0)];
  for (let left = from.unsigned(); left > 0; left--) elidedHeaders.push(from.take(from.unsigned()));
  return { timeBases, frameCodes, elidedHeaders };
}

/** The table of frame codes, stored as runs of which only the differences to the run before are written. */
function readFrameCodes(from: NutCursor): FrameCode[] {
  const codes: FrameCode[] = [];
  let ptsDelta = 0;
  let sizeMultiplier = 1;
  let headerIndex = 0;
  while (codes.length < 256) {
    const flags = from.unsigned();
    const fields = from.unsigned();
    if (fields > 0) ptsDelta = from.signed();
    if (fields > 1) sizeMultiplier = from.unsigned();
    if (fields > 2) from.unsigned(); // stream: there is only one
    const firstSize = fields > 3 ? from.unsigned() : 0;
    const reservedCount = fields > 4 ? from.unsigned() : 0;
    const count = fields > 5 ? from.unsigned() : sizeMultiplier - firstSize;
    if (fields > 6) from.signed(); // match time delta
    if (fields > 7) headerIndex = from.unsigned();
    for (let extra = 8; extra < fields; extra++) from.unsigned();
    if (count <= 0) throw new Error('A NUT frame code run is empty.');
    for (let i = 0; i < count && codes.length < 256; i++) {
      if (codes.length === START_CODE_BYTE) codes.push(INVALID); // takes a place in the table, not in the run
      codes.push({ flags, ptsDelta, sizeMultiplier, sizeLsb: firstSize + i, reservedCount, headerIndex });
    }
  }
  return codes.slice(0, 256);
}

/** Reads a stream header's beginning (specification, "Stream header"); the rest does not concern raw pictures. */
export function readStreamHeader(from: NutCursor): NutStreamHeader {
  from.unsigned(); // stream id
  from.unsigned(); // stream class
  from.skip(from.unsigned()); // four-character code
  const timeBaseIndex = from.unsigned();
  const ptsLsbBits = from.unsigned();
  return { timeBaseIndex, ptsLsbBits };
}
