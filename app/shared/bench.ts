import { cp, stat } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { InputError } from '../../src/errors.ts';
import type { Edit } from '../../src/testfile/edit-schema.ts';
import { saveTest } from '../../src/testfile/on-disk.ts';
import type { Intake } from './answers.ts';
import type { BenchEvent, BenchState, HostFacts, JobState, Notice } from './bench-state.ts';
import { ClipShelf } from './clip-shelf.ts';
import type { Engine } from './engine.ts';
import { packFrame } from './frame-bytes.ts';
import { FrameStore } from './frame-store.ts';
import { addClipsEdit, isTestName, sortPaths } from './intake.ts';
import { listFolder } from './list-folder.ts';
import { MeasuringJob } from './measuring-job.ts';
import { fileStem, newTestFile } from './new-test-file.ts';
import type { InputOf, OperationHandlers } from './operations.ts';
import { ResultsKeeper } from './results-keeper.ts';
import { TestSession } from './test-session.ts';
import type { UserFolder } from './user-folder.ts';

/** What a bench needs from its host. */
export interface BenchParts {
  readonly host: HostFacts;
  /** Shows: frames, spots, what clips are. */
  readonly quickEngine: Engine;
  /** Tracks clips, for minutes. */
  readonly measuringEngine: Engine;
  /** Evaluates tracks and fits resonances, for fractions of a second. */
  readonly evaluatingEngine: Engine;
  readonly userFolder: UserFolder;
  /** Where new tests are made when nothing else is said. */
  readonly testsFolder: string;
  /** Where the demo test lies. */
  readonly demoFolder: string;
  /** Folders the page's own chooser may look into. */
  readonly browseRoots: readonly string[];
  /** Shows the system's dialog; absent where the host has none. */
  readonly choosePaths?: (wish: InputOf<'choosePaths'>) => Promise<string[] | null>;
}

type PartOfState = Omit<BenchState, 'host' | 'preferences' | 'recent'>;

const EMPTY: PartOfState = {
  test: null,
  file: null,
  save: { status: 'saved', atMs: null, error: null },
  history: { undo: null, redo: null },
  results: null,
  plans: null,
  tracked: [],
  missing: [],
  job: null,
};

/** The bench: one open test and what is done with it. Both hosts serve its `handlers` and push its events. */
export class Bench {
  readonly #parts: BenchParts;
  readonly #listeners = new Set<(event: BenchEvent) => void>();
  readonly #frames: FrameStore;
  readonly #clips: ClipShelf;
  readonly #results: ResultsKeeper;
  #state: PartOfState = EMPTY;
  #session: TestSession | null = null;
  #job: MeasuringJob | null = null;
  #turn: Promise<unknown> = Promise.resolve();

