import { freshId } from '../../../src/testfile/edit-lists.ts';
import type { EditOf } from '../../../src/testfile/edit-schema.ts';
import type { Configuration, DwellSpec } from '../../../src/testfile/schema.ts';
import { askName } from '../chrome/NameDialog.tsx';
import { amplitudeUnit } from '../format/amplitude.ts';
import { parseMeasured, parseNumber } from '../format/numbers.ts';
import { edit, notify } from '../state/bench.ts';
import { configuration, dwell, selectDwell } from '../state/view.ts';

/** Columns of the run sheet that can be changed. */
export type EditableColumn = 'drive' | 'amplitude' | 'lag';

function takenIds(sheet: Configuration): Set<string> {
  return new Set([...sheet.dwells, ...sheet.ringdowns].map((each) => each.id));
}

/** Adds an empty dwell behind the selected one and selects it. */
export async function addDwell(): Promise<void> {
  const sheet = configuration.value;
  if (!sheet) return;
  const id = freshId(takenIds(sheet), `d${sheet.dwells.length + 1}`);
  const after = dwell.value ? { after: dwell.value.id } : {};
  await edit({ kind: 'add-dwells', configuration: sheet.id, dwells: [{ id }], ...after });
  selectDwell(id);
}

/** Repeats the selected dwell behind itself: its drive frequency, without clip and numbers. */
export async function duplicateDwell(): Promise<void> {
  const [sheet, row] = [configuration.value, dwell.value];
  if (!sheet || !row) return;
  const id = freshId(takenIds(sheet), row.id);
  const copy = row.driveHz === undefined ? { id } : { id, driveHz: row.driveHz };
  await edit({ kind: 'add-dwells', configuration: sheet.id, dwells: [copy], after: row.id });
  selectDwell(id);
}

/** Takes rows out of the run sheet; undo brings them back. */
export async function removeDwells(ids: readonly string[]): Promise<void> {
  const sheet = configuration.value;
  if (sheet && ids.length > 0) await edit({ kind: 'remove-dwells', configuration: sheet.id, ids: [...ids] });
}

/** Leaves the selected dwell out of the fit, for a reason that is asked; or takes it in again. */
export async function toggleExcluded(): Promise<void> {
  const [sheet, row] = [configuration.value, dwell.value];
  if (!sheet || !row) return;
  const change = (excluded: string | null): Promise<unknown> =>
    edit({ kind: 'change-dwells', configuration: sheet.id, dwells: [{ id: row.id, excluded }] });
  if (row.excluded !== undefined) {
    await change(null);
    return;
  }
  const reason = await askName(
    'Exclude the dwell',
    'Why it is left out of the fit',
    'such as: bumped the bench',
  );
  if (reason) await change(reason);
}

/** Sorts the run sheet by drive frequency; rows without one stand last. */
export async function sortDwells(): Promise<void> {
  const sheet = configuration.value;
  if (!sheet) return;
  const hz = (each: DwellSpec): number => each.driveHz ?? Number.POSITIVE_INFINITY;
  const sorted = [...sheet.dwells].sort((a, b) => (hz(a) === hz(b) ? 0 : hz(a) - hz(b)));
  if (sorted.every((each, index) => each === sheet.dwells[index])) return;
  await edit({ kind: 'order-dwells', configuration: sheet.id, ids: sorted.map((each) => each.id) });
}

type DwellChange = EditOf<'change-dwells'>['dwells'][number];

/** The change that a text typed into a cell means; one sentence where it means none. */
export function cellChange(row: DwellSpec, column: EditableColumn, text: string): DwellChange | string {
  const empty = text.trim() === '';
  if (column === 'drive') {
    if (empty) return { id: row.id, driveHz: null };
    const driveHz = parseNumber(text.replace(/hz\s*$/i, ''));
    if (driveHz === null || driveHz <= 0)
      return `"${text}" is no drive frequency: a number above 0 is expected, in Hz.`;
    return { id: row.id, driveHz };
  }
  if (column === 'amplitude') {
    if (empty) return { id: row.id, typed: null };
    const typed = parseMeasured(text.replace(/mm\s*$/i, ''));
    if (!typed || typed.value < 0)
      return `"${text}" is no amplitude: a number is expected, such as 12.1 or 12.1 ± 0.3, in mm.`;
    const { factor } = amplitudeUnit.value;
    const u = typed.u === null ? {} : { u: typed.u / factor };
    const { u: _, ...before } = row.typed ?? {};
    return { id: row.id, typed: { ...before, amplitude: typed.value / factor, ...u } };
  }
  const { lag: _, lagU: __, ...without } = row.typed ?? {};
  if (!('amplitude' in without)) return 'A lag is typed beside a typed amplitude: type that first.';
  const amplitude = Number(without.amplitude);
  if (empty) return { id: row.id, typed: { ...without, amplitude } };
  const lag = parseMeasured(text.replace(/°\s*$/, ''));
  if (!lag) return `"${text}" is no lag: a number is expected, such as 40 or 40 ± 2, in degrees.`;
  return {
    id: row.id,
    typed: { ...without, amplitude, lag: lag.value, ...(lag.u === null ? {} : { lagU: lag.u }) },
  };
}

/** Puts a text typed into a cell into effect; false, and told, where it means nothing. */
export async function commitCell(row: DwellSpec, column: EditableColumn, text: string): Promise<boolean> {
  const sheet = configuration.value;
  const change = cellChange(row, column, text);
  if (typeof change === 'string') {
    notify('caution', change);
    return false;
  }
  if (sheet) await edit({ kind: 'change-dwells', configuration: sheet.id, dwells: [change] });
  return true;
}
