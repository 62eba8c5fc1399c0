import type { ClipResult, DwellResult, Results } from '../engine/results.ts';
import type { TestFile } from '../testfile/schema.ts';
import { significant } from './format-number.ts';

/** How a measurement stands to what the test file kept of an earlier one. */
export interface Reproduction {
  /** Each thing that is not as it was kept, one sentence. */
  readonly differences: readonly string[];
  /** Amplitudes that the test file kept, and how many of them were found again to nine digits. */
  readonly keptAmplitudes: number;
  readonly sameAmplitudes: number;
}

const SAME = 1e-9; // relative; the digits beyond are rounding
const SHOWN_HEX = 12;

function shortHash(sha256: string): string {
  return `${sha256.slice(0, SHOWN_HEX)}…`;
}

function clipDifference(test: TestFile, clip: ClipResult): string[] {
  const kept = test.clips.find((each) => each.id === clip.id)?.sha256;
  if (kept === undefined || clip.sha256 === null || kept.toLowerCase() === clip.sha256) return [];
  return [
    `Clip ${clip.id} is another file than when the test was saved: SHA-256 ${shortHash(clip.sha256)} instead of ${shortHash(kept)}.`,
  ];
}

type Kept = NonNullable<TestFile['configurations'][number]['dwells'][number]['measured']>;

function programOf(kept: Kept): string | null {
  const program = kept['program'];
  return typeof program === 'string' ? program : null;
}

function amplitudeDifference(kept: Kept, dwell: DwellResult): string {
  const { value, u } = dwell.amplitude;
  if (value === null)
    return `Dwell ${dwell.id} was ${significant(kept.amplitude, 5)} mm when it was kept and cannot be measured now.`;
  const difference = Math.abs(value - kept.amplitude);
  const share =
    u !== null && u > 0 ? `, ${significant(difference / u, 2)} times its standard uncertainty` : '';
  return `Dwell ${dwell.id} comes out as ${significant(value, 6)} mm; ${significant(kept.amplitude, 6)} mm was kept in the test file${share}. Settings, clip or program have changed since.`;
}

/**
 * Holds a measurement against what the test file kept: clip contents, amplitudes, and the program that found them.
 * Dwells whose amplitude was not measured now (typed in, read from the file) do not count.
 */
export function checkReproduction(test: TestFile, results: Results): Reproduction {
  const differences = results.clips.flatMap((clip) => clipDifference(test, clip));
  const measuredNow = new Set(results.clips.map((clip) => clip.id));
  const programs = new Set<string>();
  let keptAmplitudes = 0;
  let sameAmplitudes = 0;
  for (const configuration of test.configurations) {
    for (const spec of configuration.dwells) {
      const kept = spec.measured;
      const dwell = results.dwells.find(
        (each) => each.configuration === configuration.id && each.id === spec.id,
      );
      if (!kept || !dwell || dwell.typed || dwell.clip === null || !measuredNow.has(dwell.clip)) continue;
      keptAmplitudes += 1;
      const program = programOf(kept);
      if (program !== null && program !== results.program) programs.add(program);
      const value = dwell.amplitude.value;
      if (value !== null && Math.abs(value - kept.amplitude) <= SAME * Math.abs(kept.amplitude))
        sameAmplitudes += 1;
      else differences.push(amplitudeDifference(kept, dwell));
    }
  }
  for (const program of programs)
    differences.unshift(
      `The test file was measured before by ${program}; this report by ${results.program}.`,
    );
  return { differences, keptAmplitudes, sameAmplitudes };
}
