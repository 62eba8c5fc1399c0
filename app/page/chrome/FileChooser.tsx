import { useEffect, useState } from 'preact/hooks';
import type { FolderEntry, FolderListing } from '../../shared/answers.ts';
import { ask } from '../state/bench.ts';
import { closeDialog, Dialog, showDialog } from './dialogs.tsx';

type Kind = 'test' | 'clips' | 'folder' | 'save-test';

const TITLES: Record<Kind, string> = {
  test: 'Open a test',
  clips: 'Add clips',
  folder: 'Choose a folder',
  'save-test': 'Save as',
};
const ACTIONS: Record<Kind, string> = {
  test: 'Open',
  clips: 'Add',
  folder: 'Choose this folder',
  'save-test': 'Save here',
};

let lastFolder: string | undefined;

/** Shows the page's own chooser over the host's folders; null where it was cancelled. */
export function chooseOnHost(kind: Kind, suggested?: string): Promise<string[] | null> {
  return new Promise((resolve) => {
    showDialog(() => <FileChooser kind={kind} suggested={suggested} onDone={resolve} />);
  });
}

function FileChooser(props: {
  kind: Kind;
  suggested: string | undefined;
  onDone: (paths: string[] | null) => void;
}) {
  const { kind } = props;
  const [listing, setListing] = useState<FolderListing | null>(null);
  const [chosen, setChosen] = useState<ReadonlySet<string>>(new Set());
  const [name, setName] = useState(props.suggested?.split(/[\\/]/).at(-1) ?? 'test.dwellbook');
  const go = async (path?: string): Promise<void> => {
    const next =
      (await ask('listFolder', path === undefined ? {} : { path })) ?? (await ask('listFolder', {}));
    if (!next) return;
    lastFolder = next.path;
    setListing(next);
    setChosen(new Set());
  };
  useEffect(() => void go(lastFolder), []);
  const finish = (paths: string[]): void => {
    props.onDone(paths);
    closeDialog();
  };
  const pick = (entry: FolderEntry): void => {
    if (entry.kind === 'folder') void go(entry.path);
    else if (kind === 'clips') setChosen(toggled(chosen, entry.path));
    else if (kind === 'test') setChosen(new Set([entry.path]));
    else if (kind === 'save-test') setName(entry.name);
  };
  const result = resultOf(kind, listing, chosen, name);
  return (
    <Dialog title={TITLES[kind]} onClose={() => props.onDone(null)}>
      <div class="row">
        <button
          type="button"
          disabled={!listing?.parent}
          onClick={() => void go(listing?.parent ?? undefined)}
        >
          Folder above
        </button>
        {listing?.roots.map((root) => (
          <button key={root} type="button" class="plain" onClick={() => void go(root)}>
            {root.split(/[\\/]/).at(-1) || root}
          </button>
        ))}
      </div>
      <p class="soft">{listing?.path}</p>
      <Listing
        kind={kind}
        listing={listing}
        chosen={chosen}
        onPick={pick}
        onOpen={(path) => finish([path])}
      />
      <div class="row end">
        {kind === 'save-test' && (
          <label>
            File name <input value={name} onInput={(event) => setName(event.currentTarget.value)} size={28} />
          </label>
        )}
        <button type="button" onClick={closeDialog}>
          Cancel
        </button>
        <button type="button" class="go" disabled={!result} onClick={() => result && finish(result)}>
          {ACTIONS[kind]}
        </button>
      </div>
    </Dialog>
  );
}

function Listing(props: {
  kind: Kind;
  listing: FolderListing | null;
  chosen: ReadonlySet<string>;
  onPick: (entry: FolderEntry) => void;
  onOpen: (path: string) => void;
}) {
  const { kind, listing, chosen } = props;
  const fits = (entry: FolderEntry): boolean =>
    entry.kind === 'folder' ||
    kind === 'folder' ||
    (kind === 'clips' ? entry.kind === 'clip' : entry.kind === 'test');
  const entries = listing?.entries.filter(fits) ?? [];
  return (
    <div
      class="listing"
      role="listbox"
      aria-label="Contents of the folder"
      aria-multiselectable={kind === 'clips'}
    >
      {entries.map((entry) => (
        <button
          key={entry.path}
          type="button"
          role="option"
          aria-selected={chosen.has(entry.path)}
          disabled={kind === 'folder' && entry.kind !== 'folder'}
          onClick={() => props.onPick(entry)}
          onDblClick={() => kind === 'test' && entry.kind === 'test' && props.onOpen(entry.path)}
        >
          <span class="kind">{entry.kind}</span>
          {entry.name}
        </button>
      ))}
      {listing && entries.length === 0 && <p class="soft">Nothing of the kind lies here.</p>}
    </div>
  );
}

function toggled(chosen: ReadonlySet<string>, path: string): Set<string> {
  const next = new Set(chosen);
  if (!next.delete(path)) next.add(path);
  return next;
}

function resultOf(
  kind: Kind,
  listing: FolderListing | null,
  chosen: ReadonlySet<string>,
  name: string,
): string[] | null {
  if (!listing) return null;
  const slash = listing.path.includes('\\') ? '\\' : '/';
  if (kind === 'folder') return [listing.path];
  if (kind === 'save-test')
    return /^[^\\/]+$/.test(name.trim()) ? [`${listing.path}${slash}${name.trim()}`] : null;
  return chosen.size > 0 ? [...chosen] : null;
}
