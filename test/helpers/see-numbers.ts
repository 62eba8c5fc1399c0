import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import type { DecodeOptions, DecodeResult } from '../../src/clip/decoded-frame.ts';
import { ffmpeg } from './make-clip.ts';
import { readNumber } from './numbered-frames.ts';

/** What a pass over whole numbered frames saw: the number in each picture, with the index and time it came under. */
export interface Seen {
  readonly numbers: readonly number[];
  readonly indices: readonly number[];
  readonly timesS: readonly number[];
  readonly result: DecodeResult;
}

/** Decodes a clip of numbered frames and notes what came. */
export async function seeNumbers(clip: ClipInfo, options: DecodeOptions = {}): Promise<Seen> {
  const numbers: number[] = [];
  const indices: number[] = [];
  const timesS: number[] = [];
  const result = await decodeWholeFrames(
    clip,
    ({ index, timeS, regions: [whole] }) => {
      if (whole !== undefined) numbers.push(readNumber(whole));
      indices.push(index);
      timesS.push(timeS);
    },
    { ffmpeg, ...options },
  );
  return { numbers, indices, timesS, result };
}

/** Whole numbers from `first` up to, not including, `end`. */
export function upTo(end: number, first = 0): number[] {
  return Array.from({ length: end - first }, (_, i) => first + i);
}
