import type { LumaImage } from '../../src/track/luma-image.ts';

/** Brightness of a pixel of frame n, as a fraction of the largest value. */
export type Painter = (x: number, y: number, n: number) => number;

const BITS = 8;
const DARK = 0.25;
const BRIGHT = 0.75;

/** Eight upright bars over the whole picture, dark or bright: the frame's number in binary, lowest bit first. */
export function numberBars(width: number): Painter {
  return (x, _y, n) => ((n >> Math.min(BITS - 1, Math.floor((x * BITS) / width))) & 1 ? BRIGHT : DARK);
}

/** Reads the number off an image of the whole picture painted with `numberBars`. */
export function readNumber({ data, width, height, maxValue }: LumaImage): number {
  const row = (height >> 1) * width;
  let n = 0;
  for (let bit = 0; bit < BITS; bit++) {
    const middle = Math.floor(((bit + 0.5) * width) / BITS);
    if ((data[row + middle] ?? 0) > (maxValue * (DARK + BRIGHT)) / 2) n |= 1 << bit;
  }
  return n;
}

/** A texture in which no two neighbourhoods are alike: whole numbers of 1/255, different in every frame. */
export const texture: Painter = (x, y, n) =>
  (16 + ((x * 7 + y * 13 + ((x * y) % 11) * 5 + n * 29) % 220)) / 255;

/** Sample value of a painted pixel at a bit depth. */
export function sample(paint: Painter, x: number, y: number, n: number, bitDepth: number): number {
  const top = paint(x, y, n) * 255;
  return bitDepth === 8 ? Math.round(top) : Math.round(top * 2 ** (bitDepth - 8)) + ((x + y) & 3);
}

/** Raw bytes of frame n in a planar yuv or gray format, chroma in the middle. */
export function numberedFrame(
  n: number,
  width: number,
  height: number,
  pixelFormat: string,
  paint: Painter = numberBars(width),
): Buffer {
  const bitDepth = bitDepthOf(pixelFormat);
  const chroma = chromaSamples(pixelFormat, width, height);
  const samples = new Uint16Array(width * height + chroma).fill(2 ** (bitDepth - 1));
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) samples[y * width + x] = sample(paint, x, y, n, bitDepth);
  }
  return bitDepth === 8 ? Buffer.from(samples) : Buffer.from(samples.buffer);
}

function bitDepthOf(pixelFormat: string): number {
  return Number(/(?:p|gray)(10|12)le$/.exec(pixelFormat)?.[1] ?? 8);
}

function chromaSamples(pixelFormat: string, width: number, height: number): number {
  if (pixelFormat.startsWith('gray')) return 0;
  const [, mode] = /^yuvj?(4\d\d)p/.exec(pixelFormat) ?? [];
  const halfWidth = (width + 1) >> 1;
  const halfHeight = (height + 1) >> 1;
  if (mode === '420') return 2 * halfWidth * halfHeight;
  if (mode === '422') return 2 * halfWidth * height;
  if (mode === '444') return 2 * width * height;
  throw new Error(`Test frames cannot be painted in ${pixelFormat}.`);
}
