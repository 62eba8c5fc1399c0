const isMac = /Mac|iPhone|iPad/.test(navigator.userAgent);

/** Keys in words: `Ctrl+Shift+S`, on a Mac with its own names. */
export function keysText(keys: string): string {
  return keys.replace('CmdOrCtrl', isMac ? 'Cmd' : 'Ctrl');
}

/** Whether a key press is the one that a command declares. */
export function isPressed(event: KeyboardEvent, keys: string): boolean {
  const parts = keys.split('+');
  const key = parts.at(-1) ?? '';
  const mod = isMac ? event.metaKey : event.ctrlKey;
  return (
    event.key.toLowerCase() === key.toLowerCase() &&
    mod === parts.includes('CmdOrCtrl') &&
    event.shiftKey === parts.includes('Shift') &&
    event.altKey === parts.includes('Alt')
  );
}
