import type { MessagePort } from 'node:worker_threads';
import type { EngineCallName } from './engine.ts';
import { type EngineHandlers, type FromEngine, type ToEngine, toFailure } from './engine-protocol.ts';

type AnyHandler = (
  args: unknown,
  context: { signal: AbortSignal; progress: (value: unknown) => void },
) => Promise<unknown>;

/** Answers the calls that come through a port with the handlers given; several may be under way at once. */
export function serveEngine(port: MessagePort, handlers: EngineHandlers): void {
  const running = new Map<number, AbortController>();
  const post = (message: FromEngine): void => port.postMessage(message);

  const answer = async (id: number, name: EngineCallName, args: unknown): Promise<void> => {
    const controller = new AbortController();
    running.set(id, controller);
    try {
      const handler = handlers[name] as unknown as AnyHandler;
      const progress = (value: unknown): void => post({ kind: 'progress', id, progress: value });
      post({ kind: 'answer', id, answer: await handler(args, { signal: controller.signal, progress }) });
    } catch (error) {
      post({ kind: 'failure', id, failure: toFailure(error) });
    } finally {
      running.delete(id);
    }
  };

  port.on('message', (message: ToEngine) => {
    if (message.kind === 'cancel') running.get(message.id)?.abort();
    else void answer(message.id, message.name, message.args);
  });
}
