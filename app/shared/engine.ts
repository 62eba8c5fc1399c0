import type { ClipOutcome } from '../../src/engine/clip-tracks.ts';
import type { ConfigurationPlan } from '../../src/engine/plan-test.ts';
import type { MeasureProgress } from '../../src/engine/progress.ts';
import type { Results } from '../../src/engine/results.ts';
import type { FoundClip, WantedClip } from '../../src/testfile/find-clips.ts';
import type { PointPx, TestFile } from '../../src/testfile/schema.ts';
import type { SpotJudgement } from '../../src/track/template.ts';
import type { ComparisonAnswer } from './answers.ts';
import type { ClipView } from './clip-view.ts';

/** One displayed frame as a JPEG picture. */
export interface FramePicture {
  readonly frame: number;
  readonly jpeg: Uint8Array;
}

/** The clips whose tracks go into an evaluation, each with the key under which its tracks were given. */
export interface KeyedClip {
  readonly clip: string;
  readonly key: string;
}

/** An evaluated test, or the keys of tracks that the engine does not hold and wants to be given first. */
export type EvaluationAnswer =
  | { readonly results: Results; readonly wanting: null }
  | { readonly results: null; readonly wanting: readonly string[] };

/** The calls the engine answers in its worker thread: arguments, answer, and what is sent on the way. */
export interface EngineCalls {
  probe: { args: { path: string }; answer: Omit<ClipView, 'id'>; progress: never };
  frames: {
    args: { path: string; first: number; count: number; widthPx: number; onlyKeyFrames: boolean };
    answer: number;
    progress: FramePicture;
  };
  judgeSpot: {
    args: { path: string; frame: number; at: PointPx; sizePx?: number };
    answer: SpotJudgement;
    progress: never;
  };
  /** Tracks one clip. */
  track: {
    args: { test: TestFile; testPath: string; clip: string };
    answer: ClipOutcome;
    progress: MeasureProgress;
  };
  /** Gives the engine tracks to hold for evaluations. */
  holdTracks: {
    args: { tracks: readonly (readonly [string, ClipOutcome])[] };
    answer: null;
    progress: never;
  };
  /** Everything that follows from tracks, from typed amplitudes, and from what the dwells carry from before. */
  evaluate: {
    args: { test: TestFile; clips: readonly KeyedClip[] };
    answer: EvaluationAnswer;
    progress: never;
  };
  /** Run sheet advice of every configuration, from what is known of the test so far. */
  plan: {
    args: { test: TestFile; results: Results };
    answer: readonly ConfigurationPlan[];
    progress: never;
  };
  /** The configurations side by side. */
  compare: { args: { test: TestFile; results: Results }; answer: ComparisonAnswer; progress: never };
  /** The report of the test as of the last evaluation, as one HTML file. */
  report: { args: { test: TestFile }; answer: string; progress: never };
  /** The motion record of a clip as of the last evaluation, packed; null where it has none. */
  motion: { args: { clip: string }; answer: Uint8Array | null; progress: never };
  findClips: {
    args: { folder: string; wanted: readonly WantedClip[] };
    answer: readonly FoundClip[];
    progress: never;
  };
}

export type EngineCallName = keyof EngineCalls;

/** How to follow and stop a call. */
export interface EngineCallOptions<N extends EngineCallName> {
  readonly signal?: AbortSignal;
  readonly onProgress?: (progress: EngineCalls[N]['progress']) => void;
}

/**
 * The engine as the bench sees it. A call rejects with InputError where the user's files are at fault or the engine
 * itself stopped (it is started again for the next call), and with CancelledError when stopped by its signal.
 */
export interface Engine {
  call<N extends EngineCallName>(
    name: N,
    args: EngineCalls[N]['args'],
    options?: EngineCallOptions<N>,
  ): Promise<EngineCalls[N]['answer']>;
  close(): Promise<void>;
}
