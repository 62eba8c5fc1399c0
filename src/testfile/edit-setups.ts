import { InputError } from '../errors.ts';
import { changed, replaceById } from './edit-lists.ts';
import type { EditOf } from './edit-schema.ts';
import type { MarkerSpec, Scale, Setup, TestFile } from './schema.ts';

type SetupEdit = EditOf<'add-setup' | 'scale' | 'motion-axis' | 'place-marker' | 'remove-marker'>;

/** Applies an edit of a camera setup: its scale, motion axis and markers. */
export function applySetupEdit(test: TestFile, edit: SetupEdit): TestFile {
  if (edit.kind === 'add-setup') {
    if (test.setups.some((each) => each.id === edit.id))
      throw new InputError(`There is a camera setup "${edit.id}" already; give the new one another id.`);
    return { ...test, setups: [...test.setups, { id: edit.id, motionAxis: 'auto', markers: [] }] };
  }
  return {
    ...test,
    setups: replaceById(test.setups, edit.setup, 'camera setup', (each) => editSetup(each, edit)),
  };
}

function editSetup(setup: Setup, edit: Exclude<SetupEdit, EditOf<'add-setup'>>): Setup {
  switch (edit.kind) {
    case 'scale':
      return edit.scale === null
        ? changed(setup, { scale: null })
        : { ...setup, scale: scaleWith(setup.scale, edit.scale) };
    case 'motion-axis':
      return { ...setup, motionAxis: edit.axis };
    case 'place-marker':
      return { ...setup, markers: withMarker(setup.markers, edit.marker) };
    case 'remove-marker': {
      const markers = setup.markers.filter((each) => each.id !== edit.id);
      if (markers.length === setup.markers.length)
        throw new InputError(`There is no marker "${edit.id}" in the camera setup "${setup.id}".`);
      return { ...setup, markers };
    }
  }
}

function scaleWith(before: Scale | undefined, changes: NonNullable<EditOf<'scale'>['scale']>): Scale {
  const scale = changed<Partial<Scale>>(before ?? {}, changes);
  const { from, to, length } = scale;
  if (!from || !to || length === undefined)
    throw new InputError('A scale needs two points and the true length between them; set all three.');
  if (!(length > 0))
    throw new InputError(`The scale length must be more than 0 mm, but is ${length}; read it off the rule.`);
  return { ...scale, from, to, length };
}

/** One response and one drive marker at most; a marker placed anew keeps its patch size unless one is given. */
function withMarker(markers: readonly MarkerSpec[], placed: MarkerSpec): MarkerSpec[] {
  const others = markers.filter(
    (each) => each.id !== placed.id && (placed.role === 'ground' || each.role !== placed.role),
  );
  const before = markers.find((each) => each.id === placed.id);
  const at = before ? markers.indexOf(before) : others.length;
  const merged: MarkerSpec = before ? changed(before, placed) : placed;
  return [...others.slice(0, at), merged, ...others.slice(at)];
}
