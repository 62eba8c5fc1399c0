import type { TestFile } from '../testfile/schema.ts';
import { failedDwell, keptDwell, typedDwell } from './dwell-without-clip.ts';
import { keptRingDown } from './evaluate-ringdown.ts';
import { fitConfiguration } from './fit-configuration.ts';
import { PROGRAM } from './program.ts';
import { type DwellResult, RESULTS_FORMAT, RESULTS_VERSION, type Results } from './results.ts';

/**
 * Fits every configuration from amplitudes that are in the test file: typed in, or measured before. No clip is read.
 * A dwell without an amplitude is named in its `error`.
 */
export function fitTest(test: TestFile): Results {
  const dwells: DwellResult[] = [];
  const resonances = test.configurations.map((configuration) => {
    const own = configuration.dwells.map((spec) => {
      if (spec.typed) return typedDwell(configuration, spec);
      if (spec.measured) return keptDwell(configuration, spec);
      return failedDwell(
        configuration,
        spec,
        `Dwell "${spec.id}" has no amplitude yet: measure it with --save, or type it in.`,
      );
    });
    dwells.push(...own);
    return fitConfiguration(configuration, own);
  });
  return {
    format: RESULTS_FORMAT,
    version: RESULTS_VERSION,
    program: PROGRAM,
    test: test.title,
    clips: [],
    dwells,
    ringdowns: test.configurations.flatMap((configuration) =>
      configuration.ringdowns
        .filter((spec) => spec.measured)
        .map((spec) => keptRingDown(configuration, spec)),
    ),
    resonances,
  };
}
