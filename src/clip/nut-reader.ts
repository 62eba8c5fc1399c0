import { NeedMoreBytes, NutCursor } from './nut-cursor.ts';
import {
  FrameFlag,
  type NutMainHeader,
  type NutStreamHeader,
  readMainHeader,
  readStreamHeader,
  START_CODE_BYTE,
} from './nut-headers.ts';

/** One packet of the stream; `payload` is valid only during the call, its buffer is reused. */
export interface NutPacket {
  /** Presentation timestamp, ticks of `timeBase`. */
  readonly pts: number;
  /** One tick, s, as [numerator, denominator]. */
  readonly timeBase: readonly [number, number];
  /** Starts at an address divisible by eight, so that wider words can be laid over it. */
  readonly payload: Uint8Array;
}

const FILE_ID = 'nut/multimedia container\0';
const MAIN = 0x4e4d7a56;
const STREAM = 0x4e531140;
const SYNC_POINT = 0x4e4be4ad;
/** Headers longer than this carry a checksum of their own. */
const CHECKED_LENGTH = 4096;
/** No header of a one-stream file is this long: beyond it the stream is not what it should be. */
const LONGEST_HEADER = 1 << 20;
/** Payloads longer than this never leave out their beginning. */
const LONGEST_ELIDED = 4096;

/**
 * Takes a one-stream NUT file piece by piece as it comes from a pipe, and hands out each packet with its exact
 * timestamp: in this container timestamp and picture cannot part. Written after the public NUT specification.
 * Only one payload is held at a time. Throws Error when the bytes are not NUT.
 */
export class NutReader {
  readonly #onPacket: (packet: NutPacket) => void;
  #main: NutMainHeader | null = null;
  #stream: NutStreamHeader | null = null;
  #lastPts = 0;
  #identified = false;
  /** Bytes of an item whose end is not there yet. */
  #unread: Uint8Array = new Uint8Array(0);
  #payload: Uint8Array = new Uint8Array(0);
  #filled = 0;
  /** Payload bytes still to come; null between packets. */
  #missing: number | null = null;

  /** `onPacket` is called synchronously from `push`; what it throws leaves through `push`. */
  constructor(onPacket: (packet: NutPacket) => void) {
    this.#onPacket = onPacket;
  }

  /** True when a packet has begun whose end has not come. */
  get midPacket(): boolean {
    return this.#missing !== null;
  }

