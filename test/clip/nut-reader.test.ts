import { execFileSync } from 'node:child_process';
import fc from 'fast-check';
import { beforeAll, describe, expect, test } from 'vitest';
import { NutReader } from '../../src/clip/nut-reader.ts';
import { ffmpeg } from '../helpers/make-clip.ts';

interface Packet {
  readonly timeS: number;
  readonly payload: string;
}

/** Reads a NUT file in pieces cut at the given places. */
function read(file: Uint8Array, cuts: readonly number[] = []): Packet[] {
  const packets: Packet[] = [];
  const reader = new NutReader(({ pts, timeBase, payload }) => {
    const timeS = (pts * timeBase[0]) / timeBase[1];
    packets.push({ timeS, payload: Buffer.from(payload).toString('hex') });
  });
  const places = [0, ...cuts, file.length].sort((a, b) => a - b);
  for (const [i, end] of places.slice(1).entries()) reader.push(file.subarray(places[i], end));
  expect(reader.midPacket).toBe(false);
  return packets;
}

/** A NUT stream of raw gray frames as ffmpeg writes it, with the frames that went in. */
function write(frames: readonly Buffer[], side: number, setpts: string, ticksPerS: number): Buffer {
  const from = ['-f', 'rawvideo', '-pix_fmt', 'gray', '-s', `${side}x${side}`, '-r', '30', '-i', 'pipe:0'];
  const times = [
    '-vf',
    `settb=1/${ticksPerS},setpts=${setpts}`,
    '-vsync',
    '0',
    '-enc_time_base',
    `1:${ticksPerS}`,
  ];
  const to = ['-c:v', 'rawvideo', '-f', 'nut', 'pipe:1'];
  return execFileSync(ffmpeg.path, ['-loglevel', 'error', ...from, ...times, ...to], {
    input: Buffer.concat(frames),
  });
}

const gray = (side: number, n: number): Buffer => Buffer.alloc(side * side, n);

describe('against the muxer of ffmpeg', () => {
  const SIDE = 80;
  const frames = Array.from({ length: 12 }, (_, n) => {
    const frame = gray(SIDE, 0);
    for (let i = 0; i < frame.length; i++) frame[i] = (i * 7 + n * 31) % 251;
    return frame;
  });
  let file: Buffer;
  beforeAll(() => {
    file = write(frames, SIDE, 'N*3003+mod(N*N*577\\,900)', 90_000);
  });

  test('all packets, all bytes, and uneven timestamps to the tick', () => {
    const packets = read(file);
    expect(packets.map((p) => p.payload)).toEqual(frames.map((frame) => frame.toString('hex')));
    expect(packets.map((p) => Math.round(p.timeS * 90_000 * 1e6) / 1e6)).toEqual(
      frames.map((_, n) => n * 3003 + ((n * n * 577) % 900)),
    );
  });

  test('wherever the pieces break, the same', () => {
    const whole = read(file);
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: file.length }), { maxLength: 30 }), (cuts) => {
        expect(read(file, cuts)).toEqual(whole);
      }),
      { seed: 6, numRuns: 60 },
    );
    const byteByByte = Array.from({ length: 3000 }, (_, i) => i);
    expect(read(file, byteByByte)).toEqual(whole);
  });

  test('the payload begins at an address that wider words can be laid over', () => {
    const reader = new NutReader(({ payload }) => expect(payload.byteOffset % 8).toBe(0));
    reader.push(file);
  });

  test('a stream cut off in a packet is known to be', () => {
    let packets = 0;
    const reader = new NutReader(() => packets++);
    reader.push(file.subarray(0, file.length >> 1));
    expect(packets).toBeGreaterThan(3);
    expect(reader.midPacket).toBe(true);
  });
});

test('small packets whose beginning the muxer leaves out (it looks like a start code) are whole again', () => {
  const frames = [0, 1, 2, 3].map((n) => {
    const frame = gray(16, 40 + n);
    Buffer.from('000001', 'hex').copy(frame);
    return frame;
  });
  expect(read(write(frames, 16, 'N', 30)).map((p) => p.payload)).toEqual(
    frames.map((f) => f.toString('hex')),
  );
});

test('timestamps beyond 32 bits', () => {
  const frames = [0, 1, 2].map((n) => gray(16, n));
  const file = write(frames, 16, '5000000000+N*N*N*1001', 90_000);
  expect(read(file).map((p) => Math.round(p.timeS * 90_000))).toEqual([
    5_000_000_000, 5_000_001_001, 5_000_008_008,
  ]);
});

describe('what is not NUT is refused', () => {
  test('text', () => {
    expect(() => read(Buffer.from('This is no container at all, but it is long enough.'))).toThrow(
      /not a NUT stream/,
    );
  });

  test('noise after a good beginning', () => {
    const file = Buffer.concat([Buffer.from('nut/multimedia container\0'), Buffer.alloc(200, 0xff)]);
    expect(() => read(file)).toThrow(/before the main header/);
  });
});
