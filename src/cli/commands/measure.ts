import { withMeasured } from '../../engine/keep-measured.ts';
import { type Measurement, measureTest } from '../../engine/measure-test.ts';
import type { MeasureProgress } from '../../engine/progress.ts';
import { makeReport } from '../../report/make-report.ts';
import { resultsText } from '../../report/results-text.ts';
import { loadTest, saveTest } from '../../testfile/on-disk.ts';
import type { TestFile } from '../../testfile/schema.ts';
import { EXIT } from '../exit-status.ts';
import { interruptSignal } from '../interrupt.ts';
import { labelsOf } from '../labels.ts';
import { progressBar } from '../progress-bar.ts';
import { prepareFolder, resultsJson, writeResults } from '../write-results.ts';

/** Options of `measure`. */
export interface MeasureCommandOptions {
  readonly out?: string;
  readonly json?: true;
  readonly save?: true;
  readonly refine?: true;
}

/** Measures a loaded test with a progress bar on a terminal and Ctrl-C as cancel. */
export async function measureWithProgress(
  test: TestFile,
  testPath: string,
  refine: boolean,
): Promise<Measurement> {
  const { signal, release } = interruptSignal();
  const bar = progressBar();
  try {
    return await measureTest(test, {
      testPath,
      signal,
      refine,
      onProgress: (at: MeasureProgress) =>
        bar.show(at.clip, at.clipIndex, at.clipCount, at.frame, at.frameCount),
    });
  } finally {
    bar.end();
    release();
  }
}

/** Whether anything that was asked for could not be measured. */
export function statusOf(measurement: Pick<Measurement, 'results'>): number {
  const { dwells, ringdowns } = measurement.results;
  return [...dwells, ...ringdowns].some((each) => each.error !== null) ? EXIT.someFailed : EXIT.ok;
}

/** `measure TEST`: measures, prints the table or JSON, writes files where asked. Returns the exit status. */
export async function measure(testPath: string, options: MeasureCommandOptions): Promise<number> {
  const test = await loadTest(testPath);
  if (options.out !== undefined) await prepareFolder(options.out);
  const measurement = await measureWithProgress(test, testPath, options.refine ?? false);
  if (options.out !== undefined)
    await writeResults(options.out, measurement, await makeReport(test, measurement, { testPath }));
  if (options.save) await saveTest(testPath, withMeasured(test, measurement.results));
  process.stdout.write(
    options.json ? resultsJson(measurement) : resultsText(measurement.results, labelsOf(test)),
  );
  return statusOf(measurement);
}
