import type { Measurement } from '../engine/measure-test.ts';
import type { TestFile } from '../testfile/schema.ts';
import { type ChartPainter, chartPainter } from './draw-chart.ts';
import { setupPictures } from './frame-pictures.ts';
import { reportHtml } from './report-html.ts';

/** Where the report's pictures come from and when it is made. */
export interface MakeReportOptions {
  /** Path of the test file; clip paths are relative to it. */
  readonly testPath: string;
  readonly signal?: AbortSignal;
  /** The moment that is printed as the day of the report. */
  readonly now?: Date;
}

/** What draws plots; null where the drawing library has no build for this machine. */
async function painterIfAny(): Promise<ChartPainter | null> {
  try {
    return await chartPainter();
  } catch {
    return null; // the report says that its plots are missing
  }
}

/**
 * The report of a measured test with its plots and a frame of each camera setup, as one HTML file. Reads one frame per
 * setup from the clips; nothing is measured.
 * @throws CancelledError when stopped
 */
export async function makeReport(
  test: TestFile,
  measurement: Measurement,
  { testPath, signal, now = new Date() }: MakeReportOptions,
): Promise<string> {
  const [painter, pictures] = await Promise.all([painterIfAny(), setupPictures(test, testPath, signal)]);
  return reportHtml(test, measurement, { painter, pictures, madeOn: localDay(now) });
}

/** The day as year-month-day on this machine's calendar. */
function localDay(date: Date): string {
  const two = (value: number) => String(value).padStart(2, '0');
  return `${date.getFullYear()}-${two(date.getMonth() + 1)}-${two(date.getDate())}`;
}
