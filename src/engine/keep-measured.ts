import type { TestFile } from '../testfile/schema.ts';
import { PROGRAM } from './program.ts';
import type { DwellResult, Results } from './results.ts';

function kept(
  result: DwellResult,
  sha256: string | null,
): NonNullable<TestFile['configurations'][number]['dwells'][number]['measured']> | null {
  const { value, u } = result.amplitude;
  if (value === null || result.typed) return null;
  const own = result.independentU;
  return {
    amplitude: value,
    u,
    lag: result.lag.value,
    lagU: result.lag.u,
    frequency: result.frequency.value,
    gain: result.gain.value,
    gainU: result.gain.u,
    commonRelativeU: u === null || own === null ? 0 : Math.sqrt(Math.max(0, u * u - own * own)) / value,
    verdict: result.verdict,
    program: PROGRAM,
    ...(sha256 === null ? {} : { clipSha256: sha256 }),
  };
}

/**
 * The test with what was measured kept in its dwells, for `fit` and `plan`, and the content hash of every clip.
 * Dwells found in a sweep have no row of their own in the test file and are measured anew each time.
 */
export function withMeasured(test: TestFile, results: Results): TestFile {
  const hashes = new Map(results.clips.map((clip) => [clip.id, clip.sha256]));
  return {
    ...test,
    clips: test.clips.map((clip) => {
      const sha256 = hashes.get(clip.id);
      return sha256 ? { ...clip, sha256 } : clip;
    }),
    configurations: test.configurations.map((configuration) => ({
      ...configuration,
      dwells: configuration.dwells.map((dwell) => {
        const result = results.dwells.find(
          (each) => each.configuration === configuration.id && each.id === dwell.id,
        );
        const measured = result ? kept(result, hashes.get(dwell.clip ?? '') ?? null) : null;
        return measured ? { ...dwell, measured } : dwell;
      }),
      ringdowns: configuration.ringdowns.map((spec) => {
        const result = results.ringdowns.find(
          (each) => each.configuration === configuration.id && each.id === spec.id,
        );
        const [naturalHz, dampingRatio] = [result?.naturalHz.value, result?.dampingRatio.value];
        if (!result || naturalHz == null || dampingRatio == null) return spec;
        return {
          ...spec,
          measured: {
            naturalHz,
            naturalHzU: result.naturalHz.u,
            dampingRatio,
            dampingRatioU: result.dampingRatio.u,
          },
        };
      }),
    })),
  };
}
