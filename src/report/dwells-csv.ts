import type { DwellResult, Results } from '../engine/results.ts';
import { csvLine } from './safe-csv.ts';

const COLUMNS: readonly [string, (dwell: DwellResult) => string | number | null][] = [
  ['configuration', (dwell) => dwell.configuration],
  ['dwell', (dwell) => dwell.id],
  ['clip', (dwell) => dwell.clip],
  ['drive_hz', (dwell) => dwell.driveHz],
  ['frequency_hz', (dwell) => dwell.frequency.value],
  ['frequency_u_hz', (dwell) => dwell.frequency.u],
  ['amplitude_mm', (dwell) => dwell.amplitude.value],
  ['amplitude_u_mm', (dwell) => dwell.amplitude.u],
  ['amplitude_U95_mm', (dwell) => dwell.amplitudeU95],
  ['lag_deg', (dwell) => dwell.lag.value],
  ['lag_u_deg', (dwell) => dwell.lag.u],
  ['drive_amplitude_mm', (dwell) => dwell.driveAmplitude.value],
  ['drive_amplitude_u_mm', (dwell) => dwell.driveAmplitude.u],
  ['gain', (dwell) => dwell.gain.value],
  ['gain_u', (dwell) => dwell.gain.u],
  ['window_from_s', (dwell) => dwell.window?.[0] ?? null],
  ['window_to_s', (dwell) => dwell.window?.[1] ?? null],
  ['frames', (dwell) => dwell.frames],
  ['lost_frames', (dwell) => dwell.lostFrames],
  ['verdict', (dwell) => dwell.verdict],
  ['leftover', (dwell) => dwell.leftover],
  ['excluded', (dwell) => dwell.excluded],
  ['error', (dwell) => dwell.error],
  ['warnings', (dwell) => dwell.warnings.join(' ')],
];

/** `dwells.csv`: one line a dwell, amplitudes zero-to-peak; units are in the column names. */
export function dwellsCsv(results: Results): string {
  const head = csvLine(COLUMNS.map(([name]) => name));
  return head + results.dwells.map((dwell) => csvLine(COLUMNS.map(([, of]) => of(dwell)))).join('');
}
