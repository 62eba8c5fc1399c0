import { COMMANDS, type CommandId } from '../../shared/commands.ts';
import { addDwell, duplicateDwell, sortDwells, toggleExcluded } from '../run-sheet/row-actions.ts';
import { ask, bench, job, onCommand, test } from '../state/bench.ts';
import { page, shownClip } from '../state/view.ts';
import { addConfiguration } from './configuration-actions.ts';
import { chooseClips, chooseFolder, chooseLostFolder, chooseTest, newTest, saveAs } from './file-actions.ts';
import { showPreferences } from './Preferences.tsx';
import { showShortcuts } from './Shortcuts.tsx';
import { isPressed } from './shortcut-keys.ts';

const hasTest = (): boolean => test.value !== null;
const hasClip = (): boolean => shownClip.value !== null && job.value === null;
const always = (): boolean => true;

interface Action {
  readonly run: () => unknown;
  readonly when: () => boolean;
}

const ACTIONS: Readonly<Record<CommandId, Action>> = {
  'new-test': { run: newTest, when: always },
  'open-test': { run: chooseTest, when: always },
  'add-clips': { run: chooseClips, when: always },
  'add-folder': { run: chooseFolder, when: always },
  'open-demo': { run: () => ask('openDemo', {}), when: always },
  'save-as': { run: saveAs, when: hasTest },
  'close-test': { run: () => ask('closeTest', {}), when: hasTest },
  undo: { run: () => ask('undo', {}), when: () => bench.value?.history.undo != null },
  redo: { run: () => ask('redo', {}), when: () => bench.value?.history.redo != null },
  'add-dwell': { run: addDwell, when: hasTest },
  'duplicate-dwell': { run: duplicateDwell, when: hasTest },
  'exclude-dwell': { run: toggleExcluded, when: hasTest },
  'sort-dwells': { run: sortDwells, when: hasTest },
  'add-configuration': { run: addConfiguration, when: hasTest },
  'measure-rest': { run: () => ask('measure', {}), when: () => hasTest() && job.value === null },
  'measure-clip': {
    run: () => ask('measure', { clips: [shownClip.value?.id ?? ''] }),
    when: () => hasTest() && hasClip(),
  },
  cancel: { run: () => ask('cancelMeasuring', {}), when: () => job.value !== null },
  'find-clips': { run: chooseLostFolder, when: () => (bench.value?.missing.length ?? 0) > 0 },
  'page-plan': { run: () => show('plan'), when: hasTest },
  'page-compare': { run: () => show('compare'), when: hasTest },
  'page-report': { run: () => show('report'), when: hasTest },
  'page-measure': { run: () => show('measure'), when: hasTest },
  'page-resonance': { run: () => show('resonance'), when: hasTest },
  preferences: { run: showPreferences, when: always },
  shortcuts: { run: showShortcuts, when: always },
};

function show(name: typeof page.value): void {
  page.value = name;
}

/** Whether a command can be carried out as things stand. */
export function isAvailable(id: CommandId): boolean {
  return ACTIONS[id].when();
}

/** Carries a command out, where it can be. */
export function runCommand(id: CommandId): void {
  if (isAvailable(id)) void ACTIONS[id].run();
}

onCommand((id) => {
  const command = COMMANDS.find((each) => each.id === id);
  if (command) runCommand(command.id);
});

// In Electron the system's menu has the keys; pressing one there comes back as a command.
if (!('dwellbook' in window))
  window.addEventListener('keydown', (event) => {
    const command = COMMANDS.find((each) => 'keys' in each && isPressed(event, each.keys));
    if (!command || document.querySelector('dialog[open]')) return;
    const typing = (event.target as HTMLElement).matches?.('input:not([type=range]), textarea');
    if (typing && (command.id === 'undo' || command.id === 'redo')) return;
    event.preventDefault();
    runCommand(command.id);
  });
