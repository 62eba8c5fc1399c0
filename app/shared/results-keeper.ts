import type { Results } from '../../src/engine/results.ts';
import type { Engine } from './engine.ts';
import { mergeResults } from './merge-results.ts';
import type { TestSession } from './test-session.ts';

/** Keeps the results in step with the test: a fit after each change, the latest change only. */
export class ResultsKeeper {
  readonly #engine: Engine;
  readonly #onResults: (results: Results | null) => void;
  #wanted: TestSession | null = null;
  #running = false;

  constructor(engine: Engine, onResults: (results: Results | null) => void) {
    this.#engine = engine;
    this.#onResults = onResults;
  }

  /** Says that the test or its measurements changed. */
  refresh(session: TestSession): void {
    this.#wanted = session;
    if (!this.#running) void this.#run();
  }

  async #run(): Promise<void> {
    this.#running = true;
    while (this.#wanted) {
      const session = this.#wanted;
      this.#wanted = null;
      const { test } = session;
      const measured = test.clips
        .map((clip) => session.measured.of(test, clip.id))
        .filter((each) => each !== null);
      try {
        const fitted = await this.#engine.call('fit', { test: session.testToSave() });
        // Shown although a change may have come meanwhile: the next turn follows at once.
        this.#onResults(mergeResults(test, fitted, measured));
      } catch {
        this.#onResults(null);
      }
    }
    this.#running = false;
  }
}
