import type { Edit } from './edit-schema.ts';

function counted(count: number, what: string): string {
  return count === 1 ? `a ${what}` : `${count} ${what}s`;
}

/** What an edit does, in the words of a menu after "Undo": `move marker carriage`. */
export function editLabel(edit: Edit): string {
  switch (edit.kind) {
    case 'title':
      return 'rename the test';
    case 'add-configuration':
      return `add configuration ${edit.label}`;
    case 'change-configuration':
      return 'change the configuration';
    case 'remove-configuration':
      return `remove configuration ${edit.id}`;
    case 'add-dwells':
      return `add ${counted(edit.dwells.length, 'dwell')}`;
    case 'change-dwells':
      return dwellChangeLabel(edit.dwells[0], edit.dwells.length);
    case 'remove-dwells':
      return `remove ${counted(edit.ids.length, 'dwell')}`;
    case 'order-dwells':
      return 'sort the run sheet';
    case 'add-clips':
      return `add ${counted(edit.clips.length, 'clip')}`;
    case 'change-clip':
      return `change clip ${edit.id}`;
    case 'relink-clips':
      return `find ${counted(edit.files.length, 'clip')} again`;
    case 'add-setup':
      return 'add a camera setup';
    case 'scale':
      return edit.scale === null ? 'remove the scale' : 'set the scale';
    case 'motion-axis':
      return 'set the motion axis';
    case 'place-marker':
      return `place marker ${edit.marker.id}`;
    case 'remove-marker':
      return `remove marker ${edit.id}`;
    case 'dwell-to-ringdown':
      return 'read a clip as a ring-down';
    case 'ringdown-to-dwell':
      return 'read a clip as a dwell';
    case 'plan':
      return 'change the plan';
    case 'replace':
      return edit.label;
  }
}

function dwellChangeLabel(change: object | undefined, count: number): string {
  const rows = count === 1 ? '' : ` of ${count} dwells`;
  if (!change) return 'change the run sheet';
  if ('excluded' in change) return change.excluded === null ? 'include a dwell' : 'exclude a dwell';
  if ('typed' in change) return `type an amplitude${rows}`;
  if ('window' in change) return 'move the steady window';
  if ('driveHz' in change) return `change the drive frequency${rows}`;
  return `change ${counted(count, 'dwell')}`;
}