  /** Takes the next piece of the stream. */
  push(piece: Uint8Array): void {
    let bytes = piece;
    if (this.#unread.length > 0) {
      bytes = new Uint8Array(this.#unread.length + piece.length);
      bytes.set(this.#unread);
      bytes.set(piece, this.#unread.length);
    }
    const cursor = new NutCursor(bytes);
    let start = 0;
    try {
      for (;;) {
        start = cursor.at;
        if (this.#missing !== null) {
          if (!this.#fill(cursor)) break;
        } else {
          this.#readItem(cursor);
        }
      }
    } catch (error) {
      if (!(error instanceof NeedMoreBytes)) throw error;
    }
    this.#unread = bytes.slice(this.#missing === null ? start : bytes.length);
    if (this.#unread.length > LONGEST_HEADER) throw new Error('The NUT stream from ffmpeg is not readable.');
  }

  /** Copies what there is of the payload; hands the packet out when it is complete. */
  #fill(from: NutCursor): boolean {
    const count = Math.min(this.#missing ?? 0, from.bytes.length - from.at);
    this.#payload.set(from.bytes.subarray(from.at, from.at + count), this.#filled);
    from.at += count;
    this.#filled += count;
    this.#missing = (this.#missing ?? 0) - count;
    if (this.#missing > 0) return false;
    this.#missing = null;
    const timeBase = this.#timeBase();
    this.#onPacket({ pts: this.#lastPts, timeBase, payload: this.#payload.subarray(0, this.#filled) });
    return true;
  }

  #readItem(from: NutCursor): void {
    if (!this.#identified) this.#identify(from);
    else if (from.bytes[from.at] === START_CODE_BYTE) this.#readHeader(from);
    else this.#readFrameHeader(from);
  }

  #identify(from: NutCursor): void {
    const id = from.take(FILE_ID.length);
    if (String.fromCharCode(...id) !== FILE_ID) throw new Error('What ffmpeg sent is not a NUT stream.');
    this.#identified = true;
  }

  #readHeader(from: NutCursor): void {
    const code = ((from.byte() << 24) | (from.byte() << 16) | (from.byte() << 8) | from.byte()) >>> 0;
    from.skip(4); // second half of the start code
    const length = from.unsigned();
    if (length > CHECKED_LENGTH) from.skip(4);
    const content = new NutCursor(from.bytes, from.at);
    from.skip(length); // not before all of it is there
    if (code === MAIN) this.#main = readMainHeader(content);
    else if (code === STREAM) this.#stream = readStreamHeader(content);
    else if (code === SYNC_POINT) this.#syncTo(content.unsigned());
  }

  /** A sync point restates the time in one of the time bases: value times their number, plus its index. */
  #syncTo(coded: number): void {
    const bases = this.#main?.timeBases ?? [];
    const from = bases[coded % bases.length];
    if (from === undefined) throw new Error('A NUT sync point comes before the main header.');
    const to = this.#timeBase();
    const ticks = BigInt(Math.floor(coded / bases.length)) * BigInt(from[0]) * BigInt(to[1]);
    this.#lastPts = Number(ticks / (BigInt(from[1]) * BigInt(to[0])));
  }

  #readFrameHeader(from: NutCursor): void {
    const main = this.#main;
    const first = from.byte();
    const code = main?.frameCodes[first];
    if (main === null || code === undefined) throw new Error('A NUT frame comes before the main header.');
    let flags = code.flags;
    if (flags & FrameFlag.codedFlags) flags ^= from.unsigned();
    if (flags & FrameFlag.invalid) throw new Error('The NUT stream from ffmpeg has lost its step.');
    if (flags & FrameFlag.streamId) from.unsigned();
    const pts = flags & FrameFlag.codedPts ? this.#fullPts(from.unsigned()) : this.#lastPts + code.ptsDelta;
    let size = code.sizeLsb;
    if (flags & FrameFlag.sizeMsb) size += code.sizeMultiplier * from.unsigned();
    if (flags & FrameFlag.matchTime) from.signed();
    const headerIndex = flags & FrameFlag.headerIndex ? from.unsigned() : code.headerIndex;
    let reserved = flags & FrameFlag.reserved ? from.unsigned() : code.reservedCount;
    for (; reserved > 0; reserved--) from.unsigned();
    if (flags & FrameFlag.checksum) from.skip(4);
    if (flags & FrameFlag.sideData)
      throw new Error('Side data in a NUT frame is not expected from raw pictures.');
    const beginning = main.elidedHeaders[size > LONGEST_ELIDED ? 0 : headerIndex];
    if (beginning === undefined) throw new Error('A NUT frame leaves out a beginning that was never stated.');
    this.#beginPayload(size, beginning);
    this.#lastPts = pts;
  }

  /** Completes a timestamp given by its last bits to the value nearest to the one before. */
  #fullPts(coded: number): number {
    const span = 2 ** (this.#stream?.ptsLsbBits ?? 0);
    if (coded >= span) return coded - span;
    const lowest = this.#lastPts - span / 2;
    return ((((coded - lowest) % span) + span) % span) + lowest;
  }

  #beginPayload(size: number, beginning: Uint8Array): void {
    if (size > this.#payload.length) this.#payload = new Uint8Array(size);
    this.#payload.set(beginning);
    this.#filled = beginning.length;
    this.#missing = size - beginning.length;
  }

  #timeBase(): readonly [number, number] {
    const base = this.#main?.timeBases[this.#stream?.timeBaseIndex ?? -1];
    if (base === undefined) throw new Error('A NUT frame comes before the stream header.');
    return base;
  }
}
