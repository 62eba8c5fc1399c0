import { useState } from 'preact/hooks';
import { closeDialog, Dialog, showDialog } from './dialogs.tsx';

/** Asks for one text; null where it was cancelled. */
export function askName(
  title: string,
  label: string,
  hint: string,
  start = '',
  action = 'Go on',
): Promise<string | null> {
  return new Promise((resolve) => {
    showDialog(() => (
      <NameDialog title={title} label={label} hint={hint} start={start} action={action} onDone={resolve} />
    ));
  });
}

function NameDialog(props: {
  title: string;
  label: string;
  hint: string;
  start: string;
  action: string;
  onDone: (text: string | null) => void;
}) {
  const [text, setText] = useState(props.start);
  return (
    <Dialog title={props.title} onClose={() => props.onDone(null)}>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (text.trim() === '') return;
          props.onDone(text.trim());
          closeDialog();
        }}
      >
        <label class="field">
          {props.label}
          <input
            autofocus
            value={text}
            maxLength={200}
            placeholder={props.hint}
            onInput={(event) => setText(event.currentTarget.value)}
          />
        </label>
        <div class="row end">
          <button type="button" onClick={closeDialog}>
            Cancel
          </button>
          <button type="submit" class="go" disabled={text.trim() === ''}>
            {props.action}
          </button>
        </div>
      </form>
    </Dialog>
  );
}
