import { Worker } from 'node:worker_threads';
import { CancelledError, InputError } from '../../src/errors.ts';
import type { Engine, EngineCallName, EngineCallOptions, EngineCalls } from './engine.ts';
import { type FromEngine, fromFailure, type ToEngine } from './engine-protocol.ts';

interface Waiting {
  readonly resolve: (answer: unknown) => void;
  readonly reject: (error: Error) => void;
  readonly onProgress: ((progress: unknown) => void) | undefined;
}

/**
 * An engine in a worker thread. The thread is started with the first call; when it stops unexpectedly, the calls
 * under way fail with one sentence and the next call starts a new one.
 */
export class WorkerEngine implements Engine {
  readonly #script: URL | string;
  #worker: Worker | null = null;
  #nextId = 1;
  readonly #waiting = new Map<number, Waiting>();

  /** @param script the built worker, `dist/engine-worker.js` */
  constructor(script: URL | string) {
    this.#script = script;
  }

  async call<N extends EngineCallName>(
    name: N,
    args: EngineCalls[N]['args'],
    options: EngineCallOptions<N> = {},
  ): Promise<EngineCalls[N]['answer']> {
    if (options.signal?.aborted) throw new CancelledError();
    const worker = this.#running();
    const id = this.#nextId++;
    const cancel = (): void => this.#post(worker, { kind: 'cancel', id });
    options.signal?.addEventListener('abort', cancel, { once: true });
    try {
      const answer = await new Promise<unknown>((resolve, reject) => {
        this.#waiting.set(id, {
          resolve,
          reject,
          onProgress: options.onProgress as Waiting['onProgress'],
        });
        this.#post(worker, { kind: 'call', id, name, args });
      });
      return answer as EngineCalls[N]['answer'];
    } finally {
      this.#waiting.delete(id);
      options.signal?.removeEventListener('abort', cancel);
    }
  }

  async close(): Promise<void> {
    const worker = this.#worker;
    this.#worker = null;
    await worker?.terminate();
    this.#failAll(new CancelledError());
  }

  #running(): Worker {
    if (this.#worker) return this.#worker;
    const worker = new Worker(this.#script);
    this.#worker = worker;
    worker.on('message', (message: FromEngine) => this.#receive(message));
    worker.on('error', (error) =>
      this.#stopped(worker, error instanceof Error ? error.message : String(error)),
    );
    worker.on('exit', (code) => this.#stopped(worker, `exit code ${code}`));
    worker.unref();
    return worker;
  }

  #post(worker: Worker, message: ToEngine): void {
    worker.postMessage(message);
  }

  #receive(message: FromEngine): void {
    const waiting = this.#waiting.get(message.id);
    if (message.kind === 'progress') waiting?.onProgress?.(message.progress);
    else if (message.kind === 'answer') waiting?.resolve(message.answer);
    else waiting?.reject(fromFailure(message.failure));
  }

  #stopped(worker: Worker, reason: string): void {
    if (this.#worker !== worker) return;
    this.#worker = null;
    this.#failAll(
      new InputError(
        `The measuring engine stopped unexpectedly (${reason}); nothing is lost, try again or measure the clips one by one to find the one it stops at.`,
      ),
    );
  }

  #failAll(error: Error): void {
    for (const waiting of [...this.#waiting.values()]) waiting.reject(error);
    this.#waiting.clear();
  }
}
