import { withMeasured } from '../../src/engine/keep-measured.ts';
import type { Results } from '../../src/engine/results.ts';
import type { DwellSpec, TestFile } from '../../src/testfile/schema.ts';

/**
 * The test with what was measured written to its dwells, for the file and for the fit; a dwell whose inputs changed
 * since carries nothing.
 * @param results the latest results; null where there are none
 * @param isNew whether the results hold for a clip as the test stands
 * @param holds whether what an earlier run left in a dwell still holds, asked where there is nothing new
 */
export function recordMeasured(
  test: TestFile,
  results: Results | null,
  isNew: (clip: string) => boolean,
  holds: (dwell: DwellSpec) => boolean,
): TestFile {
  const bare: TestFile = {
    ...test,
    configurations: test.configurations.map((configuration) => ({
      ...configuration,
      dwells: configuration.dwells.map((dwell) => {
        if (!dwell.measured) return dwell;
        if (!(dwell.clip !== undefined && isNew(dwell.clip)) && holds(dwell)) return dwell;
        const { measured: _, ...without } = dwell;
        return without;
      }),
    })),
  };
  if (!results) return bare;
  return withMeasured(bare, {
    ...results,
    clips: results.clips.filter((each) => isNew(each.id)),
    dwells: results.dwells.filter((each) => each.clip !== null && isNew(each.clip)),
  });
}
