import { fitTest } from '../../engine/fit-test.ts';
import { resultsText } from '../../report/results-text.ts';
import { loadTest } from '../../testfile/on-disk.ts';
import { labelsOf } from '../labels.ts';
import { resultsJson } from '../write-results.ts';
import { statusOf } from './measure.ts';

/** `fit TEST`: fits every configuration from typed or formerly measured amplitudes. Returns the exit status. */
export async function fit(testPath: string, options: { readonly json?: true }): Promise<number> {
  const test = await loadTest(testPath);
  const results = fitTest(test);
  process.stdout.write(options.json ? resultsJson({ results }) : resultsText(results, labelsOf(test)));
  return statusOf({ results });
}
