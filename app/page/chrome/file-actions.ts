import type { Intake } from '../../shared/answers.ts';
import { ask, bench, client, notify } from '../state/bench.ts';
import { configuration, page, selectDwell, setup } from '../state/view.ts';
import { chooseOnHost } from './FileChooser.tsx';
import { askFrequencies } from './FrequencyDialog.tsx';
import { askName } from './NameDialog.tsx';

type Kind = 'test' | 'clips' | 'folder' | 'save-test';

/** Paths chosen in the system's dialog or in the page's own; null where it was cancelled. */
async function choose(kind: Kind, suggested?: string): Promise<string[] | null> {
  const wish = { kind, ...(suggested === undefined ? {} : { suggested }) };
  return bench.value?.host.nativeDialogs ? ask('choosePaths', wish) : chooseOnHost(kind, suggested);
}

export async function chooseTest(): Promise<void> {
  const [path] = (await choose('test')) ?? [];
  if (path !== undefined) await ask('openTest', { path });
}

export async function chooseClips(): Promise<void> {
  const paths = await choose('clips');
  if (paths) await takeIn(paths);
}

export async function chooseFolder(): Promise<void> {
  const paths = await choose('folder');
  if (paths) await takeIn(paths);
}

export async function chooseLostFolder(): Promise<void> {
  const [folder] = (await choose('folder')) ?? [];
  if (folder === undefined) return;
  const outcome = await ask('findClips', { folder });
  if (!outcome) return;
  const { found, left } = outcome;
  const clips = (count: number): string => (count === 1 ? 'one clip' : `${count} clips`);
  if (left === 0) notify('info', `All clips were found by their content: ${clips(found)}.`);
  else
    notify(
      'caution',
      `${found === 0 ? 'No clip' : clips(found)} found there, ${left} still missing: name the folder they are in.`,
    );
}

export async function newTest(): Promise<void> {
  const title = await askName('New test', 'Title of the test', 'such as the assembly and its number');
  if (title) await ask('newTest', { title });
}

export async function saveAs(): Promise<void> {
  const file = bench.value?.file;
  const [path] = (await choose('save-test', file?.path)) ?? [];
  if (path !== undefined) await ask('saveAs', { path });
}

/** Takes in files and folders by their paths on the host, and asks at once for the frequencies it cannot read. */
export async function takeIn(paths: readonly string[]): Promise<void> {
  const into = configuration.value;
  const intake = await ask('takeIn', {
    paths: [...paths],
    ...(into ? { configuration: into.id } : {}),
    ...(into && setup.value ? { setup: setup.value.id } : {}),
  });
  if (intake) tellOf(intake);
}

/** Takes in dropped files, copying them to the host where it cannot reach them. */
export async function takeInFiles(files: readonly File[], folder: string | null): Promise<void> {
  const inBrowser = bench.value?.host.kind === 'loopback';
  if (inBrowser && files.some((file) => file.name.endsWith('.dwellbook'))) {
    notify('caution', 'A browser does not tell where a dropped file lies: open the test with "Open test …".');
    return;
  }
  try {
    const paths = await client.pathsOf(files, folder, (text) => notify('info', text));
    if (paths.length > 0) await takeIn(paths);
  } catch (error) {
    notify('error', error instanceof Error ? error.message : String(error));
  }
}

function tellOf({ added, unknownFrequency, refused }: Intake): void {
  if (refused.length > 0) {
    const more = refused.length > 3 ? ` And ${refused.length - 3} more like these.` : '';
    notify('caution', `${refused.slice(0, 3).join(' ')}${more}`);
  }
  const [first] = added;
  if (first === undefined) return;
  page.value = 'measure';
  selectDwell(null);
  if (unknownFrequency.length > 0) askFrequencies(unknownFrequency);
}
