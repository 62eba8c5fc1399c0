import { useEffect, useRef, useState } from 'preact/hooks';
import { COMMANDS } from '../../shared/commands.ts';
import { bench } from '../state/bench.ts';
import { isAvailable, runCommand } from './commands.ts';
import { keysText } from './shortcut-keys.ts';

/** The menu of every command, for pointer and keyboard. */
export function Menu() {
  const [open, setOpen] = useState(false);
  const place = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (!open) return;
    place.current?.querySelector<HTMLButtonElement>('.menu-list button:not(:disabled)')?.focus();
    const away = (event: PointerEvent): void => {
      if (!place.current?.contains(event.target as Node)) setOpen(false);
    };
    const keys = (event: KeyboardEvent): void => moveFocus(event, () => setOpen(false));
    const list = place.current;
    window.addEventListener('pointerdown', away);
    list?.addEventListener('keydown', keys);
    return () => {
      window.removeEventListener('pointerdown', away);
      list?.removeEventListener('keydown', keys);
    };
  }, [open]);
  return (
    <div class="menu" ref={place}>
      <button type="button" aria-haspopup="menu" aria-expanded={open} onClick={() => setOpen(!open)}>
        Menu
      </button>
      {open && <MenuList onChosen={() => setOpen(false)} />}
    </div>
  );
}

function MenuList({ onChosen }: { onChosen: () => void }) {
  const history = bench.value?.history;
  return (
    <div class="menu-list" role="menu" aria-label="Commands">
      {COMMANDS.map((command, index) => {
        const what = command.id === 'undo' ? history?.undo : command.id === 'redo' ? history?.redo : null;
        const starts = index > 0 && COMMANDS[index - 1]?.menu !== command.menu;
        return (
          <>
            {starts && <hr key={`rule-${command.id}`} />}
            <button
              key={command.id}
              type="button"
              role="menuitem"
              disabled={!isAvailable(command.id)}
              onClick={() => {
                onChosen();
                runCommand(command.id);
              }}
            >
              <span>{what ? `${command.label}: ${what}` : command.label}</span>
              <span class="faint">{'keys' in command ? keysText(command.keys) : ''}</span>
            </button>
          </>
        );
      })}
    </div>
  );
}

function moveFocus(event: KeyboardEvent, close: () => void): void {
  const items = [
    ...(event.currentTarget as HTMLElement).querySelectorAll<HTMLButtonElement>(
      '.menu-list button:not(:disabled)',
    ),
  ];
  const at = items.indexOf(document.activeElement as HTMLButtonElement);
  const to = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: items.length - 1 }[event.key];
  if (event.key === 'Escape' || event.key === 'Tab') close();
  if (to === undefined || items.length === 0) return;
  event.preventDefault();
  items[(to + items.length) % items.length]?.focus();
}
