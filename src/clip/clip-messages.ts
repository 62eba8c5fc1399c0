import { basename } from 'node:path';
import type { FfmpegResult } from './run-ffmpeg.ts';

/** How a clip is called in a message: its file name. */
export function clipName(path: string): string {
  return basename(path);
}

/** A line of ffmpeg's without its marks and memory addresses, which differ from run to run. */
export function plainWords(line: string): string {
  const unmarked = line.replace(/^(\[[^\]]*\]\s*)+/, '').replace(/\s*\(?0x[0-9a-f]{6,}\)?/g, '');
  return unmarked.replace(/\s*[.:]*\s*$/, '');
}

/** The last thing ffmpeg said; empty where it said nothing. */
export function lastWords(result: FfmpegResult): string {
  return plainWords(result.lastLines.at(-1) ?? '');
}

/** One sentence on a pass over a clip that did not give what it should. */
export function endedBadly(path: string, result: FfmpegResult, framesSoFar: number): string {
  const name = clipName(path);
  const after = framesSoFar > 0 ? ` after ${framesSoFar} frames` : '';
  const said = lastWords(result) === '' ? '' : ` ("${lastWords(result)}")`;
  switch (result.reason) {
    case 'stalled':
      return `${name}: ffmpeg fell silent${after} and was stopped; try the clip again, or another ffmpeg.`;
    case 'killed':
      return `${name}: ffmpeg was killed by ${result.signal ?? 'the system'}${after}; measure the clip again.`;
    case 'not-started':
      return `${name}: ffmpeg could not be started${said}; check its installation.`;
    case 'failed':
      return `${name}: ffmpeg ended with status ${result.exitCode}${after}${said}; the clip cannot be decoded.`;
    default:
      return `${name}: no frame of the clip could be decoded${said}; copy it anew from the camera.`;
  }
}
