import { resolve } from 'node:path';
import createCommand from 'fluent-ffmpeg';
import type { ClipContainer } from './clip-info.ts';

// The one file that touches fluent-ffmpeg. Only its argument builder is used: it orders input options, input,
// filters and output options. Starting, watching and stopping the process is ours (run-ffmpeg.ts).
interface CommandBuilder {
  input(source: string): CommandBuilder;
  inputOptions(options: readonly string[]): CommandBuilder;
  videoFilters(filters: readonly string[]): CommandBuilder;
  outputOptions(options: readonly string[]): CommandBuilder;
  output(target: string): CommandBuilder;
  _getArguments(): string[];
}
// The published types leave out the method that gives the arguments without running anything.
const buildCommand = createCommand as unknown as () => CommandBuilder;

/** One pass of ffmpeg over one clip, its result on standard output. */
export interface FfmpegPass {
  /** The clip; any name a file can have. */
  readonly path: string;
  /** The only demuxer that may open the clip, so that a playlist or a script in disguise opens nothing. */
  readonly container: ClipContainer;
  /** Options before the input, in order. */
  readonly inputOptions?: readonly string[];
  /** Filter chain of the picture, one entry a filter; none where empty or absent. */
  readonly filters?: readonly string[];
  /** Options of the output, in order, the format (`-f`) among them. */
  readonly outputOptions: readonly string[];
  /** Least severe message to pass on; 'warning' where absent. */
  readonly logLevel?: 'info' | 'warning' | 'error';
}

/**
 * Argument list of a pass, one argument an entry, never joined into a shell line. The clip is given as an absolute
 * `file:` address, so that dashes, colons, quotes, percent signs and spaces in its name are only characters; no
 * protocol but file and pipe may be opened, nor a file that a movie's data reference names.
 */
export function ffmpegArguments(pass: FfmpegPass): string[] {
  const guarded = [
    '-nostdin',
    '-hide_banner',
    '-nostats',
    ...['-loglevel', `repeat+level+${pass.logLevel ?? 'warning'}`],
    ...['-protocol_whitelist', 'file,pipe'],
    ...(pass.container === 'mov' ? ['-enable_drefs', '0', '-use_absolute_path', '0'] : []),
    ...(pass.inputOptions ?? []),
    ...['-f', pass.container],
  ];
  const command = buildCommand()
    .input(`file:${resolve(pass.path)}`)
    .inputOptions(guarded)
    // The first real picture stream: 'V' leaves cover pictures out.
    .outputOptions(['-map', '0:V:0', ...pass.outputOptions])
    .output('pipe:1');
  if (pass.filters !== undefined && pass.filters.length > 0) command.videoFilters(pass.filters);
  return command._getArguments();
}
