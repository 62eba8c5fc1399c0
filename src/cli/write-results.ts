import { access, constants, mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import { isTracked } from '../engine/clip-tracks.ts';
import type { Measurement } from '../engine/measure-test.ts';
import { InputError } from '../errors.ts';
import { dwellsCsv } from '../report/dwells-csv.ts';
import { fileNamesFor } from '../report/file-names.ts';
import { motionCsv } from '../report/motion-csv.ts';
import { fileTrouble, writeWhole } from '../testfile/on-disk.ts';

/**
 * Makes the folder for results and makes sure that it can be written to, so that a long measurement is not
 * started in vain.
 * @throws InputError when it cannot.
 */
export async function prepareFolder(folder: string): Promise<void> {
  try {
    await mkdir(join(folder, 'motion'), { recursive: true });
    await access(folder, constants.W_OK);
    await access(join(folder, 'motion'), constants.W_OK);
  } catch (error) {
    throw new InputError(
      `Nothing can be written under ${folder}: ${fileTrouble(error)}. Choose another folder for --out.`,
    );
  }
}

/** The text of `results.json`. */
export function resultsJson(measurement: Pick<Measurement, 'results'>): string {
  return `${JSON.stringify(measurement.results, null, 2)}\n`;
}

/**
 * Writes `results.json`, `dwells.csv`, `report.html` and `motion/CLIP.csv` under a folder, each whole or not at all.
 * @throws InputError when the folder cannot be written to.
 */
export async function writeResults(
  folder: string,
  measurement: Measurement,
  reportHtml: string,
): Promise<void> {
  await writeWhole(join(folder, 'results.json'), resultsJson(measurement));
  await writeWhole(join(folder, 'dwells.csv'), dwellsCsv(measurement.results));
  await writeWhole(join(folder, 'report.html'), reportHtml);
  const tracked = [...measurement.outcomes.values()].filter(isTracked);
  const names = fileNamesFor(
    tracked.map((tracks) => tracks.clip),
    '.csv',
  );
  for (const [k, tracks] of tracked.entries()) {
    const name = names[k];
    if (name === undefined) continue;
    await writeWhole(
      join(folder, 'motion', name),
      motionCsv(tracks, measurement.displacements.get(tracks.clip) ?? null),
    );
  }
}
