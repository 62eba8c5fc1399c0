import { execFileSync, spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { type Ffmpeg, findFfmpeg } from '../../src/clip/find-ffmpeg.ts';
import { numberedFrame, type Painter } from './numbered-frames.ts';

/** The ffmpeg the tests use: the one the program would find. */
export const ffmpeg: Ffmpeg = await findFfmpeg();
const encoders = execFileSync(ffmpeg.path, ['-hide_banner', '-encoders'], {
  stdio: ['ignore', 'pipe', 'ignore'],
}).toString();

/** True if the ffmpeg at hand can encode so; tests that need more than the common ones skip visibly without. */
export function hasEncoder(name: string): boolean {
  return new RegExp(`^ \\S+ ${name} `, 'm').test(encoders);
}

/** How a test clip is made. */
export interface ClipRecipe {
  /** File name with its ending, which decides the container. */
  readonly name: string;
  readonly frames: number;
  readonly width?: number;
  readonly height?: number;
  readonly fps?: number;
  /** Format the frames are painted in and handed to the encoder: planar yuv or gray. */
  readonly pixelFormat?: string;
  /** Encoder and its options. */
  readonly encoder: readonly string[];
  /** Timestamps: an ffmpeg expression in N (the frame number), in ticks of 1/`ticksPerS`; even spacing if absent. */
  readonly pts?: { readonly expression: string; readonly ticksPerS: number };
  /** What is in the picture; its number in eight bars where absent. */
  readonly paint?: Painter;
  /** Filters and options of the output besides. */
  readonly output?: readonly string[];
}

export const WIDTH = 96;
export const HEIGHT = 64;

/** Makes a small clip whose every sample is known before encoding; returns its path. */
export function makeClip(folder: string, recipe: ClipRecipe): string {
  const { width = WIDTH, height = HEIGHT, fps = 30, pixelFormat = 'yuv420p', paint, pts } = recipe;
  const path = join(folder, recipe.name);
  const frames = Array.from({ length: recipe.frames }, (_, n) =>
    numberedFrame(n, width, height, pixelFormat, paint),
  );
  const timing =
    pts === undefined
      ? []
      : [
          ...['-vf', `settb=1/${pts.ticksPerS},setpts=${pts.expression}`, '-vsync', '0'],
          ...['-enc_time_base', `1:${pts.ticksPerS}`],
          ...(/\.(mp4|mov|3gp)$/.test(recipe.name) ? ['-video_track_timescale', String(pts.ticksPerS)] : []),
        ];
  runToMake(
    [
      ...[
        '-f',
        'rawvideo',
        '-pix_fmt',
        pixelFormat,
        '-s',
        `${width}x${height}`,
        '-r',
        String(fps),
        '-i',
        'pipe:0',
      ],
      ...[...timing, ...recipe.encoder, ...(recipe.output ?? []), `file:${path}`],
    ],
    Buffer.concat(frames),
  );
  return path;
}

/** Runs ffmpeg to make something for a test; throws with what it said if it fails. */
export function runToMake(args: readonly string[], input?: Buffer): void {
  const result = spawnSync(ffmpeg.path, ['-hide_banner', '-loglevel', 'error', '-y', ...args], {
    ...(input ? { input } : {}),
    maxBuffer: 1 << 28,
  });
  if (result.status !== 0) throw new Error(`ffmpeg could not make a test clip: ${result.stderr?.toString()}`);
}

/** H.264 without B-frames, a key frame every ten frames, good enough to read the bars. */
export const H264 = ['-c:v', 'libx264', '-preset', 'ultrafast', '-bf', '0', '-g', '10', '-qp', '20'] as const;
/** H.264 with a pyramid of B-frames. */
export const H264_B = [
  ...['-c:v', 'libx264', '-preset', 'veryfast', '-bf', '3', '-b_strategy', '0', '-g', '10', '-qp', '20'],
  ...['-x264-params', 'b-pyramid=normal:scenecut=0'],
] as const;
/** Without loss, in any format. */
export const FFV1 = ['-c:v', 'ffv1', '-level', '3'] as const;
