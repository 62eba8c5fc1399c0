import { createRequire } from 'node:module';
import { InputError } from '../errors.ts';
import { runFfmpeg } from './run-ffmpeg.ts';

/** Where an ffmpeg was found, in the order of search. */
export type FfmpegOrigin = 'DWELLBOOK_FFMPEG' | 'ffmpeg-static' | 'PATH' | '@ffmpeg-installer/ffmpeg';

/** An ffmpeg that has been started once and has told its version. */
export interface Ffmpeg {
  /** What to start: a path, or the bare name for one on PATH. */
  readonly path: string;
  /** Version as the program names itself, such as '5.1.9-0+deb12u1'. */
  readonly version: string;
  /** Major and minor version of its container library (libavformat): what it can do, also for unnumbered builds. */
  readonly formatLibrary: readonly [major: number, minor: number];
  readonly origin: FfmpegOrigin;
}

/** A place to look, and what is there: null where the package is not installed. */
export interface FfmpegCandidate {
  readonly origin: FfmpegOrigin;
  readonly path: string | null;
}

/** No ffmpeg says more about itself, characters; what does is not ffmpeg. */
const LONGEST_VERSION_TEXT = 65_536;
/** Asking for the version takes milliseconds; a program that takes longer than this is not ffmpeg, s. */
const VERSION_STALL_S = 10;

/**
 * Finds an ffmpeg that runs, in order: the variable DWELLBOOK_FFMPEG, the package ffmpeg-static, PATH, the package
 * @ffmpeg-installer/ffmpeg. Throws InputError when the variable names something that does not run (it is never
 * passed over silently), and when there is none at all, saying what to install.
 */
export async function findFfmpeg(
  candidates: readonly FfmpegCandidate[] = ffmpegCandidates(process.env),
): Promise<Ffmpeg> {
  const failures: string[] = [];
  for (const { origin, path } of candidates) {
    if (path === null) continue;
    const found = await askVersion(path, origin);
    if (typeof found !== 'string') return found;
    if (origin === 'DWELLBOOK_FFMPEG') {
      throw new InputError(
        `DWELLBOOK_FFMPEG names ${path}, which does not run as ffmpeg (${found}); correct or unset it.`,
      );
    }
    failures.push(`${origin}: ${found}`);
  }
  const tried = failures.length > 0 ? ` (tried ${failures.join('; ')})` : '';
  throw new InputError(
    `No ffmpeg was found to decode clips with${tried}; install ffmpeg, or run "npm install ffmpeg-static", or set DWELLBOOK_FFMPEG to its path.`,
  );
}

/** The places to look in, given the environment; packages that are not installed come with a null path. */
export function ffmpegCandidates(env: Readonly<Record<string, string | undefined>>): FfmpegCandidate[] {
  const require = createRequire(import.meta.url);
  const packaged = (read: () => unknown): string | null => {
    try {
      const path = read();
      // A packed desktop program keeps executables beside its archive, not inside.
      return typeof path === 'string' ? path.replace(/app\.asar(?=[\\/])/, 'app.asar.unpacked') : null;
    } catch {
      return null; // optional package: not installed, or not for this platform
    }
  };
  return [
    { origin: 'DWELLBOOK_FFMPEG', path: env['DWELLBOOK_FFMPEG'] || null },
    { origin: 'ffmpeg-static', path: packaged(() => require('ffmpeg-static')) },
    { origin: 'PATH', path: 'ffmpeg' },
    {
      origin: '@ffmpeg-installer/ffmpeg',
      path: packaged(() => (require('@ffmpeg-installer/ffmpeg') as { path: unknown }).path),
    },
  ];
}

/** The ffmpeg at a path, or one phrase saying why it is not one. */
async function askVersion(path: string, origin: FfmpegOrigin): Promise<Ffmpeg | string> {
  let text = '';
  const decoder = new TextDecoder();
  const result = await runFfmpeg(path, ['-version'], {
    stallS: VERSION_STALL_S,
    onOutput: (chunk) => {
      text += decoder.decode(chunk, { stream: true });
      return text.length < LONGEST_VERSION_TEXT;
    },
  });
  if (result.reason !== 'finished') return result.lastLines.at(-1) ?? `it ${result.reason}`;
  const version = /^ffmpeg version (\S+)/m.exec(text)?.[1];
  const library = /^libavformat\s+(\d+)\.\s*(\d+)/m.exec(text);
  if (version === undefined || library === null) return 'it does not tell a version as ffmpeg does';
  return { path, version, formatLibrary: [Number(library[1]), Number(library[2])], origin };
}
