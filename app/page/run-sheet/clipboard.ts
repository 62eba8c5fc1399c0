import { freshId } from '../../../src/testfile/edit-lists.ts';
import type { EditOf } from '../../../src/testfile/edit-schema.ts';
import type { Configuration } from '../../../src/testfile/schema.ts';
import { parseMeasured, parseNumber } from '../format/numbers.ts';
import type { RowView } from './row-view.ts';

/** The rows as a spreadsheet takes them: tabs between cells, headings first. */
export function rowsAsText(rows: readonly RowView[], amplitudeHeading: string): string {
  const heading = ['drive Hz', amplitudeHeading, 'u mm', 'lag deg', 'verdict', 'excluded'];
  const lines = rows.map((row) =>
    [row.drive, row.amplitude, row.amplitudeU ?? '', row.lag, row.says, row.excluded ?? '']
      .map(safeCell)
      .join('\t'),
  );
  return [heading.join('\t'), ...lines].join('\n');
}

/** A cell that a spreadsheet will not read as a formula, and that does not break the row. */
function safeCell(text: string): string {
  const flat = text.replace(/[\t\r\n]+/g, ' ');
  return /^[=+\-@]/.test(flat) && parseNumber(flat) === null ? `'${flat}` : flat;
}

/** Dwells pasted from a spreadsheet, and the lines that held none. */
export interface Pasted {
  readonly dwells: EditOf<'add-dwells'>['dwells'];
  readonly passedOver: number;
}

/**
 * Reads rows of drive frequency, amplitude, its uncertainty and lag, as columns between tabs, semicolons or wide
 * spaces; a heading line is passed over.
 * @param factor what a zero-to-peak amplitude is multiplied by to be stated as pasted
 */
export function dwellsFromText(text: string, sheet: Configuration, factor: number): Pasted {
  const taken = new Set([...sheet.dwells, ...sheet.ringdowns].map((each) => each.id));
  const dwells: Pasted['dwells'] = [];
  let passedOver = 0;
  for (const [index, line] of text.split(/\r?\n/).entries()) {
    if (line.trim() === '') continue;
    const cells = line.split(/\t|;|\s{2,}/).map((cell) => cell.trim());
    const driveHz = parseNumber(cells[0]?.replace(/\s*hz$/i, '') ?? '');
    if (driveHz === null || driveHz <= 0) {
      if (index > 0) passedOver++;
      continue;
    }
    const id = freshId(taken, `d${sheet.dwells.length + dwells.length + 1}`);
    taken.add(id);
    const amplitude = parseMeasured(cells[1] ?? '');
    const u = amplitude?.u ?? parseNumber(cells[2] ?? '');
    const lag = parseNumber(cells[3] ?? '');
    const typed = amplitude && {
      amplitude: amplitude.value / factor,
      ...(u === null || u < 0 ? {} : { u: u / factor }),
      ...(lag === null ? {} : { lag }),
    };
    dwells.push({ id, driveHz, ...(typed ? { typed } : {}) });
  }
  return { dwells, passedOver };
}
