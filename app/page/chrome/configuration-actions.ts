import { freshTestId } from '../../../src/testfile/edits.ts';
import { edit, test } from '../state/bench.ts';
import { configuration, selectConfiguration } from '../state/view.ts';

/** Adds a configuration like the one shown, with its drive frequencies but without clips, and shows it. */
export async function addConfiguration(): Promise<void> {
  if (!test.value) return;
  const like = configuration.value;
  const label = `configuration ${test.value.configurations.length + 1}`;
  const id = freshTestId(test.value, label);
  await edit({ kind: 'add-configuration', id, label, ...(like ? { like: like.id } : {}) });
  selectConfiguration(id);
}
