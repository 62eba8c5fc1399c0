import { type Signal, signal } from '@preact/signals';
import type { ComponentChildren, JSX } from 'preact';
import { useEffect, useRef } from 'preact/hooks';

/** The dialog shown; null where there is none. */
const shown: Signal<(() => JSX.Element) | null> = signal(null);

/** Shows a dialog in place of the one there. */
export function showDialog(dialog: () => JSX.Element): void {
  shown.value = dialog;
}

/** Closes the dialog. */
export function closeDialog(): void {
  shown.value = null;
}

/** Where dialogs appear. */
export function DialogHost() {
  const Shown = shown.value;
  return Shown ? <Shown /> : null;
}

/** A dialog with a heading; Escape closes it. */
export function Dialog(props: { title: string; children: ComponentChildren; onClose?: () => void }) {
  const element = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    element.current?.showModal();
  }, []);
  return (
    <dialog
      ref={element}
      aria-labelledby="dialog-title"
      onClose={() => {
        props.onClose?.();
        closeDialog();
      }}
    >
      <h1 id="dialog-title">{props.title}</h1>
      {props.children}
    </dialog>
  );
}
