import { constants } from 'node:fs';
import { access, readFile, stat } from 'node:fs/promises';
import { basename } from 'node:path';
import { usedClips } from '../../src/engine/track-test.ts';
import type { Edit } from '../../src/testfile/edit-schema.ts';
import { Journal, recover, textHash } from '../../src/testfile/journal.ts';
import { clipPath, loadTest } from '../../src/testfile/on-disk.ts';
import type { ClipSpec, TestFile } from '../../src/testfile/schema.ts';
import { writeTest } from '../../src/testfile/write-test.ts';
import type { Notice, OpenFile, SaveState } from './bench-state.ts';
import { History } from './history.ts';
import { pathInTest } from './intake.ts';
import { type Lock, takeLock } from './lock-file.ts';
import { MeasuredStore } from './measured-store.ts';
import { measuringInputs } from './measuring-inputs.ts';
import { recordMeasured } from './record-measured.ts';
import { Saver } from './saver.ts';

let openings = 0;

/** What a session tells of: each change of its save state. */
export interface SessionParts {
  readonly path: string;
  readonly onSave: (state: SaveState) => void;
}

/** One open test: its history, its file, its journal and lock, and what was measured of it. */
export class TestSession {
  readonly file: OpenFile;
  readonly history: History;
  readonly measured = new MeasuredStore();
  /** What there is to tell about the opening. */
  readonly notices: readonly Notice[];
  readonly #saver: Saver | null;
  readonly #journal: Journal | null;
  readonly #lock: Lock | null;
  /** Inputs of the clips when the file was opened: what dwells carry from before holds as long as these do. */
  readonly #inputsAtOpening: ReadonlyMap<string, string>;

  private constructor(
    file: OpenFile,
    test: TestFile,
    notices: readonly Notice[],
    keeping: { saver: (session: () => TestSession) => Saver; journal: Journal; lock: Lock } | null,
  ) {
    this.file = file;
    this.history = new History(test);
    this.notices = notices;
    this.#saver = keeping?.saver(() => this) ?? null;
    this.#journal = keeping?.journal ?? null;
    this.#lock = keeping?.lock ?? null;
    this.#inputsAtOpening = new Map(test.clips.map((each) => [each.id, measuringInputs(test, each.id)]));
  }

  /**
   * Opens a test file: recovers what a kill left in its journal, and takes its lock. Where the file cannot be
   * written or is open elsewhere it is opened read-only, and says why.
   * @throws InputError when it cannot be read or is no test file
   */
  static async open({ path, onSave }: SessionParts): Promise<TestSession> {
    const loaded = await loadTest(path);
    const text = await readFile(path, 'utf8');
    const lock = (await isWritable(path))
      ? await takeLock(path)
      : 'the file or its folder cannot be written to';
    const opening = ++openings;
    const name = basename(path);
    if (typeof lock === 'string') {
      const file: OpenFile = { path, name, readOnly: `${lock}`, opening };
      const told = `${name} is open read-only: ${lock}. Changes are kept only with "Save as".`;
      return new TestSession(file, loaded, [{ level: 'caution', text: told }], null);
    }
    const { test, recovered, putAside } = await recover(path, text, loaded);
    const notices: Notice[] = [];
    if (recovered > 0)
      notices.push({
        level: 'info',
        text: `${recovered === 1 ? 'One change' : `${recovered} changes`} made before the program was last stopped ${recovered === 1 ? 'was' : 'were'} recovered.`,
      });
    if (putAside)
      notices.push({
        level: 'caution',
        text: `The file was changed elsewhere since unsaved changes were noted; those are kept in ${putAside}.`,
      });
    const journal = new Journal(path);
    const saver = (session: () => TestSession): Saver =>
      new Saver({ path, journal, text: () => writeTest(session().testToSave()), onState: onSave });
    const file: OpenFile = { path, name, readOnly: null, opening };
    const session = new TestSession(file, test, notices, { saver, journal, lock });
    if (recovered > 0) await session.#saver?.saveRecovered();
    else await journal.start(textHash(text));
    return session;
  }

  get test(): TestFile {
    return this.history.test;
  }

  get saveState(): SaveState {
    return this.#saver?.state ?? { status: 'unsaved', atMs: null, error: null };
  }

  /** Applies an edit, in the journal before it is shown. */
  async edit(edit: Edit): Promise<void> {
    await this.#note(this.history.apply(edit));
  }

  async undo(): Promise<void> {
    await this.#note(this.history.undo());
  }

  async redo(): Promise<void> {
    await this.#note(this.history.redo());
  }

  /** Says that results were added, which the file holds too. */
  resultsChanged(): void {
    this.#saver?.changed();
  }

  /** The test with what was measured of it, for the file and the fit. */
  testToSave(): TestFile {
    const { test, measured } = this;
    const isNew = (clip: string): boolean => measured.holdsFor(test, clip);
    return recordMeasured(
      test,
      measured.results,
      isNew,
      ({ clip }) => clip === undefined || this.#holdsFromBefore(clip),
    );
  }

  /** Whether nothing that bears on a clip's results changed since the file was opened. */
  #holdsFromBefore(clip: string): boolean {
    return this.#inputsAtOpening.get(clip) === measuringInputs(this.test, clip);
  }

  clip(id: string): ClipSpec | undefined {
    return this.test.clips.find((each) => each.id === id);
  }

  clipPath(clip: ClipSpec): string {
    return clipPath(this.file.path, clip);
  }

  /** A path as the test file keeps it. */
  relativePath(path: string): string {
    return pathInTest(this.file.path, path);
  }

  /** Clips in use whose results are not there as the test stands, neither from now nor from an earlier run. */
  unmeasuredClips(): string[] {
    const { test, measured } = this;
    const bare = new Set<string>();
    for (const { dwells, sweeps, ringdowns } of test.configurations) {
      for (const { clip, measured: before } of dwells) if (clip !== undefined && !before) bare.add(clip);
      for (const { clip } of [...sweeps, ...ringdowns]) bare.add(clip);
    }
    return usedClips(test).filter(
      (id) => !measured.outcome(test, id) && (bare.has(id) || !this.#holdsFromBefore(id)),
    );
  }

  /** Ids of clips whose file is not there. */
  async missingClips(): Promise<string[]> {
    const there = await Promise.all(
      this.test.clips.map(async (clip) => {
        const facts = await stat(this.clipPath(clip)).catch(() => null);
        return facts?.isFile() ? null : clip.id;
      }),
    );
    return there.filter((id) => id !== null);
  }

  /** Saves what is unsaved and lets go of the file. */
  async close(): Promise<void> {
    await this.#saver?.close();
    await this.#lock?.release();
  }

  async #note(edit: Edit | null): Promise<void> {
    if (!edit) return;
    // A journal that cannot be written must not stop the work: the save that follows tells the user.
    await this.#journal?.append(edit).catch(() => undefined);
    this.#saver?.changed();
  }
}

async function isWritable(path: string): Promise<boolean> {
  return access(path, constants.W_OK).then(
    () => true,
    () => false,
  );
}
