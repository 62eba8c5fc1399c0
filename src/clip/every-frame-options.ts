import type { Ffmpeg } from './find-ffmpeg.ts';

/** Since this version of the container library (ffmpeg 5.1), `-vsync` is called `-fps_mode`. */
const FPS_MODE_SINCE = [59, 27] as const;

/**
 * Output options that make ffmpeg pass on every frame at its own time: none doubled or dropped to even out the rate,
 * no timestamp rounded to a guessed rate. `timeBase` is one tick of the clip's clock, s, as [numerator, denominator].
 */
export function everyFrameOptions(ffmpeg: Ffmpeg, timeBase: readonly [number, number]): string[] {
  const [major, minor] = ffmpeg.formatLibrary;
  const renamed = major > FPS_MODE_SINCE[0] || (major === FPS_MODE_SINCE[0] && minor >= FPS_MODE_SINCE[1]);
  const mode = renamed ? ['-fps_mode', 'passthrough'] : ['-vsync', '0'];
  // Named outright: versions differ in what they call "as the demuxer has it", and some lose it in a stack of crops.
  return [...mode, '-enc_time_base', `${timeBase[0]}:${timeBase[1]}`];
}
