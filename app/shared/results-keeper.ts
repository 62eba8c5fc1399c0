import type { ConfigurationPlan } from '../../src/engine/plan-test.ts';
import type { Results } from '../../src/engine/results.ts';
import type { Engine } from './engine.ts';
import type { TestSession } from './test-session.ts';

/** Keeps the results in step with the test: an evaluation after each change, the latest change only. */
export class ResultsKeeper {
  readonly #engine: Engine;
  readonly #onResults: (session: TestSession, results: Results) => void;
  readonly #onPlans: (session: TestSession, plans: readonly ConfigurationPlan[]) => void;
  readonly #onTrouble: (error: unknown) => void;
  #wanted: TestSession | null = null;
  #running: Promise<void> | null = null;

  constructor(
    engine: Engine,
    onResults: (session: TestSession, results: Results) => void,
    onPlans: (session: TestSession, plans: readonly ConfigurationPlan[]) => void,
    onTrouble: (error: unknown) => void,
  ) {
    this.#engine = engine;
    this.#onResults = onResults;
    this.#onPlans = onPlans;
    this.#onTrouble = onTrouble;
  }

  /** Says that the test or its tracks changed. Plans follow when no further change is waiting. */
  refresh(session: TestSession): void {
    this.#wanted = session;
    this.#running ??= this.#run().finally(() => {
      this.#running = null;
    });
  }

  /** Done when the evaluation that is under way has come to its end. */
  async settled(): Promise<void> {
    await this.#running;
  }

  async #run(): Promise<void> {
    while (this.#wanted) {
      const session = this.#wanted;
      this.#wanted = null;
      try {
        const { test } = session;
        const results = await this.#evaluate(session);
        session.measured.setResults(test, results);
        // Shown although a change may have come meanwhile: the next turn follows at once.
        this.#onResults(session, results);
        if (this.#wanted === null) this.#onPlans(session, await this.#engine.call('plan', { test, results }));
      } catch (error) {
        this.#onTrouble(error);
      }
    }
  }

  async #evaluate(session: TestSession): Promise<Results> {
    const args = { test: session.testToSave(), clips: session.measured.keyedClips(session.test) };
    for (let attempt = 0; attempt < 3; attempt++) {
      const answer = await this.#engine.call('evaluate', args);
      if (answer.results) return answer.results;
      await this.#engine.call('holdTracks', { tracks: session.measured.byKey(answer.wanting) });
    }
    throw new Error('the engine does not hold the tracks it was given');
  }
}
