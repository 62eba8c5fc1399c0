import { fileURLToPath } from 'node:url';
import { ffmpeg } from './make-clip.ts';

/** The small scripts in fake-ffmpeg/ that misbehave in one way each. */
export type Misbehaviour =
  | 'stalls'
  | 'refuses-to-stop'
  | 'asks-back'
  | 'exits-1'
  | 'floods-stderr'
  | 'short-frames'
  | 'killed-mid-way'
  | 'records'
  | 'stalls-mid-way'
  | 'talks-nonsense'
  | 'tells-old-version';

/** Path of an executable that stands in for ffmpeg and misbehaves. */
export function fakeFfmpeg(how: Misbehaviour): string {
  const file = how === 'asks-back' ? `${how}.mjs` : `${how}.sh`;
  return fileURLToPath(new URL(`./fake-ffmpeg/${file}`, import.meta.url));
}

/** Tells the scripts that pass on the real ffmpeg's output where to cut it, bytes. */
export function cutRealFfmpegAfter(bytes: number): void {
  process.env['REAL_FFMPEG'] = ffmpeg.path;
  process.env['CUT_AFTER_BYTES'] = String(bytes);
}
