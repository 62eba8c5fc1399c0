import type { Preferences } from '../../shared/preferences.ts';
import { AMPLITUDE_UNITS } from '../format/amplitude.ts';
import { ask, preferences } from '../state/bench.ts';

/** How amplitudes are stated, everywhere at once. */
export function UnitSwitch() {
  const chosen = preferences.value?.amplitudeAs ?? 'peak';
  return (
    <label class="unit-switch">
      <span class="unseen">Amplitudes as</span>
      <select
        value={chosen}
        title="How amplitudes are stated, everywhere"
        onChange={(event) => {
          const amplitudeAs = event.currentTarget.value as Preferences['amplitudeAs'];
          void ask('setPreferences', { amplitudeAs });
        }}
      >
        {Object.entries(AMPLITUDE_UNITS).map(([key, unit]) => (
          <option key={key} value={key}>
            {unit.long}
          </option>
        ))}
      </select>
    </label>
  );
}
