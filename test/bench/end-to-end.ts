import type { BenchClip } from './make-clips.ts';
import { runTimed, type TimedProcess } from './timed-process.ts';

/** The amplitude may be off by this much before the run counts as wrong and its speed as worthless. */
const AMPLITUDE_TOLERANCE = 0.005;

interface Results {
  readonly dwells: readonly {
    readonly frames: number;
    readonly lostFrames: number;
    readonly amplitude: { readonly value: number } | null;
    readonly error: string | null;
  }[];
}

/** Measures the clip through the built command line, as a person would: start-up, decode, track, fit, print. */
export async function endToEnd(cli: string, testFile: string, clip: BenchClip): Promise<TimedProcess> {
  const run = await runTimed(process.execPath, [cli, 'measure', testFile, '--json']);
  const dwell = (JSON.parse(run.stdout) as Results).dwells[0];
  const amplitude = dwell?.amplitude?.value;
  if (!dwell || amplitude === undefined) {
    throw new Error(`${testFile}: nothing was measured (${dwell?.error ?? 'no dwell'})`);
  }
  const off = Math.abs(amplitude / clip.amplitudeMm - 1);
  if (dwell.lostFrames > 0 || off > AMPLITUDE_TOLERANCE) {
    throw new Error(
      `${testFile}: amplitude ${amplitude} mm for ${clip.amplitudeMm} mm, ${dwell.lostFrames} frames lost`,
    );
  }
  return run;
}
