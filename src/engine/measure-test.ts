import type { TestFile } from '../testfile/schema.ts';
import type { ClipOutcome } from './clip-tracks.ts';
import { type Evaluation, evaluateTest } from './evaluate-test.ts';
import { type TrackTestOptions, trackTest } from './track-test.ts';

/** A measured test: results, displacements, and the tracks they were made from. */
export interface Measurement extends Evaluation {
  readonly outcomes: ReadonlyMap<string, ClipOutcome>;
}

/**
 * Measures a test: tracks its clips, then evaluates everything that follows from the tracks.
 * @throws CancelledError when stopped; InputError when no ffmpeg is found
 */
export async function measureTest(test: TestFile, options: TrackTestOptions): Promise<Measurement> {
  const outcomes = await trackTest(test, options);
  return { ...evaluateTest(test, outcomes), outcomes };
}
