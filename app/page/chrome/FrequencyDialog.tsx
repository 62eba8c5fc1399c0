import { useState } from 'preact/hooks';
import { parseNumber } from '../format/numbers.ts';
import { edit, test } from '../state/bench.ts';
import { configuration } from '../state/view.ts';
import { closeDialog, Dialog, showDialog } from './dialogs.tsx';

/** Asks for the drive frequencies of clips whose names tell none, all in one table. */
export function askFrequencies(clips: readonly string[]): void {
  showDialog(() => <FrequencyDialog clips={clips} />);
}

function FrequencyDialog({ clips }: { clips: readonly string[] }) {
  const [texts, setTexts] = useState<Record<string, string>>({});
  const wrong = clips.filter((id) => (texts[id] ?? '') !== '' && !isFrequency(texts[id] ?? ''));
  const save = async (): Promise<void> => {
    const sheet = configuration.value;
    if (!sheet) return;
    const dwells = sheet.dwells.flatMap((dwell) => {
      const driveHz = parseNumber(texts[dwell.clip ?? ''] ?? '');
      return dwell.clip !== undefined && clips.includes(dwell.clip) && driveHz !== null
        ? [{ id: dwell.id, driveHz }]
        : [];
    });
    if (dwells.length > 0) await edit({ kind: 'change-dwells', configuration: sheet.id, dwells });
    closeDialog();
  };
  return (
    <Dialog title="Drive frequencies">
      <p class="soft">
        The names of these clips tell no drive frequency. Type what the exciter was set to; what is left empty
        is measured from the clip.
      </p>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (wrong.length === 0) void save();
        }}
      >
        <table>
          <thead>
            <tr>
              <th scope="col">clip</th>
              <th scope="col">drive frequency, Hz</th>
            </tr>
          </thead>
          <tbody>
            {clips.map((id) => (
              <tr key={id}>
                <td>
                  {test.value?.clips
                    .find((each) => each.id === id)
                    ?.file.split('/')
                    .at(-1) ?? id}
                </td>
                <td>
                  <input
                    inputMode="decimal"
                    size={10}
                    aria-label={`Drive frequency of ${id}, Hz`}
                    aria-invalid={wrong.includes(id)}
                    value={texts[id] ?? ''}
                    onInput={(event) => setTexts({ ...texts, [id]: event.currentTarget.value })}
                  />
                  {wrong.includes(id) && <span class="bad"> a number above 0 is expected</span>}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
        <div class="row end">
          <button type="button" onClick={closeDialog}>
            Leave them open
          </button>
          <button type="submit" class="go" disabled={wrong.length > 0}>
            Take these
          </button>
        </div>
      </form>
    </Dialog>
  );
}

function isFrequency(text: string): boolean {
  const value = parseNumber(text);
  return value !== null && value > 0;
}
