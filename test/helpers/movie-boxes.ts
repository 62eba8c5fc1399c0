import { readFileSync, writeFileSync } from 'node:fs';

// Changes to the boxes of an MP4 file (ISO/IEC 14496-12), so that tests do not depend on how a muxer writes them.

interface Box {
  readonly type: string;
  readonly start: number;
  readonly end: number;
}

const CONTAINERS = new Set(['moov', 'trak', 'edts', 'mdia', 'minf', 'stbl']);

function* boxes(file: Buffer, start = 0, end = file.length): Generator<Box> {
  for (let at = start; at + 8 <= end; ) {
    const size = file.readUInt32BE(at);
    const type = file.toString('latin1', at + 4, at + 8);
    const boxEnd = size === 0 ? end : at + size;
    yield { type, start: at, end: boxEnd };
    if (CONTAINERS.has(type)) yield* boxes(file, at + 8, boxEnd);
    at = boxEnd;
  }
}

function findBox(file: Buffer, type: string): Box {
  for (const box of boxes(file)) if (box.type === type) return box;
  throw new Error(`The test clip has no ${type} box.`);
}

/** Where a box begins and ends in a file. */
export function boxRange(path: string, type: string): { start: number; end: number } {
  return findBox(readFileSync(path), type);
}

/** Upper left 2 x 2 of the display matrix, rows [a b] [c d]: x' = a x + c y, y' = b x + d y. */
export type DisplayMatrix = readonly [a: number, b: number, c: number, d: number];

/** Clockwise turns by degrees, and a mirror image, as display matrices. */
export const DISPLAY_MATRIX: Readonly<Record<'90' | '180' | '270' | 'mirrored', DisplayMatrix>> = {
  90: [0, 1, -1, 0],
  180: [-1, 0, 0, -1],
  270: [0, -1, 1, 0],
  mirrored: [-1, 0, 0, 1],
};

/** Writes a copy with another display matrix into the (first) track header. */
export function withDisplayMatrix(from: string, to: string, [a, b, c, d]: DisplayMatrix): void {
  const file = readFileSync(from);
  const header = findBox(file, 'tkhd').start;
  const at = header + (file[header + 8] === 1 ? 60 : 48);
  const one = 0x10000;
  for (const [i, value] of [a, b, 0, c, d].entries()) file.writeInt32BE(value * one, at + 4 * i);
  writeFileSync(to, file);
}

/** Writes a copy whose only edit begins at a media time (media ticks) and lasts some movie ticks. */
export function withEdit(from: string, to: string, mediaTime: number, durationMovieTicks: number): void {
  const file = readFileSync(from);
  const list = findBox(file, 'elst').start;
  if (file[list + 8] !== 0 || file.readUInt32BE(list + 12) !== 1)
    throw new Error('One short edit was expected.');
  file.writeUInt32BE(durationMovieTicks, list + 16);
  file.writeInt32BE(mediaTime, list + 20);
  writeFileSync(to, file);
}

/** Ticks a second of the whole movie, the unit of edit durations. */
export function movieTicksPerS(path: string): number {
  const file = readFileSync(path);
  const header = findBox(file, 'mvhd').start;
  return file.readUInt32BE(header + (file[header + 8] === 1 ? 28 : 20));
}

/** Media time at which the only edit begins, media ticks. */
export function editStart(path: string): number {
  const file = readFileSync(path);
  return file.readInt32BE(findBox(file, 'elst').start + 20);
}

/** Writes a copy with a 32-bit float under a metadata key, as Android's camera writes its capture rate. */
export function withFloatTag(from: string, to: string, key: string, value: number): void {
  const file = readFileSync(from);
  const movie = findBox(file, 'moov');
  if (movie.end !== file.length) throw new Error('The movie box was expected at the end of the file.');
  const number = Buffer.alloc(4);
  number.writeFloatBE(value);
  const handler = box('hdlr', zeros(8), text('mdta'), zeros(13));
  const keys = box('keys', zeros(4), uint32(1), box('mdta', text(key)));
  const FLOAT32 = 23;
  const data = box('data', uint32(FLOAT32), zeros(4), number);
  const list = box('ilst', Buffer.concat([uint32(8 + data.length), uint32(1), data]));
  const meta = box('meta', handler, keys, list);
  file.writeUInt32BE(movie.end - movie.start + meta.length, movie.start);
  writeFileSync(to, Buffer.concat([file, meta]));
}

function box(type: string, ...content: readonly Buffer[]): Buffer {
  const body = Buffer.concat(content);
  return Buffer.concat([uint32(8 + body.length), text(type), body]);
}

function uint32(value: number): Buffer {
  const bytes = Buffer.alloc(4);
  bytes.writeUInt32BE(value);
  return bytes;
}

const zeros = (count: number): Buffer => Buffer.alloc(count);
const text = (value: string): Buffer => Buffer.from(value, 'latin1');
