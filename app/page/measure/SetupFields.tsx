import { freshTestId } from '../../../src/testfile/edits.ts';
import { closeDialog, Dialog, showDialog } from '../chrome/dialogs.tsx';
import { parseNumber } from '../format/numbers.ts';
import { edit, notify, test } from '../state/bench.ts';
import { setup, shownClip } from '../state/view.ts';

/** The button that shows what is known of clip and camera. */
export function SetupFields() {
  return (
    <button type="button" class="plain" onClick={() => showDialog(() => <CameraDialog />)}>
      Details …
    </button>
  );
}

/** A field for a number that may be absent; `divide` turns what is typed into what is kept. */
function NumberField(props: {
  label: string;
  value: number | undefined;
  divide?: number;
  onChange: (value: number | null) => void;
}) {
  const divide = props.divide ?? 1;
  return (
    <label class="field">
      {props.label}
      <input
        inputMode="decimal"
        size={12}
        defaultValue={props.value === undefined ? '' : String(Number((props.value * divide).toPrecision(10)))}
        onChange={(event) => {
          const text = event.currentTarget.value.trim();
          const value = text === '' ? null : parseNumber(text);
          if (text !== '' && (value === null || value < 0))
            notify('caution', `"${text}" is no number above 0.`);
          else props.onChange(value === null ? null : value / divide);
        }}
      />
    </label>
  );
}

function CameraDialog() {
  const [clip, into] = [shownClip.value, setup.value];
  const changeClip = (changes: Record<string, unknown>): void => {
    if (clip) void edit({ kind: 'change-clip', id: clip.id, changes });
  };
  const changeScale = (scale: Record<string, number | null>): void => {
    if (into?.scale) void edit({ kind: 'scale', setup: into.id, scale });
  };
  const newSetup = async (): Promise<void> => {
    if (!test.value || !clip) return;
    const id = freshTestId(test.value, `setup-${test.value.setups.length + 1}`);
    await edit({ kind: 'add-setup', id });
    await edit({ kind: 'change-clip', id: clip.id, changes: { setup: id } });
    closeDialog();
  };
  return (
    <Dialog title="Camera and clip">
      {clip && (
        <>
          <label class="field">
            Camera setup of this clip
            <select value={clip.setup} onChange={(event) => changeClip({ setup: event.currentTarget.value })}>
              {test.value?.setups.map((each) => (
                <option key={each.id}>{each.id}</option>
              ))}
            </select>
          </label>
          <p class="soft">All clips of one setup share scale, motion axis and markers.</p>
          <button type="button" class="plain" onClick={() => void newSetup()}>
            The camera was moved: a new setup from this clip on
          </button>
          <NumberField
            label="True capture rate of a slow-motion clip, frames/s"
            value={clip.captureFps}
            onChange={(captureFps) => changeClip({ captureFps })}
          />
          <NumberField
            label="Exposure time, ms"
            value={clip.exposure}
            divide={1000}
            onChange={(exposure) => changeClip({ exposure })}
          />
          <NumberField
            label="Row readout, first row to last, ms"
            value={clip.rowReadout}
            divide={1000}
            onChange={(rowReadout) => changeClip({ rowReadout })}
          />
        </>
      )}
      {into?.scale && (
        <>
          <NumberField
            label="Camera to rule, mm"
            value={into.scale.cameraToScale}
            onChange={(cameraToScale) => changeScale({ cameraToScale })}
          />
          <NumberField
            label="Camera to plane of motion, mm"
            value={into.scale.cameraToMotion}
            onChange={(cameraToMotion) => changeScale({ cameraToMotion })}
          />
        </>
      )}
      <div class="row end">
        <button type="button" class="go" onClick={closeDialog}>
          Close
        </button>
      </div>
    </Dialog>
  );
}
