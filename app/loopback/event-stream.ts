import type { ServerResponse } from 'node:http';
import type { Bench } from '../shared/bench.ts';
import type { BenchEvent } from '../shared/bench-state.ts';
import { PAGE_HEADERS } from '../shared/content-policy.ts';

const HEARTBEAT_MS = 15_000; // a page that went without a word is noticed by the failing write

/** Pushes the bench's events to one page as server-sent events: the whole state first, then patches. */
export function streamEvents(bench: Bench, response: ServerResponse, onEnd: () => void): void {
  response.writeHead(200, { ...PAGE_HEADERS, 'Content-Type': 'text/event-stream; charset=utf-8' });
  const send = (event: BenchEvent): void => {
    response.write(`data: ${JSON.stringify(event)}\n\n`);
  };
  send({ type: 'patch', patch: bench.state() });
  const unsubscribe = bench.subscribe(send);
  const heartbeat = setInterval(() => response.write(': still here\n\n'), HEARTBEAT_MS);
  let ended = false;
  const end = (): void => {
    if (ended) return;
    ended = true;
    clearInterval(heartbeat);
    unsubscribe();
    onEnd();
  };
  response.once('close', end);
  response.once('error', end);
}
