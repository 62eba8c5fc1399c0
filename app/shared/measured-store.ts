import type { DwellResult, Results, RingDownResult } from '../../src/engine/results.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import type { MeasuredClips } from './engine.ts';
import { measuringInputs, trackingInputs } from './measuring-inputs.ts';
import type { MotionTrack } from './tracks-bytes.ts';

const MOST_TRACKS = 300; // motion records kept; an older clip is read again when its record is asked for

interface MeasuredClip {
  readonly inputs: string;
  readonly results: Results;
}

/**
 * What has been measured since the test was opened, kept with the inputs it was measured from: after an undo the
 * earlier results are valid again, after an edit they are not shown.
 */
export class MeasuredStore {
  readonly #measured = new Map<string, MeasuredClip>();
  readonly #tracks = new Map<string, MotionTrack>();

  /** Keeps the results of clips, measured from this state of the test. */
  add(test: TestFile, measured: MeasuredClips): void {
    for (const track of measured.tracks) {
      const key = trackKey(test, track.clip);
      this.#tracks.delete(key);
      this.#tracks.set(key, {
        clip: track.clip,
        frame: Float64Array.from(track.frameIndex),
        timeS: track.timesS,
        displacementMm:
          measured.displacementMm.get(track.clip) ?? new Float64Array(track.timesS.length).fill(Number.NaN),
        markers: track.markers
          .filter((marker) => marker.role !== 'still')
          .map(({ id, role, error, xPx, yPx, score, state }) => {
            return { id, role, error, xPx, yPx, score, state: Float64Array.from(state) };
          }),
      });
    }
    for (const key of this.#tracks.keys()) {
      if (this.#tracks.size <= MOST_TRACKS) break;
      this.#tracks.delete(key);
    }
    for (const { id } of measured.results.clips) {
      const inputs = measuringInputs(test, id);
      this.#measured.set(`${id}\n${inputs}`, { inputs, results: onlyOf(measured.results, id) });
    }
  }

  /** Results of a clip as the test stands; null where it was not measured so. */
  of(test: TestFile, clip: string): Results | null {
    return this.#measured.get(`${clip}\n${measuringInputs(test, clip)}`)?.results ?? null;
  }

  /** The motion record of a clip as its markers stand; null where it was not tracked so. */
  track(test: TestFile, clip: string): MotionTrack | null {
    return this.#tracks.get(trackKey(test, clip)) ?? null;
  }

  /** Clips with a motion record. */
  tracked(test: TestFile): string[] {
    return test.clips.map((each) => each.id).filter((id) => this.#tracks.has(trackKey(test, id)));
  }
}

function trackKey(test: TestFile, clip: string): string {
  return `${clip}\n${trackingInputs(test, clip)}`;
}

function onlyOf(results: Results, clip: string): Results {
  const ofClip = (each: DwellResult | RingDownResult): boolean => each.clip === clip;
  return {
    ...results,
    clips: results.clips.filter((each) => each.id === clip),
    dwells: results.dwells.filter(ofClip),
    ringdowns: results.ringdowns.filter(ofClip),
    resonances: [],
  };
}