  constructor(parts: BenchParts) {
    this.#parts = parts;
    this.#frames = new FrameStore(parts.quickEngine);
    this.#clips = new ClipShelf(parts.quickEngine);
    this.#results = new ResultsKeeper(
      parts.evaluatingEngine,
      (session, results) => {
        session.resultsChanged();
        if (this.#session === session) this.#patch({ results });
      },
      (session, plans) => {
        if (this.#session === session) this.#patch({ plans });
      },
      (error) =>
        this.#notice({ level: 'error', text: error instanceof Error ? error.message : String(error) }),
    );
  }

  /** What is open, for the host's window title and for its closing. */
  get session(): TestSession | null {
    return this.#session;
  }

  /** The whole state, for a page that has just come. */
  state(): BenchState {
    const { host, userFolder } = this.#parts;
    return { ...this.#state, host, preferences: userFolder.preferences, recent: userFolder.recent };
  }

  /** Adds a listener to the push channel; gives back what removes it. */
  subscribe(listener: (event: BenchEvent) => void): () => void {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  /** Sends a command of the host's menu to the page. */
  command(command: string): void {
    this.#emit({ type: 'command', command });
  }

  /** Ends: stops measuring, saves, lets go of the file, ends the engines. */
  async close(): Promise<void> {
    this.#job?.cancel();
    this.#frames.clear();
    await this.#session?.close();
    const { quickEngine, measuringEngine, evaluatingEngine } = this.#parts;
    await Promise.all([quickEngine.close(), measuringEngine.close(), evaluatingEngine.close()]);
  }

  readonly handlers: OperationHandlers = {
    hello: async () => this.#emit({ type: 'patch', patch: this.state() }),
    newTest: ({ title, folder }) =>
      this.#inTurn(async () => {
        const into = folder ?? join(this.#parts.testsFolder, fileStem(title));
        await this.#open(await newTestFile(into, title));
      }),
    openTest: ({ path }) => this.#inTurn(() => this.#open(resolve(path))),
    openDemo: () => this.#inTurn(() => this.#openDemo()),
    closeTest: () => this.#inTurn(() => this.#close()),
    saveAs: ({ path }) => this.#inTurn(() => this.#saveAs(resolve(path))),

    edit: ({ edit }) => this.#inTurn(() => this.#change((session) => session.edit(edit))),
    undo: () => this.#inTurn(() => this.#change((session) => session.undo())),
    redo: () => this.#inTurn(() => this.#change((session) => session.redo())),

    takeIn: (wish) => this.#inTurn(() => this.#takeIn(wish)),
    findClips: ({ folder }) => this.#inTurn(() => this.#findClips(folder)),

    clip: ({ clip }) => this.#clips.get(clip, this.#clipPath(clip)),
    frame: async ({ clip, frame, widthPx, near }) => {
      const path = this.#clipPath(clip);
      const { frameCount } = await this.#clips.get(clip, path);
      const source = { path, frameCount, widthPx };
      const picture = await (near ? this.#frames.near(source, frame) : this.#frames.get(source, frame));
      return packFrame(picture.frame, picture.jpeg);
    },
    judgeSpot: ({ clip, frame, at, sizePx }) =>
      this.#parts.quickEngine.call('judgeSpot', {
        path: this.#clipPath(clip),
        frame,
        at,
        ...(sizePx === undefined ? {} : { sizePx }),
      }),

    measure: ({ clips }) => this.#measure(clips),
    cancelMeasuring: async () => this.#job?.cancel(),
    tracks: async ({ clip }) => {
      await this.#results.settled();
      const bytes = await this.#parts.evaluatingEngine.call('motion', { clip });
      if (!bytes) throw new InputError(`The clip "${clip}" has not been measured with these markers yet.`);
      return bytes;
    },

    compare: async () => {
      const { test } = this.#need();
      const { results } = this.#state;
      return results ? this.#parts.evaluatingEngine.call('compare', { test, results }) : null;
    },
    report: async () => {
      const session = this.#need();
      await this.#results.settled();
      return this.#parts.evaluatingEngine.call('report', { test: session.test });
    },

    listFolder: ({ path }) => listFolder(path, this.#browseRoots()),
    choosePaths: async (wish) => {
      if (!this.#parts.choosePaths) throw new Error('this host has no dialogs of its own');
      return this.#parts.choosePaths(wish);
    },
    setPreferences: async (change) => {
      const { userFolder } = this.#parts;
      const set = Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined));
      await userFolder.setPreferences({ ...userFolder.preferences, ...set });
      this.#emit({ type: 'patch', patch: { preferences: userFolder.preferences } });
    },
    forgetRecent: async ({ path }) => {
      await this.#parts.userFolder.forget(path);
      this.#emit({ type: 'patch', patch: { recent: this.#parts.userFolder.recent } });
    },
  };

  async #open(path: string): Promise<void> {
    if (this.#session?.file.path === path) return;
    let opened: TestSession | null = null;
    const session = await TestSession.open({
      path,
      onSave: (save) => {
        if (opened !== null && this.#session === opened) this.#patch({ save });
      },
    });
    opened = session;
    await this.#close();
    this.#session = session;
    this.#patch({ ...EMPTY, file: session.file, ...this.#sessionState(session) });
    for (const notice of session.notices) this.#notice(notice);
    this.#results.refresh(session);
    this.#patch({ missing: await session.missingClips() });
    await this.#remember(session);
  }

  async #remember({ file: { path }, test: { title } }: TestSession): Promise<void> {
    const { userFolder } = this.#parts;
    await userFolder.remember({ path, title, openedMs: Date.now() });
    this.#emit({ type: 'patch', patch: { recent: userFolder.recent } });
  }

  async #close(): Promise<void> {
    const session = this.#session;
    if (!session) return;
    this.#job?.cancel();
    this.#session = null;
    this.#frames.clear();
    this.#clips.clear();
    await session.close();
    this.#patch(EMPTY);
  }

