import type { ConfigurationPlan } from '../../src/engine/plan-test.ts';
import type { Results } from '../../src/engine/results.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import type { Preferences } from './preferences.ts';

/** What the page shows: a mirror of the host's state, sent whole once and then in patches by key. */
export interface BenchState {
  readonly host: HostFacts;
  /** The open test; null on the empty bench. */
  readonly test: TestFile | null;
  readonly file: OpenFile | null;
  readonly save: SaveState;
  /** What undo and redo would do, in words; null where there is nothing. */
  readonly history: { readonly undo: string | null; readonly redo: string | null };
  /** Results for the test as it stands: dwells whose inputs changed since they were measured are not in it. */
  readonly results: Results | null;
  /** Run sheet advice of each configuration; null until it has been worked out. */
  readonly plans: readonly ConfigurationPlan[] | null;
  /** Clips whose motion record can be asked for. */
  readonly tracked: readonly string[];
  /** Clips whose file is not where the test file says. */
  readonly missing: readonly string[];
  readonly job: JobState | null;
  readonly recent: readonly RecentTest[];
  readonly preferences: Preferences;
}

/** What the host is and can do. */
export interface HostFacts {
  readonly kind: 'electron' | 'loopback';
  /** Whether the host shows the system's own file dialogs; otherwise the page shows its own. */
  readonly nativeDialogs: boolean;
  /** Program name and version. */
  readonly program: string;
}

/** The open test's file. */
export interface OpenFile {
  readonly path: string;
  /** File name without folders. */
  readonly name: string;
  /** Why nothing is saved to it; null where edits are saved as they are made. */
  readonly readOnly: string | null;
  /** Goes up with every test opened, so that the page can forget what it showed of the one before. */
  readonly opening: number;
}

/** Whether everything done so far is in the file. */
export interface SaveState {
  readonly status: 'saved' | 'saving' | 'unsaved';
  /** When it was last saved, ms since 1970; null if not since it was opened. */
  readonly atMs: number | null;
  /** Why saving does not succeed at present, one sentence; it is tried again by itself. */
  readonly error: string | null;
}

/** A measurement under way. */
export interface JobState {
  readonly id: number;
  /** Clip being read. */
  readonly clip: string;
  readonly clipIndex: number;
  readonly clipCount: number;
  readonly frame: number;
  /** Null before it is known. */
  readonly frameCount: number | null;
  readonly framesPerS: number | null;
  /** Rough time to the end of the job, s; null before it can be told. */
  readonly leftS: number | null;
  readonly cancelling: boolean;
}

/** A test opened before. */
export interface RecentTest {
  readonly path: string;
  readonly title: string;
  readonly openedMs: number;
}

/** Something to tell, shown where it does not get in the way. */
export interface Notice {
  readonly level: 'info' | 'caution' | 'error';
  readonly text: string;
}

/** What the host pushes to the page. */
export type BenchEvent =
  | { readonly type: 'patch'; readonly patch: Partial<BenchState> }
  | { readonly type: 'notice'; readonly notice: Notice }
  /** A command chosen from the host's menu. */
  | { readonly type: 'command'; readonly command: string };
