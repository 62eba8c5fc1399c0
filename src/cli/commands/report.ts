import { extname } from 'node:path';
import { makeReport } from '../../report/make-report.ts';
import { loadTest, writeWhole } from '../../testfile/on-disk.ts';
import { findChromium } from '../find-chromium.ts';
import { interruptSignal } from '../interrupt.ts';
import { printPdf } from '../print-pdf.ts';
import { measureWithProgress, statusOf } from './measure.ts';

/**
 * `report TEST --out FILE.html|FILE.pdf`: measures and writes the report; a name that ends in `.pdf` is printed by a
 * Chromium, which is looked for before anything is measured. Returns the exit status.
 */
export async function report(testPath: string, options: { readonly out: string }): Promise<number> {
  const test = await loadTest(testPath);
  const chromium = extname(options.out).toLowerCase() === '.pdf' ? findChromium() : null;
  const measurement = await measureWithProgress(test, testPath, false);
  const { signal, release } = interruptSignal();
  try {
    const html = await makeReport(test, measurement, { testPath, signal });
    await writeWhole(options.out, chromium === null ? html : await printPdf(html, chromium, { signal }));
  } finally {
    release();
  }
  process.stderr.write(`Report written to ${options.out}\n`);
  return statusOf(measurement);
}
