import type { SaveState } from '../../shared/bench-state.ts';
import { bench, edit } from '../state/bench.ts';
import { type PageName, page } from '../state/view.ts';
import { Menu } from './Menu.tsx';
import { UnitSwitch } from './UnitSwitch.tsx';

const PAGES: readonly { name: PageName; label: string }[] = [
  { name: 'plan', label: 'Plan' },
  { name: 'measure', label: 'Measure' },
  { name: 'resonance', label: 'Resonance' },
  { name: 'compare', label: 'Compare' },
  { name: 'report', label: 'Report' },
];

/** Title, state of the file, and the pages. */
export function Header() {
  const state = bench.value;
  const test = state?.test;
  return (
    <header>
      <Menu />
      {test && state?.file ? (
        <>
          <input
            class="title"
            aria-label="Title of the test"
            value={test.title}
            size={Math.min(40, Math.max(8, test.title.length))}
            onChange={(event) => {
              const title = event.currentTarget.value.trim();
              if (title !== '' && title !== test.title) void edit({ kind: 'title', title });
              else event.currentTarget.value = test.title;
            }}
          />
          <span
            class={`saved ${saveClass(state.save, state.file.readOnly)}`}
            role="status"
            title={state.file.path}
          >
            {saveText(state.save, state.file.readOnly)}
          </span>
          <nav class="pages" aria-label="Pages">
            {PAGES.map(({ name, label }) => (
              <a
                key={name}
                href={`#${name}`}
                aria-current={page.value === name ? 'page' : undefined}
                onClick={(event) => {
                  event.preventDefault();
                  page.value = name;
                }}
              >
                {label}
              </a>
            ))}
          </nav>
          <UnitSwitch />
        </>
      ) : (
        <b>Dwellbook</b>
      )}
    </header>
  );
}

function saveText(save: SaveState, readOnly: string | null): string {
  if (readOnly) return `read-only: ${readOnly}`;
  if (save.error) return `not saved: ${save.error} It is tried again.`;
  if (save.status !== 'saved') return 'saving …';
  return save.atMs === null ? 'saved' : `saved ${new Date(save.atMs).toLocaleTimeString('en-GB')}`;
}

function saveClass(save: SaveState, readOnly: string | null): string {
  if (save.error) return 'bad';
  return readOnly ? 'wait' : 'faint';
}
