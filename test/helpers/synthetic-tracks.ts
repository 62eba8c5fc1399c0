import {
  type ClipTracks,
  type MarkerTrack,
  TRACK_STATE,
  type TrackRole,
} from '../../src/engine/clip-tracks.ts';
import { seededRandom } from '../../src/numeric/seeded-random.ts';

/** Where a marker is at a time, pixels as displayed. */
export type Path = (timeS: number) => readonly [number, number];

/** What a simulated clip shows. */
export interface SyntheticClip {
  readonly id: string;
  readonly frames: number;
  readonly frameRate: number;
  readonly paths: Readonly<Partial<Record<TrackRole, Path>>>;
  /** Standard deviation of each coordinate, px. */
  readonly noisePx?: number;
  readonly seed?: number;
  /** Frames in which the response marker is covered. */
  readonly covered?: readonly number[];
  readonly codec?: string;
}

/** Tracks as a perfect tracker with white noise would give them. */
export function syntheticTracks(clip: SyntheticClip): ClipTracks {
  const { normal } = seededRandom(clip.seed ?? 1);
  const timesS = Float64Array.from({ length: clip.frames }, (_, i) => i / clip.frameRate);
  const noise = (): number => (clip.noisePx ? clip.noisePx * normal() : 0);
  const markers = Object.entries(clip.paths).map(([role, path]): MarkerTrack => {
    const xPx = timesS.map((t) => path(t)[0] + noise());
    const yPx = timesS.map((t) => path(t)[1] + noise());
    const state = new Uint8Array(clip.frames);
    if (role === 'response') {
      for (const i of clip.covered ?? []) {
        xPx[i] = Number.NaN;
        yPx[i] = Number.NaN;
        state[i] = TRACK_STATE.lost;
      }
    }
    return {
      id: role,
      role: role as TrackRole,
      xPx,
      yPx,
      score: new Float64Array(clip.frames).fill(0.99),
      state,
      medianUPx: clip.noisePx ?? 0.001,
      patchPx: 41,
      saturatedFraction: 0,
      error: null,
    };
  });
  return {
    clip: clip.id,
    frameIndex: Int32Array.from({ length: clip.frames }, (_, i) => i),
    timesS,
    markers,
    facts: {
      frameCount: clip.frames,
      durationS: clip.frames / clip.frameRate,
      codec: clip.codec ?? 'ffv1',
      displayedWidth: 1920,
      displayedHeight: 1080,
      rotationDeg: 0,
      pixelAspect: 1,
      frameRate: clip.frameRate,
      fileFrameRate: clip.frameRate,
      captureFps: null,
      tickS: 1 / 90000,
      jitterRmsS: 0,
      undecodedFrames: 0,
      sha256: null,
      fileBytes: 1,
    },
    warnings: [],
  };
}
