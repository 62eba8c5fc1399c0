import type { ClipTracks } from '../../src/engine/clip-tracks.ts';
import type { MeasureProgress } from '../../src/engine/progress.ts';
import type { Results } from '../../src/engine/results.ts';
import type { FoundClip, WantedClip } from '../../src/testfile/find-clips.ts';
import type { PointPx, TestFile } from '../../src/testfile/schema.ts';
import type { SpotJudgement } from '../../src/track/template.ts';
import type { ClipView } from './clip-view.ts';

/** One displayed frame as a JPEG picture. */
export interface FramePicture {
  readonly frame: number;
  readonly jpeg: Uint8Array;
}

/** What a measurement gives: the results of the clips asked for, and where their markers were seen. */
export interface MeasuredClips {
  readonly results: Results;
  readonly tracks: readonly ClipTracks[];
  /** Displacement of the response marker along the motion axis, mm, one entry a frame, NaN where lost; by clip id. */
  readonly displacementMm: ReadonlyMap<string, Float64Array>;
}

/** The calls the engine answers in its worker thread: arguments, answer, and what is sent on the way. */
export interface EngineCalls {
  probe: { args: { path: string }; answer: Omit<ClipView, 'id'>; progress: never };
  frames: {
    args: { path: string; first: number; count: number; widthPx: number };
    answer: number;
    progress: FramePicture;
  };
  judgeSpot: {
    args: { path: string; frame: number; at: PointPx; sizePx?: number };
    answer: SpotJudgement;
    progress: never;
  };
  measure: {
    args: { test: TestFile; testPath: string; clips: readonly string[] };
    answer: MeasuredClips;
    progress: MeasureProgress;
  };
  fit: { args: { test: TestFile }; answer: Results; progress: never };
  hash: { args: { path: string }; answer: string; progress: never };
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
