import { type ClipOutcome, isTracked } from '../../src/engine/clip-tracks.ts';
import type { Results } from '../../src/engine/results.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import type { KeyedClip } from './engine.ts';
import { measuringInputs, trackingInputs } from './measuring-inputs.ts';

/**
 * What has been tracked since the test was opened, kept with the inputs it was tracked from, and the latest results:
 * after an undo earlier tracks are valid again, after an edit of a marker they are not used.
 */
export class MeasuredStore {
  readonly #outcomes = new Map<string, ClipOutcome>();
  #results: Results | null = null;
  #inputs: ReadonlyMap<string, string> = new Map();

  /** Keeps what came of tracking a clip with the markers of this state of the test. */
  add(test: TestFile, outcome: ClipOutcome): void {
    this.#outcomes.set(trackKey(test, outcome.clip), outcome);
  }

  /** Keeps the results that an evaluation of this state of the test gave. */
  setResults(test: TestFile, results: Results): void {
    this.#results = results;
    this.#inputs = new Map(test.clips.map(({ id }) => [id, measuringInputs(test, id)]));
  }

  /** The latest results; null before the first evaluation. */
  get results(): Results | null {
    return this.#results;
  }

  /** What came of tracking a clip as its markers stand; undefined where it was not tracked so. */
  outcome(test: TestFile, clip: string): ClipOutcome | undefined {
    return this.#outcomes.get(trackKey(test, clip));
  }

  /** Whether the latest results hold for a clip that was tracked since the test was opened. */
  holdsFor(test: TestFile, clip: string): boolean {
    return this.outcome(test, clip) !== undefined && this.#inputs.get(clip) === measuringInputs(test, clip);
  }

  /** The clips that go into an evaluation of the test as it stands. */
  keyedClips(test: TestFile): KeyedClip[] {
    return test.clips
      .map(({ id }) => ({ clip: id, key: trackKey(test, id) }))
      .filter(({ key }) => this.#outcomes.has(key));
  }

  /** Tracks by their keys, for an engine that does not hold them. */
  byKey(keys: readonly string[]): [string, ClipOutcome][] {
    return keys.flatMap((key) => {
      const outcome = this.#outcomes.get(key);
      return outcome ? [[key, outcome] as [string, ClipOutcome]] : [];
    });
  }

  /** Clips with a motion record. */
  tracked(test: TestFile): string[] {
    return test.clips
      .map((each) => each.id)
      .filter((id) => {
        const outcome = this.outcome(test, id);
        return outcome !== undefined && isTracked(outcome);
      });
  }
}

function trackKey(test: TestFile, clip: string): string {
  return `${clip}\n${trackingInputs(test, clip)}`;
}
