import type { BenchEvent } from '../../shared/bench-state.ts';
import type { ElectronBridge } from '../../shared/electron-bridge.ts';
import type { InputOf, OperationName, OutputOf } from '../../shared/operations.ts';
import { type BenchClient, CallError } from './bench-client.ts';

/** The host in Electron's main process, over the bridge that preload put into the page. */
export class ElectronClient implements BenchClient {
  readonly #bridge: ElectronBridge;

  constructor(bridge: ElectronBridge) {
    this.#bridge = bridge;
  }

  async call<N extends OperationName>(name: N, input: InputOf<N>): Promise<OutputOf<N>> {
    const outcome = await this.#bridge.call(name, input);
    if (outcome.ok) return outcome.output as OutputOf<N>;
    throw new CallError(outcome.failure.message, outcome.failure.name === 'CancelledError');
  }

  subscribe(listener: (event: BenchEvent) => void, onConnection: (connected: boolean) => void): void {
    this.#bridge.subscribe(listener);
    void this.#bridge.call('hello', {}).then(() => onConnection(true));
  }

  async pathsOf(files: readonly File[]): Promise<string[]> {
    return files.map((file) => this.#bridge.pathOf(file)).filter((path) => path !== '');
  }
}
