import { runTimed, type TimedProcess } from './timed-process.ts';

/** Decodes the clip's video and throws the frames away: the least that any measurement has to do. */
export function decodeOnly(ffmpeg: string, file: string): Promise<TimedProcess> {
  return runTimed(ffmpeg, ['-nostdin', '-v', 'error', '-i', file, '-map', '0:v:0', '-f', 'null', '-']);
}
