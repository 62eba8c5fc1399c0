import { InputError } from '../errors.ts';
import { changed, freshId, replaceById } from './edit-lists.ts';
import type { EditOf } from './edit-schema.ts';
import type { ClipSpec, DwellSpec, TestFile } from './schema.ts';

type ClipEdit = EditOf<'add-clips' | 'change-clip' | 'relink-clips'>;

/** Applies an edit of the clips. */
export function applyClipEdit(test: TestFile, edit: ClipEdit): TestFile {
  switch (edit.kind) {
    case 'add-clips':
      return addClips(test, edit);
    case 'change-clip':
      if (edit.changes.setup !== undefined) mustHaveSetup(test, edit.changes.setup);
      return {
        ...test,
        clips: replaceById(test.clips, edit.id, 'clip', (each) => changed(each, edit.changes)),
      };
    case 'relink-clips': {
      let clips = test.clips;
      for (const { id, file } of edit.files)
        clips = replaceById(clips, id, 'clip', (each) => ({ ...each, file }));
      return { ...test, clips };
    }
  }
}

function mustHaveSetup(test: TestFile, id: string): void {
  if (!test.setups.some((each) => each.id === id))
    throw new InputError(`There is no camera setup "${id}"; add it first.`);
}

/** Adds the clips and one dwell for each; a planned dwell of the same drive frequency without a clip takes it. */
function addClips(test: TestFile, edit: EditOf<'add-clips'>): TestFile {
  mustHaveSetup(test, edit.setup);
  const taken = new Set(test.clips.map((each) => each.id));
  const clips: ClipSpec[] = [];
  for (const { driveHz: _, ...clip } of edit.clips) {
    if (taken.has(clip.id)) throw new InputError(`There is a clip "${clip.id}" already; give it another id.`);
    taken.add(clip.id);
    clips.push({ ...clip, setup: edit.setup });
  }
  const configurations = replaceById(test.configurations, edit.configuration, 'configuration', (sheet) => {
    const dwells: DwellSpec[] = [...sheet.dwells];
    const ids = new Set([...sheet.dwells, ...sheet.ringdowns].map((each) => each.id));
    for (const { id: clip, driveHz } of edit.clips) {
      const planned = dwells.findIndex(
        (each) => !each.clip && !each.typed && driveHz !== undefined && each.driveHz === driveHz,
      );
      const waiting = dwells[planned];
      if (waiting) {
        dwells[planned] = { ...waiting, clip };
        continue;
      }
      const id = freshId(ids, clip);
      ids.add(id);
      dwells.push({ id, ...(driveHz === undefined ? {} : { driveHz }), clip });
    }
    return { ...sheet, dwells };
  });
  return { ...test, clips: [...test.clips, ...clips], configurations };
}
