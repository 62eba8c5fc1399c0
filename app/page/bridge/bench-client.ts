import type { BenchEvent } from '../../shared/bench-state.ts';
import type { InputOf, OperationName, OutputOf } from '../../shared/operations.ts';

/** The page's way to its host, whichever it is. */
export interface BenchClient {
  /** Calls an operation of the table. Rejects with a CallError. */
  call<N extends OperationName>(name: N, input: InputOf<N>): Promise<OutputOf<N>>;
  /** Receives the whole state once, and then every event. */
  subscribe(listener: (event: BenchEvent) => void, onConnection: (connected: boolean) => void): void;
  /**
   * Paths, on the host, of files that were dropped or chosen.
   * @param folder name of the folder they were dropped in, for hosts that must copy them
   */
  pathsOf(
    files: readonly File[],
    folder: string | null,
    onProgress: (text: string) => void,
  ): Promise<string[]>;
}

/** A call that did not succeed; the message is for the user as it stands. */
export class CallError extends Error {
  override readonly name = 'CallError';
  /** Stopped on request, or overtaken by a later one: nothing to tell. */
  readonly cancelled: boolean;

  constructor(message: string, cancelled = false) {
    super(message);
    this.cancelled = cancelled;
  }
}