  async #openDemo(): Promise<void> {
    const into = join(this.#parts.userFolder.path, 'demo');
    await cp(this.#parts.demoFolder, into, { recursive: true, force: false }).catch((error: unknown) => {
      const reason = error instanceof Error ? error.message : String(error);
      throw new InputError(`The demo test could not be copied to ${into}: ${reason}.`);
    });
    await this.#open(join(into, 'demo.dwellbook'));
  }

  async #saveAs(path: string): Promise<void> {
    const session = this.#need();
    const target = isTestName(basename(path)) ? path : `${path}.dwellbook`;
    const moved = {
      ...session.testToSave(),
      clips: session.testToSave().clips.map((clip) => ({ ...clip, file: session.clipPath(clip) })),
    };
    await saveTest(target, moved);
    await this.#open(target);
  }

  async #change(work: (session: TestSession) => Promise<void>): Promise<void> {
    const session = this.#need();
    const { title } = session.test;
    await work(session);
    if (session.test.title !== title) await this.#remember(session);
    this.#patch(this.#sessionState(session));
    this.#results.refresh(session);
    if (this.#state.missing.length > 0) this.#patch({ missing: await session.missingClips() });
  }

  async #edit(edit: Edit): Promise<void> {
    await this.#change((session) => session.edit(edit));
  }

  async #takeIn(wish: InputOf<'takeIn'>): Promise<Intake> {
    const sorted = await sortPaths(
      wish.paths.map((path) => resolve(path)),
      this.#session !== null,
    );
    const nothing = { opened: false, added: [], unknownFrequency: [], refused: [] };
    if (sorted.testFile) {
      await this.#open(sorted.testFile);
      return { ...nothing, opened: true, refused: sorted.refused };
    }
    const first = sorted.clips[0];
    if (first === undefined) return { ...nothing, refused: sorted.refused };
    if (!this.#session) await this.#newTestBeside(dirname(first));
    const session = this.#need();
    const readable: string[] = [];
    const refused = [...sorted.refused];
    for (const path of sorted.clips) {
      const trouble = await this.#clips.trouble(path);
      if (trouble === null) readable.push(path);
      else refused.push(trouble);
    }
    const target = {
      configuration: wish.configuration ?? session.test.configurations[0]?.id ?? '',
      setup: wish.setup ?? session.test.setups[0]?.id ?? '',
    };
    const added = addClipsEdit(session.test, session.file.path, readable, target);
    if (added.edit) await this.#edit(added.edit);
    return {
      opened: false,
      added: added.edit?.clips.map((each) => each.id) ?? [],
      unknownFrequency: added.unknownFrequency,
      refused: [...refused, ...added.refused],
    };
  }

  /** A new test in the clips' folder, or among the user's tests where that folder cannot be written to. */
  async #newTestBeside(folder: string): Promise<void> {
    const place = basename(folder).toLowerCase() === 'clips' ? dirname(folder) : folder;
    const title = basename(place) || 'New test';
    const path = await newTestFile(place, title).catch(() =>
      newTestFile(join(this.#parts.testsFolder, fileStem(title)), title),
    );
    await this.#open(path);
  }

  async #findClips(folder: string): Promise<{ found: number; left: number }> {
    const session = this.#need();
    const missing = await session.missingClips();
    const wanted = session.test.clips.filter((clip) => missing.includes(clip.id));
    const facts = await stat(folder).catch(() => null);
    if (!facts?.isDirectory()) throw new InputError(`There is no folder ${folder}.`);
    const found = await this.#parts.quickEngine.call('findClips', { folder: resolve(folder), wanted });
    if (found.length > 0)
      await this.#edit({
        kind: 'relink-clips',
        files: found.map(({ id, path }) => ({ id, file: session.relativePath(path) })),
      });
    return { found: found.length, left: wanted.length - found.length };
  }

  async #measure(wanted?: readonly string[]): Promise<{ outcome: 'done' | 'cancelled' | 'nothing-to-do' }> {
    const session = this.#need();
    if (this.#job) throw new InputError('Clips are being measured already; wait for the end or cancel.');
    const clips = wanted ?? session.unmeasuredClips();
    if (clips.length === 0) return { outcome: 'nothing-to-do' };
    const job = new MeasuringJob({
      engine: this.#parts.measuringEngine,
      session,
      clips,
      frameCounts: this.#clips.frameCounts(),
      onState: (state) => this.#showJob(job, state),
      onTracked: () => {
        if (this.#session !== session) return;
        this.#patch({ tracked: session.measured.tracked(session.test) });
        this.#results.refresh(session);
      },
    });
    this.#job = job;
    try {
      return { outcome: await job.run() };
    } finally {
      this.#job = null;
      if (this.#session === session) {
        this.#patch({ job: null });
      }
    }
  }

  #showJob(job: MeasuringJob, state: JobState): void {
    if (this.#job === job && this.#session) this.#patch({ job: state });
  }

  #sessionState(session: TestSession): Pick<BenchState, 'test' | 'save' | 'history' | 'tracked'> {
    const { history } = session;
    return {
      test: session.test,
      save: session.saveState,
      history: { undo: history.undoLabel, redo: history.redoLabel },
      tracked: session.measured.tracked(session.test),
    };
  }

  #clipPath(id: string): string {
    const session = this.#need();
    const clip = session.clip(id);
    if (!clip) throw new InputError(`There is no clip "${id}" in this test.`);
    return session.clipPath(clip);
  }

  #browseRoots(): string[] {
    const open = this.#session ? [dirname(this.#session.file.path)] : [];
    return [...this.#parts.browseRoots, ...open];
  }

  #need(): TestSession {
    if (!this.#session) throw new InputError('No test is open: open one, or drop clips to start a new one.');
    return this.#session;
  }

  /** What changes the test is done one after another, whatever the order of answers. */
  #inTurn<T>(work: () => Promise<T>): Promise<T> {
    const done = this.#turn.then(work);
    this.#turn = done.catch(() => undefined);
    return done;
  }

  #patch(patch: Partial<PartOfState>): void {
    this.#state = { ...this.#state, ...patch };
    this.#emit({ type: 'patch', patch });
  }

  #notice(notice: Notice): void {
    this.#emit({ type: 'notice', notice });
  }

  #emit(event: BenchEvent): void {
    for (const listener of [...this.#listeners]) listener(event);
  }
}
