import { dialog, type FileFilter } from 'electron';
import type { InputOf } from '../shared/operations.ts';

const TESTS: FileFilter = { name: 'Tests', extensions: ['dwellbook', 'json'] };
const CLIPS: FileFilter = {
  name: 'Clips',
  extensions: ['mp4', 'mov', 'm4v', 'avi', 'mkv', 'webm', 'mts', 'm2ts', '3gp', 'mpg', 'mpeg'],
};

/** Shows the system's file dialog; null when it was cancelled. */
export async function choosePaths({ kind, suggested }: InputOf<'choosePaths'>): Promise<string[] | null> {
  const start = suggested === undefined ? {} : { defaultPath: suggested };
  if (kind === 'save-test') {
    const { canceled, filePath } = await dialog.showSaveDialog({ ...start, filters: [TESTS] });
    return canceled || filePath === '' ? null : [filePath];
  }
  const { canceled, filePaths } = await dialog.showOpenDialog({
    ...start,
    properties:
      kind === 'folder'
        ? ['openDirectory']
        : kind === 'clips'
          ? ['openFile', 'multiSelections']
          : ['openFile'],
    ...(kind === 'folder' ? {} : { filters: [kind === 'clips' ? CLIPS : TESTS] }),
  });
  return canceled || filePaths.length === 0 ? null : filePaths;
}
