import type { Engine, EngineCallName, EngineCallOptions, EngineCalls } from '../../app/shared/engine.ts';
import { CancelledError } from '../../src/errors.ts';

type Answers = {
  [N in EngineCallName]?: (
    args: EngineCalls[N]['args'],
    options: EngineCallOptions<N>,
  ) => EngineCalls[N]['answer'] | Promise<EngineCalls[N]['answer']>;
};

/** An engine whose answers a test gives; a call that the test did not expect fails. */
export class FakeEngine implements Engine {
  readonly calls: { name: EngineCallName; args: unknown }[] = [];
  closed = false;
  readonly #answers: Answers;

  constructor(answers: Answers = {}) {
    this.#answers = answers;
  }

  async call<N extends EngineCallName>(
    name: N,
    args: EngineCalls[N]['args'],
    options: EngineCallOptions<N> = {},
  ): Promise<EngineCalls[N]['answer']> {
    if (options.signal?.aborted) throw new CancelledError();
    this.calls.push({ name, args });
    const answer = this.#answers[name];
    if (!answer) throw new Error(`the engine was not expected to be asked for ${name}`);
    return answer(args, options);
  }

  async close(): Promise<void> {
    this.closed = true;
  }
}
