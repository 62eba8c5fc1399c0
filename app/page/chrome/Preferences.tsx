import type { Preferences } from '../../shared/preferences.ts';
import { ask, preferences } from '../state/bench.ts';
import { Dialog, showDialog } from './dialogs.tsx';
import { UnitSwitch } from './UnitSwitch.tsx';

/** Shows what a user sets once; every change takes effect at once. */
export function showPreferences(): void {
  showDialog(() => (
    <Dialog title="Preferences">
      <Fields />
      <form method="dialog" class="row end">
        <button type="submit">Close</button>
      </form>
    </Dialog>
  ));
}

function Fields() {
  const { theme = 'system', textPercent = 100 } = preferences.value ?? {};
  return (
    <>
      <div class="row">
        <span>Amplitudes are</span>
        <UnitSwitch />
      </div>
      <label class="row">
        Ground
        <select
          value={theme}
          onChange={(event) =>
            void ask('setPreferences', { theme: event.currentTarget.value as Preferences['theme'] })
          }
        >
          <option value="system">as the system has it</option>
          <option value="light">light</option>
          <option value="dark">dark</option>
        </select>
      </label>
      <label class="row">
        Text size
        <input
          type="range"
          min={100}
          max={200}
          step={10}
          value={textPercent}
          onChange={(event) => void ask('setPreferences', { textPercent: Number(event.currentTarget.value) })}
        />
        {textPercent} %
      </label>
    </>
  );
}
