import { reportHtml } from '../../report/report-html.ts';
import { loadTest, writeWhole } from '../../testfile/on-disk.ts';
import { measureWithProgress, statusOf } from './measure.ts';

/** `report TEST --out FILE.html`: measures and writes the report. Returns the exit status. */
export async function report(testPath: string, options: { readonly out: string }): Promise<number> {
  const test = await loadTest(testPath);
  const measurement = await measureWithProgress(test, testPath, false);
  await writeWhole(options.out, reportHtml(test, measurement));
  process.stderr.write(`Report written to ${options.out}\n`);
  return statusOf(measurement);
}
