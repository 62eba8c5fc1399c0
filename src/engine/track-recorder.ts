import type { ClipInfo } from '../clip/clip-info.ts';
import { toDisplayed } from '../clip/coordinates.ts';
import type { TrackStep } from '../track/track-step.ts';
import { type MarkerTrack, TRACK_STATE } from './clip-tracks.ts';
import type { PreparedMarker } from './prepare-markers.ts';

/** Collects what was seen of one marker frame by frame, in coded pixels, and hands it out as displayed. */
export class TrackRecorder {
  private readonly x: Float64Array;
  private readonly y: Float64Array;
  private readonly score: Float64Array;
  private readonly state: Uint8Array;
  private readonly uPx: number[] = [];
  private count = 0;

  /** @param capacity frames at most */
  constructor(
    private readonly marker: PreparedMarker,
    capacity: number,
  ) {
    this.x = new Float64Array(capacity).fill(Number.NaN);
    this.y = new Float64Array(capacity).fill(Number.NaN);
    this.score = new Float64Array(capacity).fill(Number.NaN);
    this.state = new Uint8Array(capacity).fill(TRACK_STATE.lost);
  }

  /** Frames recorded so far. */
  get frames(): number {
    return this.count;
  }

  /** Adds the outcome of the next frame; a picture built on damaged data counts as doubtful at best. */
  add(step: TrackStep, pictureDoubtful: boolean): void {
    const i = this.count++;
    this.score[i] = step.score ?? Number.NaN;
    if (step.state === 'lost') return;
    this.x[i] = step.x;
    this.y[i] = step.y;
    this.state[i] = step.state === 'ok' && !pictureDoubtful ? TRACK_STATE.ok : TRACK_STATE.doubtful;
    if (step.uPx !== null) this.uPx.push(step.uPx);
  }

  /** Position in a recorded frame, coded pixels; null where the marker was lost there. */
  at(i: number): { x: number; y: number } | null {
    const x = this.x[i];
    const y = this.y[i];
    return x === undefined || y === undefined || !Number.isFinite(x) || !Number.isFinite(y) ? null : { x, y };
  }

  /** Whether a recorded frame counts as well measured. */
  isOk(i: number): boolean {
    return this.state[i] === TRACK_STATE.ok;
  }

  /** The track, pixels as displayed. */
  finish(info: ClipInfo, error: string | null): MarkerTrack {
    const xPx = this.x.slice(0, this.count);
    const yPx = this.y.slice(0, this.count);
    for (let i = 0; i < this.count; i++) {
      const seen = this.at(i);
      if (!seen) continue;
      const shown = toDisplayed(seen, info);
      xPx[i] = shown.x;
      yPx[i] = shown.y;
    }
    const sorted = this.uPx.sort((a, b) => a - b);
    return {
      id: this.marker.id,
      role: this.marker.role,
      xPx,
      yPx,
      score: this.score.slice(0, this.count),
      state: this.state.slice(0, this.count),
      medianUPx: sorted[sorted.length >> 1] ?? null,
      patchPx: this.marker.template.widthPx,
      saturatedFraction: this.marker.judgement.saturatedFraction,
      error,
    };
  }
}
