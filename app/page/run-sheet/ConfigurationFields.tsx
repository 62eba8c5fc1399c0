import { EXCITATIONS, type Excitation } from '../../../src/testfile/schema.ts';
import { closeDialog, Dialog, showDialog } from '../chrome/dialogs.tsx';
import { parseNumber } from '../format/numbers.ts';
import { edit, notify, test } from '../state/bench.ts';
import { configuration } from '../state/view.ts';

const EXCITATION_WORDS: Record<Excitation, string> = {
  force: 'a force of constant amplitude on the moving part',
  'spring-end': 'the far end of the spring is moved',
  base: 'the base is moved; amplitude against the room',
  'base-relative': 'the base is moved; amplitude against the base',
  unbalance: 'a rotating unbalance on the moving part',
};

/** The button that shows what is known of the configuration. */
export function ConfigurationFields() {
  return (
    <button type="button" class="plain" onClick={() => showDialog(() => <ConfigurationDialog />)}>
      Details …
    </button>
  );
}

function ConfigurationDialog() {
  const sheet = configuration.value;
  if (!sheet) return null;
  const change = (changes: Record<string, unknown>): void => {
    void edit({ kind: 'change-configuration', id: sheet.id, changes });
  };
  const number = (key: 'movingMass' | 'movingMassU' | 'travelLimit' | 'setting', label: string) => (
    <label class="field">
      {label}
      <input
        inputMode="decimal"
        size={10}
        defaultValue={sheet[key] === undefined ? '' : String(sheet[key])}
        onChange={(event) => {
          const text = event.currentTarget.value.trim();
          const value = text === '' ? null : parseNumber(text);
          if (text !== '' && value === null) notify('caution', `"${text}" is no number.`);
          else change({ [key]: value });
        }}
      />
    </label>
  );
  return (
    <Dialog title="Configuration">
      <label class="field">
        Name
        <input
          defaultValue={sheet.label ?? sheet.id}
          onChange={(event) => change({ label: event.currentTarget.value.trim() || null })}
        />
      </label>
      <label class="field">
        Excitation
        <select
          value={sheet.excitation}
          onChange={(event) => change({ excitation: event.currentTarget.value as Excitation })}
        >
          {EXCITATIONS.map((each) => (
            <option key={each} value={each}>
              {each}: {EXCITATION_WORDS[each]}
            </option>
          ))}
        </select>
      </label>
      {number('movingMass', 'Moving mass, kg')}
      {number('movingMassU', 'its standard uncertainty, kg')}
      {number('travelLimit', 'Travel limit, mm from rest')}
      {number('setting', 'Setting varied across configurations')}
      <div class="row end">
        {(test.value?.configurations.length ?? 0) > 1 && (
          <button
            type="button"
            onClick={() => {
              void edit({ kind: 'remove-configuration', id: sheet.id });
              closeDialog();
            }}
          >
            Remove this configuration
          </button>
        )}
        <button type="button" class="go" onClick={closeDialog}>
          Close
        </button>
      </div>
    </Dialog>
  );
}
