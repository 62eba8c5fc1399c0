/** What a tracked feature is for; a `still` one is placed by the program on the rule, to see what the clip does to a thing at rest. */
export type TrackRole = 'response' | 'drive' | 'ground' | 'still';

/** States of a marker in a frame, as stored in `MarkerTrack.state`. */
export const TRACK_STATE = { ok: 0, doubtful: 1, lost: 2 } as const;

/** One marker through one clip. Arrays have one entry per decoded frame; NaN where the marker was lost. */
export interface MarkerTrack {
  readonly id: string;
  readonly role: TrackRole;
  /** Where the marker was seen, pixels as displayed. */
  readonly xPx: Float64Array;
  readonly yPx: Float64Array;
  /** Likeness to the template (zero-mean normalised cross-correlation), at most 1; NaN where nothing was compared. */
  readonly score: Float64Array;
  /** One of TRACK_STATE. */
  readonly state: Uint8Array;
  /** Median standard uncertainty of one frame's position from image noise, px; null where never seen. */
  readonly medianUPx: number | null;
  /** Side of the patch, px. */
  readonly patchPx: number;
  /** Fraction of the patch that is clipped white or black where it was marked, 0 to 1. */
  readonly saturatedFraction: number;
  /** Why it could not be followed; null where it could. */
  readonly error: string | null;
}

/** Everything that was read off one clip: from here on no picture is needed. */
export interface ClipTracks {
  readonly clip: string;
  /** Index of each decoded frame in the clip. */
  readonly frameIndex: Int32Array;
  /** Time of each decoded frame, s of true time from the clip's first frame (slow motion undone). */
  readonly timesS: Float64Array;
  readonly markers: readonly MarkerTrack[];
  readonly facts: ClipFacts;
  /** What the user should know of the clip, one sentence each. */
  readonly warnings: readonly string[];
}

/** What the clip is, as far as the measurement needs it. */
export interface ClipFacts {
  readonly frameCount: number;
  readonly durationS: number;
  readonly codec: string;
  readonly displayedWidth: number;
  readonly displayedHeight: number;
  readonly rotationDeg: 0 | 90 | 180 | 270;
  readonly pixelAspect: number;
  /** Frames per second of true time; null for a single frame. */
  readonly frameRate: number | null;
  /** Frames per second as the file's own clock has it; null for a single frame. */
  readonly fileFrameRate: number | null;
  /** Capture rate that was used to undo slow motion; null where the file's clock is true time. */
  readonly captureFps: number | null;
  /** One tick of the file's clock in s of true time. */
  readonly tickS: number;
  /** RMS scatter of the timestamps about an even rate, s; null below three frames. */
  readonly jitterRmsS: number | null;
  /** Frames that the file holds but that did not decode. */
  readonly undecodedFrames: number;
  readonly sha256: string | null;
  readonly fileBytes: number;
}

/** A clip that could not be read or tracked, with the reason in one sentence. */
export interface ClipFailure {
  readonly clip: string;
  readonly error: string;
}

/** A clip's tracks, or why there are none. */
export type ClipOutcome = ClipTracks | ClipFailure;

/** Whether a clip was tracked. */
export function isTracked(outcome: ClipOutcome): outcome is ClipTracks {
  return !('error' in outcome);
}
