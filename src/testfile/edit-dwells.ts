import { InputError } from '../errors.ts';
import { changed, replaceById } from './edit-lists.ts';
import type { EditOf } from './edit-schema.ts';
import type { Configuration, DwellSpec, TestFile } from './schema.ts';

type DwellEdit = EditOf<
  | 'add-dwells'
  | 'change-dwells'
  | 'remove-dwells'
  | 'order-dwells'
  | 'dwell-to-ringdown'
  | 'ringdown-to-dwell'
>;

/** Applies an edit of a run sheet. */
export function applyDwellEdit(test: TestFile, edit: DwellEdit): TestFile {
  const configurations = replaceById(test.configurations, edit.configuration, 'configuration', (each) =>
    editRunSheet(each, edit),
  );
  return { ...test, configurations };
}

function editRunSheet(sheet: Configuration, edit: DwellEdit): Configuration {
  switch (edit.kind) {
    case 'add-dwells':
      return { ...sheet, dwells: withAdded(sheet, edit) };
    case 'change-dwells': {
      const changes = new Map(edit.dwells.map((each) => [each.id, each]));
      for (const id of changes.keys()) mustHave(sheet, id);
      const dwells = sheet.dwells.map((dwell) => {
        const change = changes.get(dwell.id);
        return change ? changed(dwell, { ...change, id: undefined }) : dwell;
      });
      return { ...sheet, dwells };
    }
    case 'remove-dwells': {
      const gone = new Set(edit.ids);
      for (const id of gone) mustHave(sheet, id);
      return { ...sheet, dwells: sheet.dwells.filter((dwell) => !gone.has(dwell.id)) };
    }
    case 'order-dwells':
      return { ...sheet, dwells: ordered(sheet.dwells, edit.ids) };
    case 'dwell-to-ringdown': {
      const dwell = mustHave(sheet, edit.id);
      if (dwell.clip === undefined)
        throw new InputError(`The dwell "${edit.id}" has no clip, so it cannot be read as a ring-down.`);
      const ringdown = { id: dwell.id, clip: dwell.clip };
      return {
        ...sheet,
        dwells: sheet.dwells.filter((each) => each.id !== edit.id),
        ringdowns: [...sheet.ringdowns, ringdown],
      };
    }
    case 'ringdown-to-dwell': {
      const ringdown = sheet.ringdowns.find((each) => each.id === edit.id);
      if (!ringdown) throw new InputError(`There is no ring-down "${edit.id}" in this run sheet.`);
      return {
        ...sheet,
        ringdowns: sheet.ringdowns.filter((each) => each.id !== edit.id),
        dwells: [...sheet.dwells, { id: ringdown.id, clip: ringdown.clip }],
      };
    }
  }
}

function mustHave(sheet: Configuration, id: string): DwellSpec {
  const dwell = sheet.dwells.find((each) => each.id === id);
  if (!dwell) throw new InputError(`There is no dwell "${id}" in this run sheet; it may have been removed.`);
  return dwell;
}

function withAdded(sheet: Configuration, edit: EditOf<'add-dwells'>): DwellSpec[] {
  const taken = new Set([...sheet.dwells, ...sheet.ringdowns].map((each) => each.id));
  for (const { id } of edit.dwells) {
    if (taken.has(id)) throw new InputError(`There is a dwell "${id}" already; give the new one another id.`);
    taken.add(id);
  }
  const at = sheet.dwells.findIndex((each) => each.id === edit.after);
  return at < 0
    ? [...sheet.dwells, ...edit.dwells]
    : [...sheet.dwells.slice(0, at + 1), ...edit.dwells, ...sheet.dwells.slice(at + 1)];
}

/** The dwells in the order asked; those not named keep their order behind them, so that none is lost. */
function ordered(dwells: readonly DwellSpec[], ids: readonly string[]): DwellSpec[] {
  const rank = new Map(ids.map((id, index) => [id, index]));
  const rankOf = (dwell: DwellSpec): number => rank.get(dwell.id) ?? ids.length;
  return [...dwells].sort((a, b) => rankOf(a) - rankOf(b));
}
