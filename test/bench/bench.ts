/**
 * Speed, precision and memory in one run:
 *
 *     npm run bench                        everything, five rounds on clips of 20 s at 1920 x 1080, 60 frames/s
 *     npm run bench -- --short             a smoke test of a few seconds
 *     npm run bench -- --rounds 3 --seconds 10
 *
 * Speeds are only told against decoding alone in the same round: machines differ, and so do their moods.
 */
import { availableParallelism } from 'node:os';
import { findFfmpeg } from '../../src/clip/find-ffmpeg.ts';
import { decodeOnly } from './decode-only.ts';
import { endToEnd } from './end-to-end.ts';
import { type BenchClip, benchClips } from './make-clips.ts';
import { type BenchOptions, readOptions } from './options.ts';
import { spread, table } from './print.ts';
import { registration } from './registration.ts';
import type { TimedProcess } from './timed-process.ts';

const WAYS = ['decode only', 'one marker', 'three markers'] as const;
type Way = (typeof WAYS)[number];
type Runs = Record<Way, TimedProcess[]>;

async function main(): Promise<void> {
  const options = readOptions(process.argv.slice(2));
  const ffmpeg = await findFfmpeg();
  console.log(`Node ${process.version}, ffmpeg ${ffmpeg.version}, ${availableParallelism()} processors`);
  const clips = await benchClips(options);
  const runs = new Map<BenchClip, Runs>();
  for (const clip of clips) runs.set(clip, { 'decode only': [], 'one marker': [], 'three markers': [] });
  for (let round = 0; round < options.rounds; round++) {
    for (const [clip, done] of runs) {
      for (const way of WAYS) done[way].push(await run(way, clip, ffmpeg.path, options));
    }
  }
  console.log(speedTable(runs, options));
  console.log(registrationTable(options));
}

function run(way: Way, clip: BenchClip, ffmpeg: string, options: BenchOptions): Promise<TimedProcess> {
  if (way === 'decode only') return decodeOnly(ffmpeg, clip.file);
  return endToEnd(options.cli, way === 'one marker' ? clip.oneMarker : clip.threeMarkers, clip);
}

function speedTable(runs: ReadonlyMap<BenchClip, Runs>, options: BenchOptions): string {
  const rows = [['clip', 'way', 'frames/s', 'to decode only', 'processor, ms a frame', 'peak memory, MB']];
  for (const [clip, done] of runs) {
    for (const way of WAYS) {
      const rates = done[way].map(({ seconds }) => clip.frames / seconds);
      const ratios = done[way].map(({ seconds }, round) => done['decode only'][round]!.seconds / seconds);
      const used = known(done[way].map(({ processorS }) => processorS)).map((s) => (1000 * s) / clip.frames);
      const peaks = known(done[way].map(({ peakMb }) => peakMb));
      rows.push([
        `${clip.name} ${clip.mbitPerS} Mbit/s`,
        way,
        spread(rates, 1),
        way === 'decode only' ? '' : spread(ratios, 3),
        used.length > 0 ? spread(used, 2) : 'not known',
        peaks.length > 0 ? Math.max(...peaks).toFixed(0) : 'not known',
      ]);
    }
  }
  const rounds = options.rounds === 1 ? '1 round' : `${options.rounds} rounds in turn, median (least-most)`;
  const size = options.short ? '640 x 360' : '1920 x 1080';
  return `\nEnd to end, whole processes, ${size}, ${rounds}:\n${table(rows)}`;
}

function known(values: readonly (number | null)[]): number[] {
  return values.filter((value) => value !== null);
}

function registrationTable(options: BenchOptions): string {
  const frames = options.short ? 40 : 600;
  const rows = [['noise', 'RMS error, px', 'bound, px', 'ratio', 'lost']];
  for (const noiseDn of [2, 8]) {
    const { rmsPx, boundPx, lost } = registration(noiseDn, frames);
    rows.push([
      `${noiseDn} of 255`,
      rmsPx.toFixed(5),
      boundPx.toFixed(5),
      (rmsPx / boundPx).toFixed(3),
      String(lost),
    ]);
  }
  return `\nRegistration, patch 41 px, ${frames} frames over all sub-pixel phases:\n${table(rows)}`;
}

await main();
