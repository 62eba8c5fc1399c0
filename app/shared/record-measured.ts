import type { DwellResult, Results } from '../../src/engine/results.ts';
import type { Configuration, DwellSpec, TestFile } from '../../src/testfile/schema.ts';

type Measured = NonNullable<DwellSpec['measured']>;

/**
 * The test with what was measured written to its dwells, for the file and for the fit; a dwell whose inputs changed
 * since carries nothing.
 * @param resultsOf results of a clip as the test stands; null where there are none
 * @param keep whether what an earlier run left in a dwell still holds, asked where there are no results
 */
export function withMeasured(
  test: TestFile,
  resultsOf: (clip: string) => Results | null,
  keep: (configuration: Configuration, dwell: DwellSpec) => boolean,
): TestFile {
  const hashes = new Map<string, string>();
  for (const clip of test.clips) {
    const sha256 = resultsOf(clip.id)?.clips[0]?.sha256;
    if (sha256) hashes.set(clip.id, sha256);
  }
  return {
    ...test,
    clips: test.clips.map((clip) => {
      const sha256 = hashes.get(clip.id);
      return sha256 && clip.sha256 !== sha256 ? { ...clip, sha256 } : clip;
    }),
    configurations: test.configurations.map((configuration) => ({
      ...configuration,
      dwells: configuration.dwells.map((dwell) => {
        const results = dwell.clip === undefined ? null : resultsOf(dwell.clip);
        const result = results?.dwells.find(
          (each) => each.configuration === configuration.id && each.id === dwell.id,
        );
        if (result) return withResult(dwell, result, hashes.get(dwell.clip ?? ''));
        if (!dwell.measured || keep(configuration, dwell)) return dwell;
        const { measured: _, ...without } = dwell;
        return without;
      }),
    })),
  };
}

function withResult(dwell: DwellSpec, result: DwellResult, sha256: string | undefined): DwellSpec {
  const { measured: before, ...without } = dwell;
  const amplitude = result.amplitude.value;
  if (amplitude === null) return without;
  const common = result.budget.filter((line) => line.common).reduce((sum, line) => sum + line.u ** 2, 0);
  const measured: Measured = {
    ...before,
    amplitude,
    u: result.amplitude.u,
    lag: result.lag.value,
    lagU: result.lag.u,
    frequency: result.frequency.value,
    gain: result.gain.value,
    gainU: result.gain.u,
    commonRelativeU: amplitude > 0 ? Math.sqrt(common) / amplitude : 0,
    verdict: result.verdict,
    ...(sha256 ? { clipSha256: sha256 } : {}),
  };
  return { ...without, measured };
}
