import type { BenchEvent } from '../../shared/bench-state.ts';
import type { InputOf, OperationName, OutputOf } from '../../shared/operations.ts';
import { type BenchClient, CallError } from './bench-client.ts';

const GONE = 'Dwellbook does not answer any more. Start it again; everything up to now is saved.';

async function failureOf(response: Response): Promise<CallError> {
  const text = await response.text();
  try {
    const failure = JSON.parse(text) as { name?: unknown; message?: unknown };
    return new CallError(String(failure.message), failure.name === 'CancelledError');
  } catch {
    return new CallError(response.status === 401 ? GONE : text || GONE);
  }
}

/** The host at a loopback address: calls by POST, events as server-sent events, dropped files as uploads. */
export class LoopbackClient implements BenchClient {
  async call<N extends OperationName>(name: N, input: InputOf<N>): Promise<OutputOf<N>> {
    const response = await fetch(`/op/${name}`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify(input),
    }).catch(() => {
      throw new CallError(GONE);
    });
    if (response.status === 204) throw new CallError('Stopped, or overtaken by a later call.', true);
    if (!response.ok) throw await failureOf(response);
    const isBytes = response.headers.get('Content-Type') === 'application/octet-stream';
    const output: unknown = isBytes ? new Uint8Array(await response.arrayBuffer()) : await response.json();
    return output as OutputOf<N>;
  }

  subscribe(listener: (event: BenchEvent) => void, onConnection: (connected: boolean) => void): void {
    const source = new EventSource('/events');
    source.onopen = () => onConnection(true);
    source.onerror = () => onConnection(false);
    source.onmessage = (message: MessageEvent<string>) => listener(JSON.parse(message.data) as BenchEvent);
  }

  async pathsOf(
    files: readonly File[],
    folder: string | null,
    onProgress: (text: string) => void,
  ): Promise<string[]> {
    const paths: string[] = [];
    for (const [index, file] of files.entries()) {
      onProgress(`Copying ${file.name} (${index + 1} of ${files.length})`);
      const query = new URLSearchParams({ name: file.name, ...(folder ? { folder } : {}) });
      const response = await fetch(`/upload?${query}`, { method: 'POST', body: file }).catch(() => {
        throw new CallError(`${file.name} could not be copied. ${GONE}`);
      });
      if (!response.ok) throw await failureOf(response);
      paths.push(((await response.json()) as { path: string }).path);
    }
    return paths;
  }
}
